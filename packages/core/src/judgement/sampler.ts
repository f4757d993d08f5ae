/**
 * Draws from the posterior where it is not close to a Gaussian: elliptical slice sampling (Murray, Adams & MacKay, J. Mach. Learn. Res.
 * W&CP 9, 541 (2010)), which suits parameters with Gaussian priors and has nothing to tune. The ellipses are those of a Gaussian
 * q fitted to the best point and widened, so that the data's directions are crossed as fast as the prior's; what q gets wrong is put
 * right by the slice: accepted are points of π/q above a random level. Half-normal parameters are folded, z → |z|, which
 * leaves their prior as it is. Chains start from every mode that was found. Seeded: the same input gives the same draws.
 */
import { CholeskyDecomposition } from 'ml-matrix';
import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import { checkRunning, type Running } from '../errors.js';
import { normalDeviates } from '../numerics/random.js';
import { curvatureOf, type Minimum, type ResidualModel, sumOfSquares } from './minimise.js';
import { covarianceOf } from './posterior.js';

const SEED = 29;
/** Draws kept of each chain, and dropped before them. */
const KEPT = 300;
const BURN_IN = 60;
/** The fitted Gaussian is widened by this factor in standard deviation: tails are then found, not missed. */
const WIDEN = 1.3;

/** @param modes  minima to start from, the best first; q is fitted to the best */
export function samplePosterior(model: ResidualModel, modes: readonly Minimum[], running?: Running): Float64Array[] {
  const { parameters: P, bounded, size } = model;
  const best = modes[0]!;
  const precision = curvatureOf(best.jacobian, P, size);
  const spread = new CholeskyDecomposition(covarianceOf(best)).lowerTriangularMatrix.mul(WIDEN);
  const normal = normalDeviates(SEED);
  const uniformSource = xoroshiro128plus(SEED + 1);
  const uniform = () => uniformFloat64(uniformSource);
  const residuals = new Float64Array(size);
  const folded = new Float64Array(P);
  const centred = new Float64Array(P);

  /** ln π − ln q at unfolded z. */
  const logRatio = (z: Float64Array): number => {
    for (let p = 0; p < P; p++) {
      folded[p] = bounded[p] ? Math.abs(z[p]!) : z[p]!;
      centred[p] = z[p]! - best.z[p]!;
    }
    model.evaluate(folded, residuals);
    let q = 0;
    for (let a = 0; a < P; a++) {
      let row = 0;
      for (let b = 0; b < P; b++) row += precision.get(a, b) * centred[b]!;
      q += centred[a]! * row;
    }
    return -0.5 * (sumOfSquares(residuals) + sumOfSquares(folded)) + (0.5 * q) / (WIDEN * WIDEN);
  };
  const direction = (): Float64Array => {
    const u = Float64Array.from({ length: P }, normal);
    return u.map((_, a) => {
      let sum = 0;
      for (let b = 0; b <= a; b++) sum += spread.get(a, b) * u[b]!;
      return sum;
    });
  };

  const draws: Float64Array[] = [];
  for (const [chain, mode] of modes.entries()) {
    let z = Float64Array.from(mode.z);
    let level = logRatio(z);
    for (let step = 0; step < BURN_IN + KEPT; step++) {
      checkRunning(running);
      running?.onProgress?.('posterior draws', (chain + step / (BURN_IN + KEPT)) / modes.length);
      const nu = direction();
      const threshold = level + Math.log(uniform());
      let angle = 2 * Math.PI * uniform();
      let low = angle - 2 * Math.PI;
      let high = angle;
      for (;;) {
        const [c, s] = [Math.cos(angle), Math.sin(angle)];
        const next = z.map((value, p) => best.z[p]! + (value - best.z[p]!) * c + nu[p]! * s);
        const reached = logRatio(next);
        if (reached > threshold) {
          z = next;
          level = reached;
          break;
        }
        if (angle < 0) low = angle;
        else high = angle;
        angle = low + (high - low) * uniform();
      }
      if (step >= BURN_IN) draws.push(z.map((value, p) => (bounded[p] ? Math.abs(value) : value)));
    }
  }
  return draws;
}
