import { expect, test } from 'vitest';
import { directTransform } from '../../../../test/reference/direct-transform.js';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { compareInR } from './compare.js';
import { uniformKGrid } from './grid.js';
import { backTransform, fourierTransform, transformPlan } from './transform.js';
import { windowValues } from './windows.js';

const k = uniformKGrid(16);
const random = seededRandom(11);
const noise = k.map(() => random() - 0.5);
const shell = (R: number) => k.map((q) => Math.sin(2 * q * R + 0.4) * Math.exp(-0.006 * q * q));

test('the fast transform is the sum it stands for', () => {
  const settings = { kWeight: 2, kMin: 3, kMax: 14, sill: 1 };
  const { weight } = transformPlan(k, settings);
  const fast = fourierTransform({ k, chi: noise, ...settings });
  for (const m of [0, 1, 17, 200, 1024]) {
    const slow = directTransform(k, weight, noise, fast.R[m]!);
    expectNear(fast.real[m]!, slow.real, { abs: 1e-11, label: `real at R ${fast.R[m]}` });
    expectNear(fast.imaginary[m]!, slow.imaginary, { abs: 1e-11, label: `imaginary at R ${fast.R[m]}` });
  }
});

test('a grid that starts late gives the transform of the same points', () => {
  const settings = { kWeight: 1, kMin: 3, kMax: 14 };
  const whole = fourierTransform({ k, chi: noise, ...settings });
  const late = fourierTransform({ k: k.slice(50), chi: noise.slice(50), ...settings });
  for (let m = 0; m < whole.R.length; m++) expectNear(late.real[m]!, whole.real[m]!, { abs: 1e-12 });
});

test('forward and back is the windowed, weighted chi again, and power is kept', () => {
  const settings = { kWeight: 2, kMin: 3, kMax: 14, sill: 1 };
  const { weight } = transformPlan(k, settings);
  const forward = fourierTransform({ k, chi: noise, ...settings });
  const rMax = forward.R.at(-1)!;
  const back = backTransform(forward, { window: 'hann', kMin: 0, kMax: rMax, sill: 0 }, 16);
  let powerK = 0;
  for (let i = 0; i < k.length; i++) {
    expectNear(back.real[i]!, weight[i]! * noise[i]!, { abs: 1e-10, label: `k ${k[i]}` });
    powerK += (weight[i]! * noise[i]!) ** 2 * 0.05;
  }
  let powerR = 0;
  for (let m = 0; m < forward.R.length; m++) {
    const ends = m === 0 || m === 1024 ? 1 : 2;
    powerR += ends * (forward.real[m]! ** 2 + forward.imaginary[m]! ** 2) * forward.R[1]!;
  }
  expectNear(powerR, powerK, { rel: 1e-12, label: 'Parseval' });
});

test('one shell back-transformed carries its amplitude and phase', () => {
  const forward = fourierTransform({ k, chi: shell(2), kWeight: 2, kMin: 2, kMax: 15, sill: 1 });
  const back = backTransform(forward, { window: 'hann', kMin: 0, kMax: 6, sill: 0.5 }, 16);
  for (const i of [120, 160, 200]) {
    const q = k[i]!;
    const amplitude = Math.hypot(back.real[i]!, back.imaginary[i]!);
    // 1 %: what the window in R cuts off the peak's wings
    expectNear(amplitude, q * q * Math.exp(-0.006 * q * q), { rel: 0.01, label: `amplitude at k ${q}` });
    const phase = Math.atan2(back.real[i]!, back.imaginary[i]!);
    expectNear(Math.sin(phase - (4 * q + 0.4)), 0, { abs: 0.01, label: `phase at k ${q}` });
  }
});

test('the R-factor is zero for equals, one for silence, and counts the range alone', () => {
  const settings = { k, kWeight: 2, kMin: 3, kMax: 14, rMin: 1, rMax: 3 };
  expect(compareInR({ ...settings, data: shell(2), model: shell(2) }).rFactor).toBe(0);
  expectNear(compareInR({ ...settings, data: shell(2), model: new Float64Array(k.length) }).rFactor, 1, { abs: 1e-14 });
  const scaled = shell(2).map((x) => 0.9 * x);
  expectNear(compareInR({ ...settings, data: shell(2), model: scaled }).rFactor, 0.01, { abs: 1e-12 });
  const far = shell(8).map((x, i) => x + shell(2)[i]!);
  expect(compareInR({ ...settings, data: shell(2), model: far }).rFactor).toBeLessThan(1e-4); // leakage of the 8 Å shell
});

test('unusable grids, windows and ranges are named', () => {
  const settings = { kWeight: 2, kMin: 3, kMax: 14 };
  expect(() => fourierTransform({ k, chi: noise, ...settings, kMax: 17 })).toThrow(/inside the data, 0.00 to 16.00/);
  expect(() => fourierTransform({ k, chi: noise.slice(1), ...settings })).toThrow(/321 values/);
  expect(() => fourierTransform({ k: k.map((q) => q + 0.02), chi: noise, ...settings })).toThrow(/whole multiples/);
  expect(() => windowValues(k, { window: 'hann', kMin: 3, kMax: 4, sill: 0.6 })).toThrow(/half the range/);
  expect(() => windowValues(k, { window: 'hann', kMin: 4, kMax: 4, sill: 0 })).toThrow(/not be empty/);
});
