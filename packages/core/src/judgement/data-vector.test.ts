import { describe, expect, test } from 'vitest';
import { inventedReduction, kolmogorov, redoxinLike } from '../../../../test/support/judging.js';
import type { Reduction } from '../evidence/index.js';
import { chiSquaredAbove } from '../numerics/chi-squared.js';
import { normalDeviates } from '../numerics/random.js';
import { informationContent } from '../spectrum/index.js';
import { type DataWindow, dataVector, project } from './data-vector.js';

const reduction = inventedReduction(redoxinLike(), { noise: 0.001 });
const window: DataWindow = { kRange: [3, 12], rRange: [1, 3.5], kWeight: 3 };

test('it holds as many numbers as the window has independent points', () => {
  const { independentPoints, size } = dataVector(reduction, window, 0.1, 'x');
  expect(independentPoints).toBeCloseTo(informationContent(window.kRange, window.rRange).independentPoints, 12);
  expect(size).toBe(Math.round(independentPoints));
});

test('white noise of the stated size makes a chi-squared X (Kolmogorov–Smirnov, 500 trials)', () => {
  const flat: Reduction = { ...reduction, sigmaChi: reduction.k.map(() => Number.NaN) };
  const vector = dataVector(flat, window, 0, 'x');
  const normal = normalDeviates(7);
  const out = new Float64Array(vector.size);
  const scale = vector.size / vector.independentPoints;
  // The rows take background from the noise too; below R_low the window sees little of it, so X stays chi-squared to the test's power.
  const probabilities = Array.from({ length: 500 }, () => {
    project(
      vector,
      vector.k.map(() => vector.epsilonK * normal()),
      out,
    );
    return chiSquaredAbove(out.reduce((sum, y) => sum + y * y, 0) * scale, vector.size);
  });
  const { distance, limit } = kolmogorov(probabilities);
  expect(distance).toBeLessThan(limit);
});

test('model error: at η the data alone weigh N_idp/η², noise aside', () => {
  const quiet: Reduction = { ...reduction, noise: { ...reduction.noise, epsilonK: 1e-9, epsilonR: reduction.noise.epsilonR * 1e-6 } };
  const eta = 0.07;
  const { data, independentPoints } = dataVector(quiet, window, eta, 'x');
  expect(data.reduce((sum, y) => sum + y * y, 0) / (independentPoints / eta ** 2)).toBeCloseTo(1, 4);
});

describe('refused, with what would be right', () => {
  const refused: [string, Partial<DataWindow>, RegExp][] = [
    ['window beyond the data', { kRange: [3, 18] }, /must lie inside the data, which run from 0\.50 to 13\.00/],
    ['too few independent points', { kRange: [3, 5], rRange: [1, 2] }, /at least 4 are needed/],
    ['falling range', { kRange: [12, 3] }, /must rise/],
    ['weight', { kWeight: 9 }, /between 0 and 5/],
  ];
  test.each(refused)('%s', (_, change, message) => {
    expect(() => dataVector(reduction, { ...window, ...change }, 0.1, 'data.chi')).toThrow(message);
  });
  test.each([0, 0.3])('constant data (%d)', (value) => {
    expect(() => dataVector({ ...reduction, chi: reduction.chi.map(() => value) }, window, 0.1, 'data.chi')).toThrow(/does not oscillate/);
  });
});
