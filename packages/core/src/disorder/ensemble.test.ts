import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { molecules } from '../../../../test/support/spring-bodies.js';
import { cumulantAverage, cumulants, exactAverage, type Frame, halfLengths, weightedCumulants } from './ensemble.js';
import { harmonicFrame } from './harmonic-sample.js';
import { springNetwork } from './springs.js';

test('frames drawn from a spring network have its own σ², for single and multiple scattering', () => {
  const body = molecules.octahedral('Fe', [
    ['C', 1.92],
    ['N', 3.09],
  ]);
  const model = springNetwork(body, { temperature: 300 });
  const random = seededRandom(17);
  const frames = Array.from({ length: 6000 }, () => harmonicFrame(model, random));
  for (const vertices of [
    [0, 1],
    [0, 2],
    [0, 1, 2],
    [0, 1, 2, 1],
    [0, 1, 0, 3],
    [0, 1, 5],
  ]) {
    const { variance, mean } = cumulants(halfLengths(frames, vertices));
    const route = vertices.map((atom) => ({ atom, ...body.atoms[atom]! }));
    // Sampling error of a variance √(2/n), four of them: 7 %; collinear routes also lengthen at second order, (u⊥²/R)² < 2 %.
    expectNear(variance, model.sigma2(route), { rel: 0.09, label: vertices.join('-') });
    expect(mean).toBeGreaterThan(1.9);
  }
});

test('k-statistics of a known distribution: exponential, cumulants (n − 1)! bⁿ', () => {
  const random = seededRandom(23);
  const b = 0.05;
  const n = 400_000;
  const values = Float64Array.from({ length: n }, () => 2 - b * Math.log(1 - random()));
  const c = cumulants(values);
  // Sampling errors of an exponential: σ(k₂) = √8 b²/√n, σ(k₃) ≈ √700 b³/√n (four of each), k₄ four times √(1e5) b⁴/√n.
  const root = Math.sqrt(n);
  expectNear(c.mean, 2 + b, { abs: (4 * b) / root });
  expectNear(c.variance, b ** 2, { abs: (4 * 3 * b ** 2) / root });
  expectNear(c.third, 2 * b ** 3, { abs: (4 * 27 * b ** 3) / root });
  expectNear(c.fourth, 6 * b ** 4, { abs: (4 * 320 * b ** 4) / root });
  expectNear(c.error.variance, (Math.sqrt(8) * b ** 2) / root, { rel: 0.05 });
});

test('few values: exact small cases, and what is not defined says so', () => {
  const two = cumulants(Float64Array.of(1, 3));
  expect(two.variance).toBe(2);
  expect(two.third).toBeNaN();
  expect(two.fourth).toBeNaN();
  // Values 0, 0, 3: k₃ = n Σd³ / ((n−1)(n−2)) = 3 · 6 / 2.
  expectNear(cumulants(Float64Array.of(0, 0, 3)).third, 9, { abs: 1e-12 });
  // Values 0, 0, 0, 4: Σd² = 12, Σd⁴ = 84, k₄ = (4 · 5 · 84 − 3 · 3 · 12²)/(3 · 2 · 1).
  expectNear(cumulants(Float64Array.of(0, 0, 0, 4)).fourth, 64, { abs: 1e-11 });
});

test('two conformations: the cumulants of a coin of unequal sides', () => {
  const [p, q, d] = [0.7, 0.3, 0.12];
  const c = weightedCumulants(Float64Array.of(2, 2 + d), Float64Array.of(1.4, 0.6));
  expectNear(c.mean, 2 + q * d, { abs: 1e-14 });
  expectNear(c.variance, p * q * d ** 2, { abs: 1e-14 });
  expectNear(c.third, p * q * (p - q) * d ** 3, { abs: 1e-14 });
  expectNear(c.fourth, p * q * (1 - 6 * p * q) * d ** 4, { abs: 1e-14 });
  expect(() => weightedCumulants(Float64Array.of(1, 2), Float64Array.of(1))).toThrow(/wants 2 weights/);
  expect(() => weightedCumulants(Float64Array.of(1, 2), Float64Array.of(2, -1))).toThrow(/≥ 0/);
});

// A skewed distribution whose average is known in closed form: r = R + gamma(shape a, scale s); ⟨e^{2ikx}⟩ = (1 − 2iks)^{−a}.
test('the cumulant expansion meets the exact average of a skewed distribution, and fails where it must', () => {
  const [shape, scale] = [9, 0.02];
  const random = seededRandom(29);
  const values = Float64Array.from({ length: 100_000 }, () => {
    let sum = 2;
    for (let i = 0; i < shape; i++) sum -= scale * Math.log(1 - random());
    return sum;
  });
  const c = cumulants(values);
  const closed = (k: number) => {
    const z = 2 * k * scale;
    const phase = shape * Math.atan(z) - 2 * k * shape * scale;
    return { damping: (1 + z * z) ** (-shape / 2), phase };
  };
  const exact = exactAverage(values, c.mean, 6);
  // Sampling: 1/√n of a unit vector, four of them, over the damping.
  expectNear(exact.damping, closed(6).damping, { abs: 0.013, label: 'damping' });
  expectNear(exact.phase, closed(6).phase, { abs: 0.013 / closed(6).damping, label: 'phase' });
  const expansion = cumulantAverage(c, 6);
  const gaussian = Math.exp(-2 * 36 * c.variance);
  expectNear(expansion.damping, exact.damping, { abs: 0.015, label: 'expansion damping' });
  // Phase at k = 9: −0.14 rad by the third cumulant, the fifth adds 0.011; sampling 4/√n over a damping of 0.58, 0.022.
  expectNear(cumulantAverage(c, 9).phase, closed(9).phase, { abs: 0.035, label: 'expansion phase' });
  expect(Math.abs(expansion.damping - exact.damping)).toBeLessThan(Math.abs(gaussian - exact.damping));
  expect(Math.abs(cumulantAverage(c, 25).damping - closed(25).damping)).toBeGreaterThan(closed(25).damping);
});

test('frames that do not fit together are named', () => {
  const frame = (...elements: string[]): Frame => elements.map((element, i) => ({ element, position: [2 * i, 0, 0] as const }));
  expect(() => halfLengths([frame('Fe', 'O')], [0, 1])).toThrow(/at least 2 frames/);
  expect(() => halfLengths([frame('Fe', 'O'), frame('Fe')], [0, 1])).toThrow(/frame 2 has 1 atoms/);
  expect(() => halfLengths([frame('Fe', 'O'), frame('Fe', 'N')], [0, 1])).toThrow(/frame 2, atom 2 is N, in frame 1 it is O/);
  expect(() => halfLengths([frame('Fe', 'O'), frame('Fe', 'O')], [0, 2])).toThrow(/no atom 3/);
  const broken: Frame = [frame('Fe')[0]!, { element: 'O', position: [Number.NaN, 0, 0] }];
  expect(() => halfLengths([frame('Fe', 'O'), broken], [0, 1])).toThrow(/frame 2 has a coordinate that is no number/);
  expect(() => cumulants(Float64Array.of(1))).toThrow(/at least 2 values/);
});
