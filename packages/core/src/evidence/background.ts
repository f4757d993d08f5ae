/**
 * The smooth background under chi(k): a cubic spline in k that carries what transforms below R_low.
 *
 *   minimise  ∫_0^R_low |FT[W kʷ (chi − B c)]|² dR  +  SHRINKAGE · ∫_0^∞ |FT[(k² + k0²)^(w/2) B c]|² dR        over c
 *
 * The first term after Newville, Livins, Yacoby, Rehr & Stern, Phys. Rev. B 47, 14126 (1993). The knots lie at whole multiples of
 * π/(2 R_low), the spacing at which a spline reaches R_low and no further (2 R_low k_max/π + 1 of them); being fixed in k
 * they do not jump when k_max moves by a point. The solution is linear in chi, so what it does to a measured spectrum can
 * be done to a predicted one: compare the two only after both went through it.
 *
 * The second term holds what the first leaves free, the ends where the window vanishes and courses at the very edge of R_low: a spline of
 * which less than that share of power is seen below R_low is drawn to zero, which is the post-edge curve of the reduction. Without it the
 * ends ring. Its size is our choice: of a smooth course, 1.1 % is left between k = 3 and 1 Å⁻¹ before the end; a tenth of
 * the size leaves 2.8 % (ringing), ten times 12 %. The last 0.5 Å⁻¹, where the window vanishes, are not to be compared.
 */

import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import { uniformGridOf, windowValues } from '../spectrum/index.js';

const SHRINKAGE = 0.001;
/** Å⁻¹: below it the weight of the shrinkage falls no further, or the spline would be free where the k-weight vanishes. */
const K_FLOOR = 2;
/** Points in R between 0 and R_low: a fixed number, so that nothing jumps when R_low moves; 0.05 Å apart at most 1.6 Å. */
const R_POINTS = 32;

export interface BackgroundSettings {
  /** Å: components below it are taken for background. Default 1. */
  readonly rLow?: number;
  /** Power of k in the transform that is minimised. Default 2. */
  readonly kWeight?: number;
  /** Å⁻¹, window of that transform; default the grid's whole range. */
  readonly kMin?: number;
  readonly kMax?: number;
}

export interface BackgroundProjector {
  readonly settings: Required<BackgroundSettings>;
  /** Number of spline coefficients. */
  readonly coefficients: number;
  /** chi (n) without its background; a new array, or `out` filled in place (may be chi itself). */
  apply(chi: Float64Array, out?: Float64Array): Float64Array;
  /** The background itself (n). */
  background(chi: Float64Array, out?: Float64Array): Float64Array;
}

/** Uniform cubic B-spline, centred at 0, knots at −2, −1, 0, 1, 2 (de Boor, A Practical Guide to Splines, ch. IX). */
function cubicBSpline(t: number): number {
  const a = Math.abs(t);
  if (a >= 2) return 0;
  return a >= 1 ? (2 - a) ** 3 / 6 : 2 / 3 - a * a + (a * a * a) / 2;
}

/**
 * Prepares the background removal for one k grid; applying it costs 2 n × coefficients multiplications.
 *
 * @param k  uniform grid, whole multiples of its step, Å⁻¹ (n)
 * @throws {RangeError} grid not uniform, window outside it, rLow outside 0.2 … 3 Å
 */
export function backgroundProjector(k: Float64Array, settings: BackgroundSettings = {}): BackgroundProjector {
  const { step } = uniformGridOf(k);
  const n = k.length;
  const { rLow = 1, kWeight = 2, kMin = k[0]!, kMax = k[n - 1]! } = settings;
  if (!(rLow >= 0.2 && rLow <= 3)) throw new RangeError(`background: R_low must lie between 0.2 and 3 Å, got ${rLow}`);
  // Flat down to kMin: the k-weight lets the low end fade by itself
  const window = windowValues(k, { window: 'hann', kMin: kMin - 1, kMax, sill: Math.min(1, (kMax - kMin) / 2) });

  const spacing = Math.PI / (2 * rLow);
  const firstKnot = Math.floor(k[0]! / spacing) - 1;
  const M = Math.ceil(k[n - 1]! / spacing) + 2 - firstKnot;
  const B = new Float64Array(n * M); // row-major (n, M)
  for (let i = 0; i < n; i++) for (let j = 0; j < M; j++) B[i * M + j] = cubicBSpline(k[i]! / spacing - (firstKnot + j));

  const weight = window.map((w, i) => w * k[i]! ** kWeight);
  const normal = new Float64Array(M * M);
  const right = new Float64Array(M * n);
  const row = new Float64Array(n);
  const projected = new Float64Array(M);
  const addRow = (first: number, last: number) => {
    projected.fill(0);
    for (let i = first; i < last; i++) for (let j = 0; j < M; j++) projected[j]! += row[i]! * B[i * M + j]!;
    for (let j = 0; j < M; j++) {
      const p = projected[j]!;
      if (p === 0) continue;
      for (let l = 0; l < M; l++) normal[j * M + l]! += p * projected[l]!;
      for (let i = first; i < last; i++) right[j * n + i]! += p * row[i]!;
    }
  };
  const scale = Math.sqrt(((step / Math.PI) * rLow) / R_POINTS);
  for (let m = 0; m < R_POINTS; m++) {
    const R = ((m + 0.5) * rLow) / R_POINTS;
    for (let i = 0; i < n; i++) row[i] = scale * weight[i]! * Math.cos(2 * k[i]! * R);
    addRow(0, n);
    for (let i = 0; i < n; i++) row[i] = scale * weight[i]! * Math.sin(2 * k[i]! * R);
    addRow(0, n);
  }

  for (let i = 0; i < n; i++) {
    const power = 0.5 * SHRINKAGE * (k[i]! ** 2 + K_FLOOR ** 2) ** kWeight; // half of Parseval's sum lies at R > 0
    for (let j = 0; j < M; j++) for (let l = 0; l < M; l++) normal[j * M + l]! += power * (B[i * M + j]! * B[i * M + l]!);
  }
  // A spline that reaches no point of weight would leave its row empty
  for (let j = 0; j < M; j++) normal[j * M + j]! += Number.MIN_VALUE + 1e-12 * normal[(M >> 1) * (M + 1)]!;

  const solved = new CholeskyDecomposition(Matrix.from1DArray(M, M, normal)).solve(Matrix.from1DArray(M, n, right));
  const P = Float64Array.from(solved.to1DArray()); // (M, n)
  const c = new Float64Array(M);
  const background = (chi: Float64Array, out: Float64Array = new Float64Array(n)): Float64Array => {
    if (chi.length !== n) throw new RangeError(`background: ${n} values of chi are needed, got ${chi.length}`);
    for (let j = 0; j < M; j++) {
      let sum = 0;
      for (let i = 0; i < n; i++) sum += P[j * n + i]! * chi[i]!;
      c[j] = sum;
    }
    for (let i = 0; i < n; i++) {
      let sum = 0;
      for (let j = 0; j < M; j++) sum += B[i * M + j]! * c[j]!;
      out[i] = sum;
    }
    return out;
  };
  const scratch = new Float64Array(n);
  return {
    settings: { rLow, kWeight, kMin, kMax },
    coefficients: M,
    background,
    apply(chi, out = new Float64Array(n)) {
      background(chi, scratch);
      for (let i = 0; i < n; i++) out[i] = chi[i]! - scratch[i]!;
      return out;
    },
  };
}
