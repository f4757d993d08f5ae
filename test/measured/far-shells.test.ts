/**
 * All shells to 5 Å with multiple scattering to four legs, blind: S0² 0.9, only the energy origin free, k²-weighted, the same
 * background removal on both sides. For the compounds the thermal model is the question, so each is printed.
 */
import { expect, test } from 'vitest';
import { morseThirdCumulant } from '../../packages/core/src/disorder/index.js';
import { elementBySymbol } from '../../packages/core/src/elements/index.js';
import { backgroundProjector } from '../../packages/core/src/evidence/index.js';
import { DEFAULTS } from '../../packages/core/src/predict/options.js';
import { type SiteSignal, siteSignal } from '../../packages/core/src/predict/site-signal.js';
import { thermalModel } from '../../packages/core/src/predict/thermal.js';
import { compareInR, PathSum } from '../../packages/core/src/spectrum/index.js';
import { findSites, readStructure } from '../../packages/core/src/structure/index.js';
import { CHROMIA, COPPER, cifOf, measuredChi, SPHALERITE, type Standard, skipped } from '../support/measured.js';
import { minimise } from '../support/minimise.js';

const signals = new Map<string, SiteSignal>();
function signalOf(standard: Standard, maxLegs: number): SiteSignal {
  const key = `${standard.file} ${maxLegs}`;
  let found = signals.get(key);
  if (!found) {
    const site = findSites(readStructure(cifOf(standard)), { absorber: standard.absorber, radius: 12.7 })[0]!;
    const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
    found = siteSignal(site, { edge: 'K', selfEnergy: 'mean', radius: 5.7, maxLegs, kMax: 18 }, clock);
    signals.set(key, found);
  }
  return found;
}

/** Blind R-factor; with `sigmaScale` free the first shell's σ² may move as well, which parts disorder from potential. */
function blind(standard: Standard, thermal: 'debye' | 'springs', maxLegs: number, freeSigma = false): number | undefined {
  const data = measuredChi(standard.file);
  if (!data) return undefined;
  const { k, chi } = data;
  const { site, paths, signals: parts, wave, table } = signalOf(standard, maxLegs);
  const options = {
    ...DEFAULTS,
    absorber: standard.absorber,
    temperature: standard.temperature,
    debyeTemperature: standard.debye,
    thermal,
  };
  const model = thermalModel(readStructure(cifOf(standard)), site, options, [])!;
  const disorder = paths.map(({ vertices, halfLength, legs }) => {
    const route = vertices.map((atom) => {
      const { position, element } = site.atoms[atom]!;
      return { atom, position, element, mass: elementBySymbol(element).mass };
    });
    const first = legs === 2 && halfLength < 1.25 * paths[0]!.halfLength;
    return { sigma2: model.sigma2(route), zero: first ? model.sigma2AtZero(route) : 0, first };
  });
  const project = backgroundProjector(k, { rLow: standard.rLow });
  const range = { rMin: standard.r[0], rMax: 5, kMin: 3, kMax: Math.min(standard.kMax, k.at(-1)!), kWeight: 2 };
  const out = new Float64Array(k.length);
  const rFactor = (e0: number, scale: number): number => {
    const scaled = disorder.map(({ sigma2, zero, first }) =>
      first ? { sigma2: scale * sigma2, c3: morseThirdCumulant(scale * sigma2, scale * zero) } : { sigma2, c3: 0 },
    );
    project.apply(new PathSum(parts, wave, k, e0, table.k[0]!).sum(scaled, 0.9, out), out);
    return compareInR({ k, data: chi, model: out, ...range }).rFactor;
  };
  const starts = [-12, -6, 0, 6].map((e0) => minimise(([e, s]) => rFactor(e!, s!), [e0, 1], [2, freeSigma ? 0.2 : 0]));
  const { x, value } = starts.reduce((a, b) => (b.value < a.value ? b : a));
  console.log(
    `${standard.file}, ${thermal}, ${maxLegs} legs, ${paths.length} paths: R-factor ${value.toFixed(4)} (E0 ${x[0]!.toFixed(2)} eV${freeSigma ? `, first-shell σ² × ${x[1]!.toFixed(2)}` : ''})`,
  );
  return value;
}

test('copper at 10 K to 5 Å: blind R-factor within 0.02, and multiple scattering is what brings it there', ({ skip }) => {
  const whole = blind(COPPER, 'debye', 4);
  if (whole === undefined) return skip(skipped('copper'));
  expect(whole).toBeLessThanOrEqual(0.02);
  expect(blind(COPPER, 'debye', 2)!).toBeGreaterThan(3 * whole);
  blind(COPPER, 'springs', 4);
});

test('the compounds to 5 Å: Debye, springs, and the first shell freed, for the record', ({ skip }) => {
  for (const standard of [CHROMIA, SPHALERITE]) {
    const debye = blind(standard, 'debye', 4);
    if (debye === undefined) return skip(skipped(standard.file));
    expect(blind(standard, 'debye', 4, true)!).toBeLessThan(debye);
    blind(standard, 'springs', 4);
    blind(standard, 'springs', 4, true);
  }
});
