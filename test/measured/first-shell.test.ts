/**
 * The prediction against reality: first shells of three substances whose crystal structure is known beyond doubt. Blind: only
 * the energy origin is free. Free: S0², one distance scale, and for the compounds σ² of the first shell as well, since the
 * Debye model gives covalent and ionic first shells too much. k²-weighted, both sides through the same background removal.
 *
 * What was measured stands in the folder that measuredChi names; the lattices are those stated there.
 */
import { expect, test } from 'vitest';
import { correlatedDebye, morseThirdCumulant } from '../../packages/core/src/disorder/index.js';
import { elementBySymbol } from '../../packages/core/src/elements/index.js';
import { backgroundProjector } from '../../packages/core/src/evidence/index.js';
import { siteSignal } from '../../packages/core/src/predict/site-signal.js';
import { singleScattering } from '../../packages/core/src/scattering/index.js';
import { compareInR, PathSignal, PathSum } from '../../packages/core/src/spectrum/index.js';
import { findSites, readStructure } from '../../packages/core/src/structure/index.js';
import { CHROMIA, COPPER, cifOf, measuredChi, SPHALERITE, type Standard, skipped } from '../support/measured.js';
import { minimise } from '../support/minimise.js';

/** R-factor as a function of E0 shift, S0² (none: the best), distance scale and first-shell σ² scale. */
function comparison(standard: Standard, { k, chi }: { k: Float64Array; chi: Float64Array }) {
  const site = findSites(readStructure(cifOf(standard)), { absorber: standard.absorber, radius: 13 })[0]!;
  const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  const signal = siteSignal(site, { edge: 'K', selfEnergy: 'mean', radius: 6, maxLegs: 2, kMax: 18 }, clock);
  const { table, wave, paths, potential } = signal;
  const debye = correlatedDebye({ debyeTemperature: standard.debye, atomDensity: site.atomDensity!, temperature: standard.temperature });
  const thermal = paths.map(({ vertices, halfLength }) => {
    const route = vertices.map((atom) => {
      const { position, element } = site.atoms[atom]!;
      return { atom, position, element, mass: elementBySymbol(element).mass };
    });
    return { sigma2: debye.sigma2(route), zero: debye.sigma2AtZero(route), first: halfLength < 1.25 * paths[0]!.halfLength };
  });
  const project = backgroundProjector(k, { rLow: standard.rLow });
  const re = new Float64Array(table.k.length);
  const im = new Float64Array(table.k.length);
  const model = new Float64Array(k.length);
  const scaled = (alpha: number) =>
    paths.map((path) => {
      const stretched = { ...path, halfLength: alpha * path.halfLength };
      singleScattering(table, potential.sphereOfAtom[path.vertices[1]!]!, stretched.halfLength, re, im);
      return new PathSignal(stretched, table, wave, re, im);
    });
  const range = { rMin: standard.r[0], rMax: standard.r[1], kMin: 3, kMax: Math.min(standard.kMax, k.at(-1)!), kWeight: 2 };

  return (e0: number, s02: number | undefined, alpha: number, sigmaScale: number): { rFactor: number; s02: number } => {
    const disorder = thermal.map(({ sigma2, zero, first }) =>
      first ? { sigma2: sigma2 * sigmaScale, c3: morseThirdCumulant(sigma2 * sigmaScale, zero * sigmaScale) } : { sigma2, c3: 0 },
    );
    const sum = new PathSum(alpha === 1 ? signal.signals : scaled(alpha), wave, k, e0, table.k[0]!);
    project.apply(sum.sum(disorder, 1, model), model);
    const unit = compareInR({ k, data: chi, model, ...range });
    let cross = 0;
    let own = 0;
    for (let i = 0; i < unit.R.length; i++) {
      cross += unit.data.real[i]! * unit.model.real[i]! + unit.data.imaginary[i]! * unit.model.imaginary[i]!;
      own += unit.model.real[i]! ** 2 + unit.model.imaginary[i]! ** 2;
    }
    const amplitude = s02 ?? cross / own;
    return { rFactor: compareInR({ k, data: chi, model: model.map((value) => amplitude * value), ...range }).rFactor, s02: amplitude };
  };
}

/** Blind and free fits, printed for the record. */
function judge(standard: Standard, data: { k: Float64Array; chi: Float64Array }, freeSigma: boolean) {
  const compare = comparison(standard, data);
  const starts = [-12, -6, 0, 6].map((e0) => minimise(([x]) => compare(x!, 0.9, 1, 1).rFactor, [e0], [2]));
  const blind = starts.reduce((a, b) => (b.value < a.value ? b : a));
  const free = minimise(
    ([e0, alpha, sigma]) => compare(e0!, undefined, alpha!, sigma!).rFactor,
    [blind.x[0]!, 1, 1],
    [2, 0.004, freeSigma ? 0.2 : 0],
  );
  const [e0, alpha, sigma] = free.x as [number, number, number];
  console.log(
    `${standard.file}: blind R-factor ${blind.value.toFixed(4)} (E0 ${blind.x[0]!.toFixed(2)} eV); free ${free.value.toFixed(4)}, E0 ${e0.toFixed(2)} eV, distance × ${alpha.toFixed(4)}, S0² ${compare(e0, undefined, alpha, sigma).s02.toFixed(3)}, first-shell σ² × ${sigma.toFixed(2)}`,
  );
  return { blind: blind.value, alpha };
}

test('copper at 10 K: blind R-factor within 0.02, distance within 0.006 Å', ({ skip }) => {
  const data = measuredChi(COPPER.file);
  if (!data) return skip(skipped('copper'));
  const { blind, alpha } = judge(COPPER, data, false);
  expect(blind).toBeLessThanOrEqual(0.02);
  expect(Math.abs(alpha - 1) * 2.548).toBeLessThanOrEqual(0.006);
});

test('Cr2O3 at 100 K: first-shell distance within 0.01 Å', ({ skip }) => {
  const data = measuredChi(CHROMIA.file);
  if (!data) return skip(skipped('Cr2O3'));
  expect(Math.abs(judge(CHROMIA, data, true).alpha - 1) * 1.99).toBeLessThanOrEqual(0.01);
});

test('ZnS at 295 K: first-shell distance within 0.01 Å', ({ skip }) => {
  const data = measuredChi(SPHALERITE.file);
  if (!data) return skip(skipped('ZnS'));
  expect(Math.abs(judge(SPHALERITE, data, true).alpha - 1) * 2.342).toBeLessThanOrEqual(0.01);
});
