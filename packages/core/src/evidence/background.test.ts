import { expect, test } from 'vitest';
import { backgroundObjective } from '../../../../test/reference/background-objective.js';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { compareInR, fourierTransform, uniformKGrid } from '../spectrum/index.js';
import { backgroundProjector } from './background.js';

const k = uniformKGrid(15);
const shell = (R: number, sigma2: number) =>
  k.map((q) => (q * Math.sin(2 * q * R + 1) * Math.exp(-2 * sigma2 * q * q)) / ((q * q + 9) * R * R));
const rms = (x: Float64Array, from = 0) => Math.sqrt(x.slice(from).reduce((s, v) => s + v * v, 0) / (x.length - from));

test('the projection is linear', () => {
  const random = seededRandom(3);
  const project = backgroundProjector(k);
  const [a, b] = [k.map(() => random()), k.map(() => random())];
  const sum = project.apply(a.map((x, i) => 2 * x - 3 * b[i]!));
  const [pa, pb] = [project.apply(a), project.apply(b)];
  for (let i = 0; i < k.length; i++) expectNear(sum[i]!, 2 * pa[i]! - 3 * pb[i]!, { abs: 1e-11 });
});

test('a smooth course is taken away, a shell is left alone', () => {
  const project = backgroundProjector(k, { rLow: 1 });
  const smooth = k.map((q) => 0.2 * Math.sin(2 * q * 0.35 + 1) - 0.01 * q);
  // Between k = 3 and 1 Å⁻¹ before the end; there the window fades and the spline with it. What stays, 1.1 %, is the shrinkage's part
  const inner = (x: Float64Array) => rms(x.slice(60, 280));
  expect(inner(project.apply(smooth))).toBeLessThan(0.02 * inner(smooth));
  const copper = shell(2.55, 0.004);
  const settings = { k, kWeight: 2, kMin: 3, kMax: 14, rMin: 1.5, rMax: 4 };
  const { rFactor } = compareInR({ ...settings, data: copper, model: project.apply(copper) });
  // Its wings below R_low go with the background: 0.6e-3 measured. That is why a prediction must be projected too
  expect(rFactor).toBeLessThan(2e-3);
});

test('the background is where the stated objective is least', () => {
  const random = seededRandom(8);
  const short = uniformKGrid(12);
  const chi = short.map((q) => 0.05 * Math.sin(3.9 * q) * Math.exp(-0.01 * q * q) + 0.05 * Math.cos(0.9 * q));
  const project = backgroundProjector(short);
  const best = project.background(chi);
  const least = backgroundObjective(short, chi, best, 1, 2);
  for (let trial = 0; trial < 4; trial++) {
    const direction = project.background(short.map(() => random() - 0.5));
    const size = (0.05 * rms(best)) / rms(direction);
    for (const sign of [-size, size]) {
      const other = best.map((b, i) => b + sign * direction[i]!);
      expect(backgroundObjective(short, chi, other, 1, 2)).toBeGreaterThan(least);
    }
  }
});

test('the transform below R_low is gone', () => {
  const chi = shell(1.95, 0.005).map((x, i) => x + 0.03 * Math.cos(k[i]! * 0.9));
  const settings = { kWeight: 2, kMin: 0, kMax: 15 };
  const low = (x: Float64Array) => {
    const { R, real, imaginary } = fourierTransform({ k, chi: x, ...settings });
    return R.reduce((sum, r, m) => (r < 0.9 ? sum + real[m]! ** 2 + imaginary[m]! ** 2 : sum), 0);
  };
  expect(low(backgroundProjector(k).apply(chi))).toBeLessThan(1e-3 * low(chi));
});

test('nothing jumps when a range moves by a point', () => {
  const chi = shell(1.95, 0.005).map((x, i) => x + 0.03 * Math.cos(k[i]! * 0.9));
  const one = backgroundProjector(k).apply(chi);
  for (const n of [k.length - 1, k.length - 6, k.length - 20]) {
    const shorter = backgroundProjector(k.slice(0, n)).apply(chi.slice(0, n));
    const next = backgroundProjector(k.slice(0, n - 1)).apply(chi.slice(0, n - 1));
    const difference = next.map((x, i) => x - shorter[i]!).slice(50, n - 41); // k from 2.5 to 2 before the end
    expect(rms(difference)).toBeLessThan(5e-4); // a good spectrum's noise at k = 3 … 13
  }
  const moved = (by: number) => {
    const other = backgroundProjector(k, { rLow: 1 + by }).apply(chi);
    return rms(other.map((x, i) => x - one[i]!).slice(50));
  };
  // no jump: a tenth of the move makes a tenth of the difference (knots entering at the far end may add a little)
  expect(moved(0.001)).toBeLessThan(0.15 * moved(0.01));
});

test('in place is the same, and unusable settings are named', () => {
  const project = backgroundProjector(k);
  const chi = shell(2, 0.004);
  const wanted = project.apply(chi);
  const same = chi.slice();
  project.apply(same, same);
  expect(same).toEqual(wanted);
  expect(() => project.apply(chi.slice(1))).toThrow(/301 values/);
  expect(() => backgroundProjector(k, { rLow: 0 })).toThrow(/R_low/);
});
