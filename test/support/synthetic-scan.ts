import { energyEvFromK, uniformKGrid } from '../../packages/core/src/spectrum/index.js';
import { seededRandom } from './random.js';
import { readTable } from './table.js';

/** Standard normal numbers, Box–Muller over the seeded generator. */
export function seededNormal(seed: number): () => number {
  const random = seededRandom(seed);
  return () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
}

export const ATOMS = {
  Fe: { edge: 'K', e0: 7112.0, step: 354.532 },
  Zn: { edge: 'K', e0: 9658.6, step: 218.585 },
  Pt: { edge: 'L3', e0: 11563.8, step: 116.201 },
} as const;
export type AtomName = keyof typeof ATOMS;

export interface ShellTruth {
  readonly n: number;
  /** Å */
  readonly R: number;
  /** Å² */
  readonly sigma2: number;
}

/** An invented but EXAFS-like chi(k): amplitudes that rise and fall with k, a phase that is no straight line. */
export const truthChi = (k: number, shells: readonly ShellTruth[]): number =>
  k <= 0
    ? 0
    : shells.reduce((sum, { n, R, sigma2 }) => {
        const amplitude = (0.9 * n * k * Math.exp(-2 * sigma2 * k * k - R / 6)) / ((k * k + 16) * R * R) / 0.5;
        return sum + amplitude * Math.sin(2 * k * R + 3 - 0.6 * k + 0.015 * k * k);
      }, 0);

/** Straight line in ln μ against ln E through table points, extended beyond them: how photoabsorption goes between edges. */
function logLog(points: readonly (readonly [number, number])[]): (e: number) => number {
  return (e) => {
    let i = points.findIndex(([x]) => x > e);
    if (i <= 0) i = i < 0 ? points.length - 1 : 1;
    const [[x0, y0], [x1, y1]] = [points[i - 1]!, points[i]!];
    return y0 * (e / x0) ** (Math.log(y1 / y0) / Math.log(x1 / x0));
  };
}

export interface SyntheticSettings {
  readonly shells: readonly ShellTruth[];
  /** Noise per point, part of the edge step. Default 0. */
  readonly noise?: number;
  readonly seed?: number;
  /** Å⁻¹ between points above the edge. Default 0.05. */
  readonly dk?: number;
  readonly kMax?: number;
  /** eV by which the edge is moved. Default 0. */
  readonly shift?: number;
  /** Edge step of the sample. Default 1. */
  readonly step?: number;
}

/** Absorption of a foil of real atoms with an invented chi, an instrument's slope, a smooth rise and noise, as a beamline would record it. */
export function syntheticScan(
  atom: AtomName,
  { shells, noise = 0, seed = 1, dk = 0.05, kMax = 15.5, shift = 0, step = 1 }: SyntheticSettings,
) {
  const { e0, step: tableStep } = ATOMS[atom];
  const rows = readTable('atomic-absorption.csv').filter((row) => row['symbol'] === atom);
  const points = rows.map((row) => [Number(row['energy_eV']), Number(row['photo_cm2_per_g'])] as const);
  // Below: the last long stretch, so that its extension is the smooth fall of the other shells
  const pre = points.filter(([e]) => e < e0);
  const below = logLog([pre.find(([e]) => e > e0 - 450)!, pre.at(-1)!]);
  const above = logLog(points.filter(([e]) => e > e0));
  const energies: number[] = [];
  for (let e = -200; e < -30; e += 5) energies.push(e);
  for (let e = -30; e < 25; e += 0.5) energies.push(e);
  for (let k = 2.6; k < kMax; k += dk) energies.push(energyEvFromK(k));
  const normal = seededNormal(seed);
  const energyEv = Float64Array.from(energies, (e) => e0 + e);
  const mu = energyEv.map((observed) => {
    const e = observed - shift;
    const shell = above(Math.max(e, e0)) - below(Math.max(e, e0));
    const rise = 1 / (1 + Math.exp(-(e - e0) / 0.6)); // without tails, so that the step is a number
    const k = e > e0 ? Math.sqrt((e - e0) / energyEvFromK(1)) : 0;
    const absorption = (step / tableStep) * (below(e) + shell * rise * (1 + truthChi(k, shells)));
    return absorption + 0.35 + 4e-5 * (e - e0) + noise * step * normal();
  });
  return { energyEv, mu };
}

/** The truth on the grid of a reduction. */
export const truthOnGrid = (kMax: number, shells: readonly ShellTruth[]): Float64Array =>
  uniformKGrid(kMax).map((k) => truthChi(k, shells));

/** The same as text in columns. */
export const asColumns = ({ energyEv, mu }: { energyEv: Float64Array; mu: Float64Array }): string =>
  `# energy_eV mu\n${Array.from(energyEv, (e, i) => `${e} ${mu[i]}`).join('\n')}\n`;
