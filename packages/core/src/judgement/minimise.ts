/**
 * The best point: minimises X(z) = Σ r_i(z)² + Σ z_p² by Levenberg and Marquardt's method (Moré, Lect. Notes Math. 630, 105
 * (1978), with the prior as further residuals, so that the step is always determined), half-normal parameters held at z ≥ 0.
 * No unit: residuals are whitened, parameters in standard deviations of their priors.
 */
import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import { checkRunning, type Running } from '../errors.js';

/** Residuals and their derivatives by z. */
export interface ResidualModel {
  /** Number of residuals n and of parameters P. */
  readonly size: number;
  readonly parameters: number;
  /** For each parameter whether it must stay ≥ 0. */
  readonly bounded: readonly boolean[];
  /** r(z) into residuals (n) and, if given, dr/dz into jacobian, row-major (P, n). */
  evaluate(z: Float64Array, residuals: Float64Array, jacobian?: Float64Array): void;
}

export interface Minimum {
  readonly z: Float64Array;
  readonly x: number;
  readonly xData: number;
  readonly xPrior: number;
  readonly residuals: Float64Array;
  /** dr/dz at z, row-major (P, n). */
  readonly jacobian: Float64Array;
  readonly iterations: number;
}

const MOST_ITERATIONS = 60;
/** X is wanted to this; findings turn on whole units of it. */
const TOLERANCE = 1e-5;

/**
 * @param start  z to begin from (P), not changed
 * @param most   iterations after which to stop in any case: a rough look needs few
 */
export function minimise(model: ResidualModel, start: Float64Array, most: number = MOST_ITERATIONS, running?: Running): Minimum {
  const { size: n, parameters: P, bounded } = model;
  let z = Float64Array.from(start);
  let residuals = new Float64Array(n);
  let trial = new Float64Array(n);
  const jacobian = new Float64Array(P * n);
  model.evaluate(z, residuals, jacobian);
  let x = sumOfSquares(residuals) + sumOfSquares(z);
  let damping = 1e-3;
  let iterations = 0;
  while (iterations < most) {
    checkRunning(running);
    iterations++;
    const gradient = gradientOf(jacobian, residuals, z, n);
    const held = bounded.map((isBounded, p) => isBounded && z[p]! <= 0 && gradient[p]! > 0);
    const curvature = curvatureOf(jacobian, P, n);
    let gained = 0;
    while (damping < 1e8) {
      const step = solveStep(curvature, gradient, held, damping);
      const next = z.map((value, p) => (bounded[p] ? Math.max(0, value + step[p]!) : value + step[p]!));
      model.evaluate(next, trial);
      const xNext = sumOfSquares(trial) + sumOfSquares(next);
      if (xNext <= x) {
        gained = x - xNext;
        z = next;
        x = xNext;
        [residuals, trial] = [trial, residuals];
        damping = Math.max(1e-9, damping / 8);
        break;
      }
      damping *= 6;
    }
    model.evaluate(z, residuals, jacobian);
    if (gained < TOLERANCE) break;
  }
  const xPrior = sumOfSquares(z);
  return { z, x, xData: x - xPrior, xPrior, residuals, jacobian, iterations };
}

/** JᵀJ + 1: half the curvature of X at the minimum, the inverse of the posterior covariance of z. (P, P) */
export function curvatureOf(jacobian: Float64Array, P: number, n: number): Matrix {
  const out = new Matrix(P, P);
  for (let a = 0; a < P; a++) {
    for (let b = 0; b <= a; b++) {
      let sum = a === b ? 1 : 0;
      for (let i = 0; i < n; i++) sum += jacobian[a * n + i]! * jacobian[b * n + i]!;
      out.set(a, b, sum);
      out.set(b, a, sum);
    }
  }
  return out;
}

/** Half the gradient of X. */
function gradientOf(jacobian: Float64Array, residuals: Float64Array, z: Float64Array, n: number): Float64Array {
  return z.map((value, p) => {
    let sum = value;
    for (let i = 0; i < n; i++) sum += jacobian[p * n + i]! * residuals[i]!;
    return sum;
  });
}

function solveStep(curvature: Matrix, gradient: Float64Array, held: readonly boolean[], damping: number): Float64Array {
  const free = held.flatMap((isHeld, p) => (isHeld ? [] : [p]));
  const A = curvature.selection(free, free);
  for (let a = 0; a < free.length; a++) A.set(a, a, A.get(a, a) * (1 + damping));
  const solved = new CholeskyDecomposition(A).solve(Matrix.columnVector(free.map((p) => -gradient[p]!)));
  const step = new Float64Array(gradient.length);
  free.forEach((p, a) => {
    step[p] = solved.get(a, 0);
  });
  return step;
}

export function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (const value of values) sum += value * value;
  return sum;
}
