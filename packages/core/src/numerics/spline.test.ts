import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { CubicSpline } from './spline.js';

test('a cubic is reproduced exactly, also on uneven knots and beyond the ends', () => {
  const random = seededRandom(1);
  const x = Float64Array.from({ length: 9 }, (_, i) => i + 0.8 * random());
  const cubic = (t: number) => 2 - t + 0.5 * t * t - 0.03 * t * t * t;
  const slope = (t: number) => -1 + t - 0.09 * t * t;
  const spline = new CubicSpline(x, x.map(cubic));
  for (let t = -1; t < 10; t += 0.173) {
    expectNear(spline.at(t), cubic(t), { abs: 1e-11, rel: 1e-11, label: `value at ${t}` });
    expectNear(spline.slopeAt(t), slope(t), { abs: 1e-10, rel: 1e-10, label: `slope at ${t}` });
  }
});

test('the error falls as h⁴', () => {
  const error = (n: number) => {
    const x = Float64Array.from({ length: n + 1 }, (_, i) => (3 * i) / n);
    const spline = new CubicSpline(x, x.map(Math.sin));
    let worst = 0;
    for (let t = 0; t <= 3; t += 0.0107) worst = Math.max(worst, Math.abs(spline.at(t) - Math.sin(t)));
    return worst;
  };
  const ratio = error(20) / error(40);
  expect(ratio).toBeGreaterThan(12);
  expect(ratio).toBeLessThan(40);
});

test('knots that do not ascend, or too few, are refused', () => {
  expect(() => new CubicSpline(Float64Array.of(0, 1, 1, 2), new Float64Array(4))).toThrow(/ascend/);
  expect(() => new CubicSpline(Float64Array.of(0, 1, 2), new Float64Array(3))).toThrow(/at least 4/);
});
