import { expect, test } from 'vitest';
import { uniformKGrid } from '../../packages/core/src/spectrum/grid.js';
import { informationContent } from '../../packages/core/src/spectrum/information.js';
import { transformPlan } from '../../packages/core/src/spectrum/transform.js';
import { type WindowName, windowValues } from '../../packages/core/src/spectrum/windows.js';
import { directTransform } from '../reference/direct-transform.js';

import { expectNear } from '../support/expect-near.js';
import { readTable } from '../support/table.js';

// Windows and transforms against values computed independently (mpmath, 40 digits; sources in the first line of each file).
const table = (name: string) => readTable(`${name}.csv`);

/** The tables' window names in ours: full windows are sills of half the range. */
function windowFrom(name: string, parameter: number, kMin: number, kMax: number) {
  const full = (kMax - kMin) / 2;
  const common = { kMin, kMax };
  if (name === 'rectangular') return { ...common, window: 'hann' as WindowName, sill: 0 };
  if (name === 'hann_full') return { ...common, window: 'hann' as WindowName, sill: full };
  if (name === 'hann_taper') return { ...common, window: 'hann' as WindowName, sill: parameter };
  if (name === 'welch') return { ...common, window: 'welch' as WindowName, sill: full };
  if (name === 'kaiser_bessel') return { ...common, window: 'kaiser-bessel' as WindowName, sill: full, shape: parameter };
  throw new Error(`no such window here: ${name}`);
}

test('window values', () => {
  const rows = table('window-values');
  expect(rows.length).toBe(60);
  for (const row of rows) {
    const spec = windowFrom(
      row['window']!,
      Number(row['window_parameter']),
      Number(row['kmin_per_angstrom']),
      Number(row['kmax_per_angstrom']),
    );
    const [got] = windowValues(Float64Array.of(Number(row['k_per_angstrom'])), spec);
    expectNear(got!, Number(row['W']), { abs: 6e-13, label: `${row['window']} at k ${row['k_per_angstrom']}` }); // 12 printed digits
  }
});

test('transform of one windowed shell', () => {
  const rows = table('fourier-windowed');
  expect(rows.length).toBe(168);
  const k = uniformKGrid(15);
  const peaks = new Map<string, number>();
  const key = (row: Record<string, string>) => `${row['window']} ${row['window_parameter']} k^${row['k_weight']}`;
  for (const row of rows) peaks.set(key(row), Math.max(peaks.get(key(row)) ?? 0, Math.hypot(Number(row['I_re']), Number(row['I_im']))));
  for (const row of rows) {
    const n = (name: string) => Number(row[name]);
    const spec = windowFrom(row['window']!, n('window_parameter'), n('kmin_per_angstrom'), n('kmax_per_angstrom'));
    const plan = transformPlan(k, { ...spec, kWeight: n('k_weight') });
    const chi = k.map((q) => Math.exp(-2 * n('sigma2_angstrom2') * q * q) * Math.sin(2 * q * n('R0_angstrom') + n('phase_rad')));
    const got = directTransform(k, plan.weight, chi, n('R_angstrom'));
    // The trapezoid rule at dk 0.05 errs by dk²/12 times the slope at the ends of a window that jumps: 1e-3 of the peak
    const abs = 1e-3 * peaks.get(key(row))!;
    expectNear(got.real * Math.sqrt(Math.PI), n('I_re'), { abs, label: `${key(row)} re at ${n('R_angstrom')}` });
    expectNear(got.imaginary * Math.sqrt(Math.PI), n('I_im'), { abs, label: `${key(row)} im at ${n('R_angstrom')}` });
  }
});

test('transform of a Gaussian-damped shell has its closed form', () => {
  const rows = table('fourier-gaussian');
  expect(rows.length).toBe(15);
  const k = uniformKGrid(80);
  const plan = transformPlan(k, { kWeight: 0, kMin: 0, kMax: 80, sill: 0 });
  for (const row of rows) {
    const n = (name: string) => Number(row[name]);
    const chi = k.map((q) => Math.exp(-2 * n('sigma2_angstrom2') * q * q) * Math.sin(2 * q * n('R0_angstrom')));
    // The table integrates over −∞…∞, where an odd chi leaves twice the imaginary part of our half axis
    const got = 2 * Math.sqrt(Math.PI) * directTransform(k, plan.weight, chi, n('R_angstrom')).imaginary;
    expectNear(got, n('I_im_angstrom_inv'), { abs: 1e-11, rel: 1e-11, label: `sigma2 ${n('sigma2_angstrom2')} R ${n('R_angstrom')}` });
  }
});

// N = 2 dk dR/pi (Lee et al., Rev. Mod. Phys. 53, 769 (1981)); +2 of Stern, Phys. Rev. B 48, 9825 (1993); arithmetic done apart.
test.each([
  [3, 12, 1, 3, 11.4591559026, 0.1745329252],
  [2, 14, 1, 2.8, 13.7509870831, 0.1308996939],
  [3, 16, 1, 5, 33.1042281631, 0.1208304867],
  [2.5, 10.5, 1.2, 2.2, 5.0929581789, 0.1963495408],
  [3, 10, 0.8, 2.0, 5.3476060879, 0.2243994753],
])('independent points of k %d to %d, R %d to %d', (k0, k1, r0, r1, points, resolution) => {
  const got = informationContent([k0, k1], [r0, r1]);
  expectNear(got.independentPoints, points, { abs: 1e-10 });
  expectNear(got.independentPointsStern, points + 2, { abs: 1e-10 });
  expectNear(got.resolution, resolution, { abs: 1e-10 });
});
