/**
 * Noise of single points, and points that stick out, from the scan itself: each point against the cubic through its two neighbours on either
 * side. What is left is noise, as long as the points lie close to each other on the scale of the oscillations.
 */

import type { Diagnostic } from '../errors.js';

const WINDOW = 31;
/** Robust standard deviations beyond which a point is flagged: one in 5e8 for Gaussian noise. */
const GLITCH = 6;

export interface PointNoise {
  /** Standard deviation of each point, from the median in a window of 31 (n). */
  readonly sigma: Float64Array;
  /** Deviation of each point in standard deviations (n). */
  readonly deviation: Float64Array;
}

/**
 * @param x  abscissa in which the oscillations are even: k (n ≥ 5)
 * @param y  (n)
 */
export function pointNoise(x: Float64Array, y: Float64Array): PointNoise {
  const n = x.length;
  const residual = new Float64Array(n);
  for (let i = 2; i < n - 2; i++) {
    let value = 0;
    let variance = 1;
    for (const p of [i - 2, i - 1, i + 1, i + 2]) {
      let c = 1;
      for (const q of [i - 2, i - 1, i + 1, i + 2]) if (q !== p) c *= (x[i]! - x[q]!) / (x[p]! - x[q]!);
      value += c * y[p]!;
      variance += c * c;
    }
    residual[i] = (y[i]! - value) / Math.sqrt(variance);
  }
  const sigma = new Float64Array(n);
  const window = new Float64Array(WINDOW);
  for (let i = 0; i < n; i++) {
    const from = Math.max(2, Math.min(i - (WINDOW >> 1), n - 2 - WINDOW));
    const to = Math.min(n - 2, from + WINDOW);
    const part = window.subarray(0, to - from);
    for (let j = from; j < to; j++) part[j - from] = Math.abs(residual[j]!);
    part.sort();
    sigma[i] = part[part.length >> 1]! / 0.6745; // median of |x| of a Gaussian, in standard deviations
  }
  return { sigma, deviation: residual.map((r, i) => (sigma[i]! > 0 ? r / sigma[i]! : 0)) };
}

export interface Glitch extends Diagnostic {
  readonly code: 'glitch';
  readonly energyEv: number;
  /** In standard deviations of the points around. */
  readonly deviation: number;
  readonly leftOut: boolean;
}

/** A flagged point with its sentence. */
export function glitch(point: Pick<Glitch, 'energyEv' | 'deviation'> & { readonly line?: number }, leftOut: boolean): Glitch {
  const size = Math.abs(point.deviation).toFixed(0);
  const message = `the point at ${point.energyEv.toFixed(2)} eV sticks out by ${size} standard deviations; it was ${leftOut ? 'left out' : 'kept'}`;
  return { ...point, code: 'glitch', message, leftOut };
}

/** Points that stick out by more than 6 standard deviations, the largest of each group of neighbours. Of a
 * group the point beside it may stick out most, since the bad ones are what it is held against. */
export function findGlitches(noise: PointNoise, energyEv: Float64Array, lines: Int32Array, where: (energyEv: number) => boolean): Glitch[] {
  const found: Glitch[] = [];
  const size = (i: number) => Math.abs(noise.deviation[i] ?? 0);
  for (let i = 2; i < energyEv.length - 2; i++) {
    if (!(size(i) > GLITCH) || !where(energyEv[i]!)) continue;
    if ([i - 2, i - 1, i + 1, i + 2].some((j) => size(j) > size(i))) continue;
    const deviation = noise.deviation[i]!;
    found.push(glitch({ line: lines[i]!, energyEv: energyEv[i]!, deviation }, false));
  }
  return found;
}
