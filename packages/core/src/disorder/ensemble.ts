/**
 * Disorder from frames: a trajectory, the models of an entry, samples of a spring network. Cumulants of a route's half
 * length r over the frames, and the average of a path's oscillation both ways:
 *
 *   ⟨e^{2ik(r − ⟨r⟩)}⟩ = exp(−2k²C₂ − (4/3) i k³C₃ + (2/3) k⁴C₄ …)      (Bunker, Nucl. Instrum. Meth. 207, 437 (1983))
 */
import { InputError } from '../errors.js';
import type { Vec3 } from '../structure/types.js';

export interface FrameAtom {
  readonly element: string;
  readonly position: Vec3;
}
export type Frame = readonly FrameAtom[];

/** Of a half path length: Å, Å², Å³, Å⁴. */
export interface Cumulants {
  readonly count: number;
  readonly mean: number;
  readonly variance: number;
  readonly third: number;
  readonly fourth: number;
  /** Standard error of the mean, and of the variance, from the sample itself (frames taken as independent). */
  readonly error: { readonly mean: number; readonly variance: number };
}

/**
 * Half length of a closed route in every frame, Å.
 *
 * @param vertices  indices into the frames, the closing return not repeated
 * @throws {InputError} fewer than two frames, frames of different atoms, a vertex outside: names frame and atom (from 1)
 */
export function halfLengths(frames: readonly Frame[], vertices: readonly number[]): Float64Array {
  if (frames.length < 2) throw new InputError(`ensemble: needs at least 2 frames, got ${frames.length}`);
  if (vertices.length < 2) throw new InputError(`ensemble: a route needs at least 2 vertices, got ${vertices.length}`);
  const first = frames[0]!;
  for (const v of vertices)
    if (!(Number.isInteger(v) && v >= 0 && v < first.length))
      throw new InputError(`ensemble: no atom ${v + 1}, the frames have ${first.length}`);
  const out = new Float64Array(frames.length);
  for (const [n, frame] of frames.entries()) {
    if (frame.length !== first.length)
      throw new InputError(`ensemble: frame ${n + 1} has ${frame.length} atoms, frame 1 has ${first.length}; all must be alike`);
    let length = 0;
    for (let a = 0; a < vertices.length; a++) {
      const v = vertices[a]!;
      const [from, to] = [frame[v]!, frame[vertices[(a + 1) % vertices.length]!]!];
      if (from.element !== first[v]!.element)
        throw new InputError(`ensemble: frame ${n + 1}, atom ${v + 1} is ${from.element}, in frame 1 it is ${first[v]!.element}`);
      length += Math.hypot(to.position[0] - from.position[0], to.position[1] - from.position[1], to.position[2] - from.position[2]);
    }
    if (!Number.isFinite(length)) throw new InputError(`ensemble: frame ${n + 1} has a coordinate that is no number`);
    out[n] = length / 2;
  }
  return out;
}

/**
 * Unbiased cumulants of a sample (Fisher's k-statistics: Kendall & Stuart, The Advanced Theory of Statistics, vol. 1,
 * ch. 12). With few values the higher ones are not defined and come back as NaN: third from 3, fourth from 4 values.
 */
export function cumulants(values: Float64Array): Cumulants {
  const n = values.length;
  if (n < 2) throw new InputError(`cumulants: needs at least 2 values, got ${n}`);
  const mean = values.reduce((a, b) => a + b, 0) / n;
  let [s2, s3, s4] = [0, 0, 0];
  for (const value of values) {
    const d = value - mean;
    s2 += d * d;
    s3 += d * d * d;
    s4 += d * d * d * d;
  }
  const variance = s2 / (n - 1);
  const third = n > 2 ? (n * s3) / ((n - 1) * (n - 2)) : Number.NaN;
  const fourth = n > 3 ? (n * (n + 1) * s4 - 3 * (n - 1) * s2 * s2) / ((n - 1) * (n - 2) * (n - 3)) : Number.NaN;
  const m4 = s4 / n;
  return {
    count: n,
    mean,
    variance,
    third,
    fourth,
    error: { mean: Math.sqrt(variance / n), variance: Math.sqrt(Math.max(0, m4 - (s2 / n) ** 2) / n) },
  };
}

/**
 * Cumulants of a distribution that is known, not sampled: alternate conformations with their occupancies, sites with their
 * weights. The moments are those of the weights themselves, without the sample's n/(n − 1).
 *
 * @param weights  ≥ 0, not all 0; need not add up to 1
 * @throws {InputError} as many weights as values are wanted, none negative
 */
export function weightedCumulants(values: Float64Array, weights: Float64Array): Pick<Cumulants, 'mean' | 'variance' | 'third' | 'fourth'> {
  const total = weights.reduce((a, b) => a + b, 0);
  if (weights.length !== values.length || !(total > 0 && total < Infinity) || weights.some((w) => w < 0))
    throw new InputError(`cumulants: wants ${values.length} weights ≥ 0, not all 0, got ${weights.length} adding up to ${total}`);
  const average = (f: (value: number) => number) => values.reduce((sum, value, i) => sum + (weights[i]! / total) * f(value), 0);
  const mean = average((r) => r);
  const variance = average((r) => (r - mean) ** 2);
  return { mean, variance, third: average((r) => (r - mean) ** 3), fourth: average((r) => (r - mean) ** 4) - 3 * variance * variance };
}

/** Damping and phase of a path, e^{2ik(r − ⟨r⟩)} averaged exactly over the values. @param k Å⁻¹ */
export function exactAverage(values: Float64Array, mean: number, k: number): { readonly damping: number; readonly phase: number } {
  let [re, im] = [0, 0];
  for (const r of values) {
    re += Math.cos(2 * k * (r - mean));
    im += Math.sin(2 * k * (r - mean));
  }
  return { damping: Math.hypot(re, im) / values.length, phase: Math.atan2(im, re) };
}

/** The same from the first four cumulants; good as long as 2k times the skewness and excess stay small. @param k Å⁻¹ */
export function cumulantAverage(
  { variance, third, fourth }: Pick<Cumulants, 'variance' | 'third' | 'fourth'>,
  k: number,
): { readonly damping: number; readonly phase: number } {
  const k2 = k * k;
  return { damping: Math.exp(-2 * k2 * variance + (2 / 3) * k2 * k2 * fourth), phase: (-4 / 3) * k2 * k * third };
}
