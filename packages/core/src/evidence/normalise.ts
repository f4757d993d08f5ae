/**
 * Edge energy, pre-edge, post-edge and edge step of one absorption spectrum.
 *
 *   μ(E) = pre(E) + step · a(E) · (1 + smooth) (1 + χ)      above the edge,   a(E) = (E/E0)^−2.7
 *
 * a(E) is the decay of the atomic shell's own absorption. The exponent is common practice for K and L3 shells (the
 * tables' partial cross-sections fall with 2.6 to 2.8); dividing by step · a(E) instead of the bare step keeps the amplitude
 * of chi at high k, where the constant step loses some 20 % at k = 14 Å⁻¹ for 3d metals.
 */

import { InputError } from '../errors.js';
import { leastSquares, softRange } from './least-squares.js';
import { applyMap, localFit, localSpacing } from './local-fit.js';

const SHELL_EXPONENT = -2.7;
/** eV, half width of the smoothing for the slope: about the width of a 3d metal's core level. */
const SLOPE_HALF_WIDTH_EV = 2;
/** eV, softness of the ends of the fit ranges. */
const SILL_EV = 10;

/** Decay of the shell's absorption, 1 at the edge (n). */
export const atomicDecay = (energyEv: Float64Array, e0: number): Float64Array => energyEv.map((e) => (e / e0) ** SHELL_EXPONENT);

/**
 * Energy of the largest slope between two energies, from the smoothed derivative; the maximum is refined by a parabola.
 *
 * @throws {InputError} fewer than 8 points there, or no rise
 */
export function steepestRise(
  energyEv: Float64Array,
  mu: Float64Array,
  from: number,
  to: number,
): { readonly e0: number; readonly slope: number } {
  const low = Math.max(from, energyEv[0]!);
  const high = Math.min(to, energyEv.at(-1)!);
  const inside = energyEv.filter((e) => e >= low && e <= high).length;
  if (!(inside >= 8)) {
    throw new InputError(`edge: ${inside} points between ${from.toFixed(0)} and ${to.toFixed(0)} eV, 8 are needed to find it`);
  }
  const step = Math.max(0.2, (high - low) / 5000);
  const at = Float64Array.from({ length: Math.floor((high - low) / step) + 1 }, (_, i) => low + i * step);
  const slope = applyMap(localFit(energyEv, at, SLOPE_HALF_WIDTH_EV, 1), mu);
  let best = 0;
  for (let i = 0; i < slope.length; i++) if (slope[i]! > slope[best]!) best = i;
  if (!(slope[best]! > 0)) throw new InputError(`edge: the absorption does not rise between ${low.toFixed(0)} and ${high.toFixed(0)} eV`);
  if (best === 0 || best === slope.length - 1) return { e0: at[best]!, slope: slope[best]! };
  const [a, b, c] = [slope[best - 1]!, slope[best]!, slope[best + 1]!];
  const curvature = a - 2 * b + c;
  return { e0: at[best]! + (curvature < 0 ? (0.5 * (a - c)) / curvature : 0) * step, slope: b };
}

export interface NormaliseSettings {
  readonly e0: number;
  /** eV relative to e0 */
  readonly pre: readonly [number, number];
  readonly preForm: 'line' | 'victoreen';
  readonly post: readonly [number, number];
  readonly postDegree: number;
}

export interface Normalised {
  /** Edge step at e0, units of mu. */
  readonly edgeStep: number;
  /** Pre-edge and post-edge curves on the scan's energies (n). */
  readonly preEdge: Float64Array;
  readonly postEdge: Float64Array;
}

/**
 * Fits the pre-edge (line, or Victoreen's a E⁻³ + b E⁻⁴) and the post-edge (a(E) times a polynomial), the step being their distance at e0.
 * Points are weighted by their spacing, so that the sampling does not matter; the ranges have soft ends.
 *
 * @throws {InputError} a range holds too few points, or the step is not positive
 */
export function normalise(energyEv: Float64Array, mu: Float64Array, { e0, pre, preForm, post, postDegree }: NormaliseSettings): Normalised {
  const spacing = localSpacing(energyEv);
  const weightOf = ([from, to]: readonly [number, number], needed: number, what: string) => {
    const sill = Math.min(SILL_EV, (to - from) / 2);
    const weight = energyEv.map((e, i) => spacing[i]! * softRange(e - e0, from, to, sill));
    const count = weight.filter((w) => w > 0).length;
    if (!(to > from && count >= needed)) {
      throw new InputError(
        `${what}: ${count} points between ${from.toFixed(0)} and ${to.toFixed(0)} eV of the edge at ${e0.toFixed(1)} eV, ${needed} are needed; state another range`,
      );
    }
    return weight;
  };
  const preWeight = weightOf(pre, 4, 'pre-edge');
  const preBasis =
    preForm === 'line'
      ? [energyEv.map(() => 1), energyEv.map((e) => (e - e0) / 100)]
      : [energyEv.map((e) => (e0 / e) ** 3), energyEv.map((e) => (e0 / e) ** 4)];
  const preFit = leastSquares(preBasis, mu, preWeight).coefficients;
  const preEdge = energyEv.map((_, i) => preFit[0]! * preBasis[0]![i]! + preFit[1]! * preBasis[1]![i]!);

  const postWeight = weightOf(post, postDegree + 4, 'post-edge');
  const decay = atomicDecay(energyEv, e0);
  const postBasis = Array.from({ length: postDegree + 1 }, (_, d) => energyEv.map((e, i) => decay[i]! * ((e - e0) / 500) ** d));
  const above = mu.map((y, i) => y - preEdge[i]!);
  const postFit = leastSquares(postBasis, above, postWeight).coefficients;
  const edgeStep = postFit[0]!;
  if (!(edgeStep > 0))
    throw new InputError(
      `edge step: the absorption does not rise at ${e0.toFixed(1)} eV (step ${edgeStep.toPrecision(3)}); is this the edge?`,
    );
  const postEdge = energyEv.map((_, i) => preEdge[i]! + postBasis.reduce((sum, column, d) => sum + postFit[d]! * column[i]!, 0));
  return { edgeStep, preEdge, postEdge };
}
