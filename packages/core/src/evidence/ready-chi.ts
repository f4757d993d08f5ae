/** chi(k) that someone else extracted: onto the grid, averaged, its noise estimated. */

import { InputError } from '../errors.js';
import { uniformKGrid } from '../spectrum/index.js';
import { checkFinite, checkKRange } from './limits.js';
import { AVERAGING, applyMap, localFit, type SparseMap } from './local-fit.js';
import { noiseOf } from './noise.js';
import { pointNoise } from './point-noise.js';
import type { ReduceOptions, Reduction } from './reduction.js';
import type { ChiScan } from './types.js';

/** chi that stands on the grid already is taken as it is: averaging it again would damp it. */
function samePoints(from: Float64Array, k: Float64Array): SparseMap | undefined {
  const first = k.map((q) => from.findIndex((x) => Math.abs(x - q) < 1e-6));
  if (first.includes(-1)) return undefined;
  return {
    rows: k.length,
    first: Int32Array.from(first),
    start: Int32Array.from({ length: k.length + 1 }, (_, i) => i),
    weights: k.map(() => 1),
  };
}

/** A point an Å⁻¹ over the shortest range, five times over. */
const FEWEST_POINTS = 20;

/** Ready chi(k): brought onto the grid and averaged; nothing is projected, since the reduction is not known. */
export function reduceChi(scans: readonly ChiScan[], options: ReduceOptions): Reduction {
  const end = Math.min(...scans.map((scan) => scan.k.at(-1)!));
  const begin = Math.max(0, ...scans.map((scan) => scan.k[0]!));
  const kMax = Math.min(options.kMax ?? Infinity, end);
  if (!(kMax - begin >= 4))
    throw new InputError(`chi(k) runs from ${begin.toFixed(2)} to ${kMax.toFixed(2)} Å⁻¹; a range of 4 Å⁻¹ is needed`);
  const fewest = Math.min(...scans.map((scan) => scan.k.length));
  if (fewest < FEWEST_POINTS) throw new InputError(`chi(k) of ${fewest} points; ${FEWEST_POINTS} are needed`);
  checkKRange(kMax);
  const k = uniformKGrid(kMax).filter((q) => q >= begin - 1e-9);
  const onGrid = scans.map((scan) => {
    const map = samePoints(scan.k, k) ?? localFit(scan.k, k, AVERAGING, 0);
    return { map, chi: applyMap(map, scan.chi), sigma: pointNoise(scan.k, scan.chi).sigma };
  });
  const n = scans.length;
  const chi = k.map((_, i) => onGrid.reduce((sum, scan) => sum + scan.chi[i]!, 0) / n);
  const { map, sigma } = onGrid[0]!;
  const { noise, sigmaChi } = noiseOf(k, chi, { map, sigma: sigma.map((s) => s / Math.sqrt(n)), repeated: false });
  checkFinite(chi, sigmaChi);
  const none = new Float64Array(0);
  const zero: readonly [number, number] = [0, 0];
  return {
    k,
    chi,
    sigmaChi,
    e0: Number.NaN,
    edgeStep: Number.NaN,
    noise,
    energyEv: none,
    mu: none,
    preEdge: { range: zero, form: 'none', curve: none },
    postEdge: { range: zero, degree: 0, curve: none },
    background: { rLow: 0, kWeight: 0, kMax, coefficients: 0, curve: none },
    scans: scans.map((scan) => ({ title: scan.title, shiftEv: { value: 0, sd: 0 }, guess: scan.guess })),
    flagged: [],
    choices: [
      { what: 'background', value: 'none removed', why: 'chi(k) was ready; its normalisation and background are those of whoever made it' },
      {
        what: 'k range',
        value: `${k[0]!.toFixed(2)} to ${k.at(-1)!.toFixed(2)} Å⁻¹`,
        why: options.kMax === undefined ? 'default: as far as the data reach' : 'given',
      },
    ],
    warnings: [
      ...scans.flatMap((scan) => scan.diagnostics),
      { code: 'ready-chi', message: 'chi(k) came ready: whether its step was constant or atomic is not known, nor its background' },
    ],
  };
}
