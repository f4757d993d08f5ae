/**
 * What the theory leaves over on measured standards, by self-energy: the relative rms residual of χ(R) over R 1 … 4 Å, the
 * square root of the R-factor, with E0, S0², one distance scale and two scales of σ² (first shell, all else) free. Paths to four
 * legs, k² weight, the same background removal on both sides. Printed for packages/core/docs/scattering-accuracy.md.
 */
import { expect, test } from 'vitest';
import { morseThirdCumulant } from '../../packages/core/src/disorder/index.js';
import { elementBySymbol } from '../../packages/core/src/elements/index.js';
import { backgroundProjector } from '../../packages/core/src/evidence/index.js';
import { DEFAULTS } from '../../packages/core/src/predict/options.js';
import { pathSignals, siteScattering } from '../../packages/core/src/predict/site-signal.js';
import { thermalModel } from '../../packages/core/src/predict/thermal.js';
import type { SelfEnergyName } from '../../packages/core/src/scattering/index.js';
import { compareInR, PathSum } from '../../packages/core/src/spectrum/index.js';
import { findSites, readStructure } from '../../packages/core/src/structure/index.js';
import { CHROMIA, COPPER, cifOf, measuredChi, SPHALERITE, type Standard, skipped } from '../support/measured.js';
import { minimise } from '../support/minimise.js';

const SELF_ENERGIES: readonly SelfEnergyName[] = ['mean', 'hedin-lundqvist', 'dirac-hara'];
const clock = () => ({ now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 });

interface Best {
  readonly residual: number;
  readonly alpha: number;
}

/** The free fit of one standard with one self-energy and one thermal model to begin from. */
function bestOf(standard: Standard, selfEnergy: SelfEnergyName, thermal: 'debye' | 'springs'): Best | undefined {
  const data = measuredChi(standard.file);
  if (!data) return undefined;
  const { k, chi } = data;
  const structure = readStructure(cifOf(standard));
  const site = findSites(structure, { absorber: standard.absorber, radius: 12 })[0]!;
  const options = { edge: 'K', selfEnergy, radius: 4.9, maxLegs: 4, kMax: 18 } as const;
  const scattering = siteScattering(site, options, clock());
  const { temperature, debye: debyeTemperature, absorber } = standard;
  const model = thermalModel(structure, site, { ...DEFAULTS, absorber, temperature, debyeTemperature, thermal }, [])!;
  const project = backgroundProjector(k, { rLow: standard.rLow });
  const range = { rMin: 1, rMax: 4, kMin: 3, kMax: Math.min(standard.kMax, k.at(-1)!), kWeight: 2 };
  const out = new Float64Array(k.length);

  /** The best of E0, S0² and the two σ² scales at one distance scale, amplitudes computed for the lattice so stretched. */
  const atScale = (alpha: number, start: readonly number[]) => {
    const [cx, cy, cz] = site.atoms[0]!.position;
    const moved = {
      ...site,
      atoms: site.atoms.map((atom) => {
        const [x, y, z] = atom.position;
        const position = [cx + alpha * (x - cx), cy + alpha * (y - cy), cz + alpha * (z - cz)] as const;
        return { ...atom, position, distance: alpha * atom.distance };
      }),
    };
    const { paths, signals, wave, table } = pathSignals(moved, scattering, { ...options, radius: 4.9 * alpha }, clock());
    const disorder = paths.map(({ vertices, halfLength, legs }) => {
      const route = vertices.map((atom) => {
        const { position, element } = site.atoms[atom]!;
        return { atom, position, element, mass: elementBySymbol(element).mass };
      });
      const first = legs === 2 && halfLength < 1.25 * paths[0]!.halfLength;
      return { sigma2: model.sigma2(route), zero: first ? model.sigma2AtZero(route) : 0, first };
    });
    const amplitude = { s02: 0 };
    const rFactor = ([e0, one, rest]: readonly number[]): number => {
      const scaled = disorder.map(({ sigma2, zero, first }) =>
        first ? { sigma2: one! * sigma2, c3: morseThirdCumulant(one! * sigma2, one! * zero) } : { sigma2: rest! * sigma2, c3: 0 },
      );
      project.apply(new PathSum(signals, wave, k, e0!, table.k[0]!).sum(scaled, 1, out), out);
      const unit = compareInR({ k, data: chi, model: out, ...range });
      let cross = 0;
      let own = 0;
      let whole = 0;
      for (let i = 0; i < unit.R.length; i++) {
        cross += unit.data.real[i]! * unit.model.real[i]! + unit.data.imaginary[i]! * unit.model.imaginary[i]!;
        own += unit.model.real[i]! ** 2 + unit.model.imaginary[i]! ** 2;
        whole += unit.data.real[i]! ** 2 + unit.data.imaginary[i]! ** 2;
      }
      amplitude.s02 = cross / own;
      return 1 - (cross * cross) / (own * whole);
    };
    const best = minimise(rFactor, start, [2, 0.15, 0.15]);
    rFactor(best.x);
    return { ...best, s02: amplitude.s02 };
  };

  const starts = [-12, -6, 0, 6].map((e0) => atScale(1, [e0, 0.8, 1]));
  let best = starts.reduce((a, b) => (b.value < a.value ? b : a));
  const e0Start = best.x;
  const { x } = minimise(([a]) => atScale(a!, e0Start).value, [1], [0.003]);
  const alpha = x[0]!;
  best = atScale(alpha, e0Start);
  console.log(
    `${standard.file}, ${selfEnergy}, ${thermal}: residual ${Math.sqrt(best.value).toFixed(4)} (E0 ${best.x[0]!.toFixed(2)} eV, S0² ${best.s02.toFixed(3)}, distances × ${alpha.toFixed(4)}, σ² × ${best.x[1]!.toFixed(2)} first shell, × ${best.x[2]!.toFixed(2)} beyond)`,
  );
  return { residual: Math.sqrt(best.value), alpha };
}

for (const [standard, thermal] of [
  [COPPER, 'debye'],
  [CHROMIA, 'debye'],
  [CHROMIA, 'springs'],
  [SPHALERITE, 'debye'],
  [SPHALERITE, 'springs'],
] as const) {
  // Minutes each: run where RINGTRUE_MEASURED is set, not with every test that finds the folder.
  test.skipIf(!process.env['RINGTRUE_MEASURED'])(
    `${standard.file}, ${thermal}: what each self-energy leaves over`,
    { timeout: 900_000 },
    ({ skip }) => {
      for (const selfEnergy of SELF_ENERGIES) {
        const found = bestOf(standard, selfEnergy, thermal);
        if (!found) return skip(skipped(standard.file));
        // Whatever the self-energy, distances of these lattices come out within 1 %; the trial of the method gave 0.1 to 0.3 %.
        expect(Math.abs(found.alpha - 1)).toBeLessThan(0.01);
      }
    },
  );
}
