import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import { InputError } from '../errors.js';

export interface LinearFit {
  /** (p) */
  readonly coefficients: Float64Array;
  /** Inverse of the normal matrix, row-major (p, p): times the variance of a point of weight 1, the covariance. */
  readonly inverse: Float64Array;
  /** Σ w r² */
  readonly residual: number;
}

/**
 * Weighted linear least squares by the normal equations, columns scaled to unit length (a handful of well-scaled columns).
 *
 * @param columns  basis, each (n)
 * @param y        (n)
 * @param weight   ≥ 0 (n)
 * @throws {InputError} columns dependent, or fewer points of positive weight than columns
 */
export function leastSquares(columns: readonly Float64Array[], y: Float64Array, weight: Float64Array): LinearFit {
  const p = columns.length;
  const scale = columns.map((column) => Math.sqrt(column.reduce((sum, x, i) => sum + weight[i]! * x * x, 0)));
  const normal = Matrix.zeros(p, p);
  const right = Matrix.zeros(p, 1);
  for (let a = 0; a < p; a++) {
    const A = columns[a]!;
    for (let b = a; b < p; b++) {
      const B = columns[b]!;
      let sum = 0;
      for (let i = 0; i < y.length; i++) sum += weight[i]! * A[i]! * B[i]!;
      normal.set(a, b, sum / (scale[a]! * scale[b]!));
      normal.set(b, a, sum / (scale[a]! * scale[b]!));
    }
    let sum = 0;
    for (let i = 0; i < y.length; i++) sum += weight[i]! * A[i]! * y[i]!;
    right.set(a, 0, sum / scale[a]!);
  }
  // A column without weight, or numbers beyond the range of arithmetic, leave no matrix to solve.
  if (!normal.to1DArray().every(Number.isFinite)) throw new InputError('least squares: the points do not determine the curve');
  const cholesky = new CholeskyDecomposition(normal);
  if (!cholesky.isPositiveDefinite()) throw new InputError('least squares: the points do not determine the curve');
  const solved = cholesky.solve(right);
  const unscaled = cholesky.solve(Matrix.eye(p));
  const coefficients = Float64Array.from(scale, (s, a) => solved.get(a, 0) / s);
  const inverse = new Float64Array(p * p);
  for (let a = 0; a < p; a++) for (let b = 0; b < p; b++) inverse[a * p + b] = unscaled.get(a, b) / (scale[a]! * scale[b]!);
  let residual = 0;
  for (let i = 0; i < y.length; i++) {
    let r = y[i]!;
    for (let a = 0; a < p; a++) r -= coefficients[a]! * columns[a]![i]!;
    residual += weight[i]! * r * r;
  }
  return { coefficients, inverse, residual };
}

/** 1 inside a range, 0 outside, with a sill of cosine shape of full width `sill` centred on either end: moving an end moves no point in or out at once. */
export function softRange(x: number, from: number, to: number, sill: number): number {
  const rise = (t: number) => (t <= -0.5 ? 0 : t >= 0.5 ? 1 : 0.5 + 0.5 * Math.sin(Math.PI * t));
  return rise((x - from) / sill) * rise((to - x) / sill);
}
