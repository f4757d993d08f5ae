/** The posterior as it is used: a Gaussian about the best point where that is close, draws where it is not; said either way. */
import { CholeskyDecomposition } from 'ml-matrix';
import type { Running } from '../errors.js';
import { normalDeviates } from '../numerics/random.js';
import type { Draw } from './comparison.js';
import { type Minimum, sumOfSquares } from './minimise.js';
import { covarianceOf } from './posterior.js';
import { samplePosterior } from './sampler.js';
import type { Trial } from './trial.js';
import type { TrialModel } from './trial-model.js';
import type { JudgeOptions } from './types.js';

export interface Posterior {
  readonly method: 'gaussian' | 'sampled';
  readonly reason: string;
  /** Standard deviation of every z (P). */
  readonly sd: Float64Array;
  readonly draw: Draw;
}

/** Minima whose X lies this close to the best one's have a part in the posterior: e^−3 of its weight. */
const SEVERAL = 6;
/** Å: coordinate errors from which the phase 2kR of a single scatterer folds. */
const FOLDING = 0.1;
/** Rise of X two standard deviations away is 4 for a Gaussian; beyond these bounds it is called none. */
const RISE: readonly [number, number] = [2, 8];
/** X per point beyond which no posterior is worth drawing from. */
const HOPELESS = 4;
const SEED = 17;

export function posteriorOf(
  model: TrialModel,
  modes: readonly Minimum[],
  sampling: NonNullable<JudgeOptions['sampling']>,
  trial: Trial,
  running?: Running,
): Posterior {
  const best = modes[0]!;
  const kept = modes.filter(({ x }) => x < best.x + SEVERAL);
  const isHopeless = best.x > HOPELESS * model.size;
  const why = sampling === 'always' ? 'as asked for' : sampling === 'never' || isHopeless ? '' : notGaussian(model, best, kept, trial);
  if (why === '') {
    const covariance = covarianceOf(best);
    const spread = new CholeskyDecomposition(covariance).lowerTriangularMatrix;
    const normal = normalDeviates(SEED);
    const draw: Draw = () => {
      const u = Float64Array.from({ length: model.parameters }, normal);
      return u.map((_, a) => {
        let value = best.z[a]!;
        for (let b = 0; b <= a; b++) value += spread.get(a, b) * u[b]!;
        return model.bounded[a] ? Math.abs(value) : value;
      });
    };
    const reason =
      sampling === 'never'
        ? 'as asked for'
        : isHopeless
          ? 'the fit is too poor for its widths to matter'
          : 'X rises about its minimum as a Gaussian does';
    return { method: 'gaussian', reason, sd: Float64Array.from(covariance.diagonal(), Math.sqrt), draw };
  }
  const draws = samplePosterior(model, kept, running);
  // neighbouring draws of a chain are alike: take them apart, seven being coprime to their number
  let next = 0;
  const draw: Draw = () => {
    next = (next + 7) % draws.length;
    return draws[next]!;
  };
  return { method: 'sampled', reason: why, sd: standardDeviations(draws), draw };
}

function notGaussian(model: TrialModel, best: Minimum, kept: readonly Minimum[], trial: Trial): string {
  if (kept.length > 1) return `${kept.length} minima lie within ${SEVERAL} of the best X`;
  const widest = Math.max(0, ...model.list.flatMap(({ name, sd }) => (name === 'scatterer-shift' ? [sd] : [])));
  if (widest >= FOLDING) return `coordinate errors reach ${widest.toFixed(2)} Å, where the phases of single scatterers fold`;
  const covariance = covarianceOf(best);
  const residuals = new Float64Array(model.size);
  for (const [p, { name, shell }] of model.list.entries()) {
    if (name !== 'energy-origin' && name !== 'amplitude' && name !== 'class-shift') continue;
    const sd = Math.sqrt(covariance.get(p, p));
    for (const sign of [-1, 1]) {
      const z = best.z.map((value, a) => {
        const moved = value + (sign * 2 * covariance.get(a, p)) / sd;
        return model.bounded[a] ? Math.max(0, moved) : moved;
      });
      model.evaluate(z, residuals);
      const rise = sumOfSquares(residuals) + sumOfSquares(z) - best.x;
      if (rise < RISE[0] || rise > RISE[1])
        return `X is not parabolic along ${name}${shell && ` (${shell})`} in ${trial.structure.title || 'this candidate'}`;
    }
  }
  return '';
}

function standardDeviations(draws: readonly Float64Array[]): Float64Array {
  const P = draws[0]!.length;
  return Float64Array.from({ length: P }, (_, p) => {
    let sum = 0;
    let square = 0;
    for (const z of draws) {
      sum += z[p]!;
      square += z[p]! ** 2;
    }
    return Math.sqrt(Math.max(0, square / draws.length - (sum / draws.length) ** 2));
  });
}
