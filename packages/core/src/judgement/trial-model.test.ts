import { expect, test } from 'vitest';
import { inventedReduction, redoxinLike } from '../../../../test/support/judging.js';
import { seededRandom } from '../../../../test/support/random.js';
import { ENERGY_ORIGIN_UNSURE } from '../predict/unknowns.js';
import { dataVector } from './data-vector.js';
import { minimise } from './minimise.js';
import { prepareTrial } from './trial.js';
import { type Freedom, trialModel } from './trial-model.js';

const structure = redoxinLike();
const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
const vector = dataVector(inventedReduction(structure), { kRange: [3, 12], rRange: [1, 3.5], kWeight: 3 }, 0.1, 'invented');
const trial = prepareTrial(
  structure,
  [{ vector, absorber: 'Fe', edge: 'K', temperature: 10, file: 'invented', energyOrigin: ENERGY_ORIGIN_UNSURE }],
  { radius: 4.5, thermal: 'springs' },
  clock,
);

test.each<Freedom>(['none', 'stretch', 'classes'])('derivatives agree with differences, distances free: %s', (freedom) => {
  const model = trialModel(trial.spectra, 1, freedom);
  const { parameters: P, size: n } = model;
  const random = seededRandom(5);
  const z = Float64Array.from({ length: P }, (_, p) => (model.bounded[p] ? random() : 2 * random() - 1) * 0.7);
  const residuals = new Float64Array(n);
  const jacobian = new Float64Array(P * n);
  model.evaluate(z, residuals, jacobian);
  const step = 1e-4;
  for (let p = 0; p < P; p++) {
    const sides = [-step, step].map((d) => {
      const moved = Float64Array.from(z);
      moved[p]! += d;
      const at = new Float64Array(n);
      model.evaluate(moved, at);
      return at;
    });
    const largest = Math.max(...jacobian.subarray(p * n, (p + 1) * n).map(Math.abs));
    for (let i = 0; i < n; i++) {
      const difference = (sides[1]![i]! - sides[0]![i]!) / (2 * step);
      // disorder factors are interpolated in k, at the shifts of 0.3 Å drawn here to 3e-4: an analytic slip shows at 1e-2
      expect(Math.abs(difference - jacobian[p * n + i]!), model.list[p]!.key).toBeLessThan(5e-4 * largest + 1e-6);
    }
  }
});

test('the minimum is one: no parameter lowers X by moving alone, and bounds are kept', () => {
  const model = trialModel(trial.spectra, 1);
  const best = minimise(model, new Float64Array(model.parameters));
  const residuals = new Float64Array(model.size);
  for (let p = 0; p < model.parameters; p++) {
    expect(model.bounded[p] && best.z[p]! < 0).toBe(false);
    for (const d of [-0.02, 0.02]) {
      const z = Float64Array.from(best.z);
      z[p] = model.bounded[p] ? Math.max(0, z[p]! + d) : z[p]! + d;
      model.evaluate(z, residuals);
      const x = residuals.reduce((sum, r) => sum + r * r, 0) + z.reduce((sum, v) => sum + v * v, 0);
      expect(x).toBeGreaterThan(best.x - 2e-4);
    }
  }
});
