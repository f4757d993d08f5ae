/**
 * Could these data have rejected a wrong structure at all? Asked of a first shell off by a given amount: data as the theory makes them
 * for the shifted shell, without noise, are fitted with the shell held, every parameter doing what it can within its prior. What X is
 * left is the non-centrality of the test, its power P(χ'² > the 5 % point). It depends on the structure, its precision and the quality
 * of the data, not on the data themselves. Å.
 */
import { chiSquaredQuantile, noncentralAbove } from '../numerics/chi-squared.js';
import { minimise, type ResidualModel } from './minimise.js';
import { freeShift } from './parameters.js';
import type { Trial } from './trial.js';
import { type TrialModel, trialModel } from './trial-model.js';

const LEVEL = 0.05;

/** Power against a first shell that is off by `probe` either way, the smaller of the two. */
export function powerAgainst(trial: Trial, held: TrialModel, spread: number, degrees: number, probe: number): number {
  const free = trialModel(trial.spectra, spread, 'classes');
  const elements = new Set(trial.spectra.map(({ element }) => element));
  const powers = [-probe, probe].map((shift) => {
    const truth = new Float64Array(free.parameters);
    for (const element of elements) {
      const { key, sd } = freeShift(element, 'nearest');
      const p = free.indexOf(key);
      if (p !== undefined) truth[p] = shift / sd;
    }
    const target = new Float64Array(free.size);
    free.evaluate(truth, target);
    const mimic: ResidualModel = {
      ...held,
      evaluate(z, residuals, jacobian) {
        held.evaluate(z, residuals, jacobian);
        for (let i = 0; i < residuals.length; i++) residuals[i]! -= target[i]!;
      },
    };
    // The coordinates themselves may do it: begin there too, or the phase folds before they are tried.
    const moved = Float64Array.from(held.list, ({ shellClass, sd }) => (shellClass === 'nearest' ? shift / sd : 0));
    const left = Math.min(minimise(mimic, new Float64Array(held.parameters)).x, minimise(mimic, moved).x);
    return noncentralAbove(chiSquaredQuantile(LEVEL, degrees), degrees, left);
  });
  return Math.min(...powers);
}
