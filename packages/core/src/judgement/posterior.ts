/** Around the best point: covariance, evidence, power. z-space: parameters in standard deviations of their priors. */
import { CholeskyDecomposition, inverse, type Matrix } from 'ml-matrix';
import { upperGamma } from '../numerics/chi-squared.js';
import { curvatureOf, type Minimum } from './minimise.js';

/** Posterior covariance of z in the Gaussian approximation, (P, P); parameters at their bound count as free. */
export function covarianceOf({ jacobian, residuals, z }: Minimum): Matrix {
  const covariance = inverse(curvatureOf(jacobian, z.length, residuals.length));
  return covariance.add(covariance.transpose()).mul(0.5); // rounding leaves it unsymmetric in the last digits
}

/**
 * ln Z by Laplace's method up to a constant of the data:
 *   ln Z = −X/2 − ½ ln det(1 + JᵀJ) + Σ_h ln[2 Φ_h]
 * with z-scaled priors, whose normalisations cancel the 2π; for a half-normal parameter the integral over z ≥ 0 of the local parabola,
 * g its half gradient and h its curvature: 2 e^{g²/2h} Φ(−g/√h) at the bound, 2 Φ(z√h) inside, each taken on its own.
 */
export function logEvidence(minimum: Minimum, bounded: readonly boolean[]): number {
  const { jacobian, residuals, z, x } = minimum;
  const n = residuals.length;
  const H = curvatureOf(jacobian, z.length, n);
  const L = new CholeskyDecomposition(H).lowerTriangularMatrix;
  let value = -x / 2;
  for (let p = 0; p < z.length; p++) value -= Math.log(L.get(p, p));
  for (let p = 0; p < z.length; p++) {
    if (!bounded[p]) continue;
    const h = H.get(p, p);
    if (z[p]! > 0) value += Math.log(2 * normalBelow(z[p]! * Math.sqrt(h)));
    else {
      let g = 0;
      for (let i = 0; i < n; i++) g += jacobian[p * n + i]! * residuals[i]!;
      const t = Math.max(0, g) / Math.sqrt(h);
      value += Math.log(2) + (t * t) / 2 + Math.log(normalBelow(-t));
    }
  }
  return value;
}

/** Φ(t), the standard normal distribution; to 1e-12 relative for t > −30. */
export function normalBelow(t: number): number {
  const tail = 0.5 * upperGamma(0.5, (t * t) / 2);
  return t < 0 ? tail : 1 - tail;
}
