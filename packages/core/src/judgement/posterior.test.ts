import { describe, expect, test } from 'vitest';
import { minimise, type ResidualModel } from './minimise.js';
import { covarianceOf, logEvidence, normalBelow } from './posterior.js';
import { samplePosterior } from './sampler.js';

/** Two residuals of two parameters, the second half-normal; `bend` makes the first a curved valley. */
const model = (bend: number, data: readonly [number, number], sharp = 3): ResidualModel => ({
  size: 2,
  parameters: 2,
  bounded: [false, true],
  evaluate([a, b], residuals, jacobian) {
    residuals[0] = data[0] - sharp * (a! + bend * b! * b!);
    residuals[1] = data[1] - 1.5 * b! + 0.5 * a!;
    jacobian?.set([-sharp, 0.5, -2 * sharp * bend * b!, -1.5]);
  },
});

/** Mean, standard deviation and evidence by brute force on a grid. */
function brute(m: ResidualModel) {
  const r = new Float64Array(2);
  const sums = { z: 0, a: 0, aa: 0, b: 0, bb: 0 };
  const step = 0.01;
  for (let a = -5; a <= 5; a += step) {
    for (let b = step / 2; b <= 5; b += step) {
      m.evaluate(Float64Array.of(a, b), r);
      const w = Math.exp(-0.5 * (r[0]! ** 2 + r[1]! ** 2 + a * a + b * b));
      sums.z += w;
      sums.a += w * a;
      sums.aa += w * a * a;
      sums.b += w * b;
      sums.bb += w * b * b;
    }
  }
  const mean = [sums.a / sums.z, sums.b / sums.z] as const;
  const sd = [Math.sqrt(sums.aa / sums.z - mean[0] ** 2), Math.sqrt(sums.bb / sums.z - mean[1] ** 2)] as const;
  // prior: normal for a, half-normal (twice as high) for b
  return { mean, sd, logEvidence: Math.log((sums.z * step * step * 2) / (2 * Math.PI)) };
}

const momentsOf = (draws: readonly Float64Array[], p: number) => {
  const mean = draws.reduce((sum, z) => sum + z[p]!, 0) / draws.length;
  return { mean, sd: Math.sqrt(draws.reduce((sum, z) => sum + (z[p]! - mean) ** 2, 0) / draws.length) };
};

describe('the posterior against brute force', () => {
  test('linear, away from the bound: covariance and evidence', () => {
    const m = model(0, [1, 6]);
    const best = minimise(m, new Float64Array(2));
    const exact = brute(m);
    const covariance = covarianceOf(best);
    for (const p of [0, 1]) {
      expect(best.z[p]!).toBeCloseTo(exact.mean[p]!, 2);
      expect(Math.sqrt(covariance.get(p, p))).toBeCloseTo(exact.sd[p]!, 2);
    }
    expect(logEvidence(best, m.bounded)).toBeCloseTo(exact.logEvidence, 2);
  });

  test('linear, at the bound: evidence within a tenth', () => {
    const m = model(0, [1, -2]);
    const best = minimise(m, new Float64Array(2));
    expect(best.z[1]).toBe(0);
    expect(Math.abs(logEvidence(best, m.bounded) - brute(m).logEvidence)).toBeLessThan(0.1);
  });

  test.each([
    ['straight', 0, 6],
    ['at the bound', 0, -2],
    ['curved', 0.4, 3],
  ])('draws have the right mean and width: %s', (_, bend, second) => {
    const m = model(bend, [1, second]);
    const best = minimise(m, new Float64Array(2));
    // ten chains from one mode: enough draws for 5 % of a standard deviation
    const draws = samplePosterior(m, Array(10).fill(best));
    const exact = brute(m);
    for (const p of [0, 1]) {
      const { mean, sd } = momentsOf(draws, p);
      expect(Math.abs(mean - exact.mean[p]!)).toBeLessThan(0.1 * exact.sd[p]!);
      expect(Math.abs(sd / exact.sd[p]! - 1)).toBeLessThan(0.1);
    }
  });

  test('the same input gives the same draws', () => {
    const m = model(0.4, [1, 3]);
    const best = minimise(m, new Float64Array(2));
    expect(samplePosterior(m, [best])).toEqual(samplePosterior(m, [best]));
  });
});

// Abramowitz & Stegun table 26.1: P(1) = 0.84134 47460 68543, P(2.5) = 0.99379 03346 74224
test('the normal distribution, Abramowitz & Stegun table 26.1', () => {
  expect(normalBelow(1)).toBeCloseTo(0.841344746068543, 11); // lgamma of the library is good to 2e-12
  expect(normalBelow(-2.5)).toBeCloseTo(1 - 0.993790334674224, 11); // lgamma of the library is good to 2e-12
  expect(normalBelow(0)).toBe(0.5);
});
