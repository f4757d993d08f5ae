import { describe, expect, test } from 'vitest';
import { chiSquaredAbove, chiSquaredQuantile, noncentralAbove, upperGamma } from './chi-squared.js';
import { normalDeviates } from './random.js';

// Percentage points of chi-squared, Abramowitz & Stegun table 26.8 (Q = 0.05 and 0.001), five figures.
const TABLE = [
  [1, 3.84146, 10.828],
  [2, 5.99147, 13.816],
  [5, 11.0705, 20.515],
  [10, 18.307, 29.588],
  [20, 31.4104, 45.315],
  [30, 43.7729, 59.703],
] as const;

describe('chi-squared', () => {
  test.each(TABLE)('percentage points of %i degrees of freedom, Abramowitz & Stegun table 26.8', (n, five, tenth) => {
    expect(chiSquaredQuantile(0.05, n)).toBeCloseTo(five, 3);
    expect(chiSquaredQuantile(0.001, n)).toBeCloseTo(tenth, 2);
  });

  test('closed forms: two degrees are exponential, four add a factor', () => {
    for (const x of [0, 0.3, 1, 4, 17, 90, 500]) {
      expect(Math.abs(chiSquaredAbove(x, 2) - Math.exp(-x / 2))).toBeLessThan(1e-13 * Math.exp(-x / 2) + 1e-15);
      expect(Math.abs(chiSquaredAbove(x, 4) / (Math.exp(-x / 2) * (1 + x / 2)) - 1)).toBeLessThan(1e-12);
    }
  });

  test('both branches of the incomplete gamma function meet', () => {
    for (const a of [0.5, 3, 17.5, 80]) {
      const step = 1e-9 * a;
      expect(Math.abs(upperGamma(a, a + 1 - step) - upperGamma(a, a + 1 + step))).toBeLessThan(1e-8);
    }
  });

  test('non-central: no shift is the central one, and draws agree', () => {
    expect(noncentralAbove(12, 7, 0)).toBeCloseTo(chiSquaredAbove(12, 7), 13);
    const normal = normalDeviates(3);
    const [n, delta, x, draws] = [6, 9, 14, 40_000];
    let above = 0;
    for (let i = 0; i < draws; i++) {
      let sum = (normal() + Math.sqrt(delta)) ** 2;
      for (let j = 1; j < n; j++) sum += normal() ** 2;
      if (sum > x) above++;
    }
    // four standard deviations of the count
    expect(Math.abs(noncentralAbove(x, n, delta) - above / draws)).toBeLessThan((4 * 0.5) / Math.sqrt(draws));
    expect(noncentralAbove(10, 6, 1e5)).toBe(1);
  });

  test('arguments that cannot be are refused', () => {
    expect(() => upperGamma(0, 1)).toThrow(RangeError);
    expect(() => upperGamma(1, -1)).toThrow(RangeError);
    expect(() => chiSquaredQuantile(1, 3)).toThrow(RangeError);
    expect(() => noncentralAbove(1, 3, -1)).toThrow(RangeError);
  });
});
