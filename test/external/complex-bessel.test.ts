// Spherical Bessel and Hankel functions against 40-digit values (mpmath), and hard-sphere phase shifts in closed form.
import { expect, test } from 'vitest';
import { besselOrders, sphericalBesselHankel } from '../../packages/core/src/numerics/complex-bessel.js';
import { expectNear } from '../support/expect-near.js';
import { readTable } from '../support/table.js';

test('j and h of complex argument, l ≤ 25', () => {
  const out = besselOrders(25);
  for (const row of readTable('spherical_bessel_complex.csv')) {
    const value = (name: string) => Number(row[name]);
    const l = value('l');
    sphericalBesselHankel(value('z_re'), value('z_im'), out);
    const label = `l = ${l}, z = ${row['z_re']} + ${row['z_im']} i`;
    // Double precision: 1e-12 of the modulus.
    const j = 1e-12 * Math.hypot(value('j_re'), value('j_im'));
    const h = 1e-12 * Math.hypot(value('h1_re'), value('h1_im'));
    expectNear(out.jRe[l]!, value('j_re'), { abs: j, label: `Re j, ${label}` });
    expectNear(out.jIm[l]!, value('j_im'), { abs: j, label: `Im j, ${label}` });
    expectNear(out.hRe[l]!, value('h1_re'), { abs: h, label: `Re h, ${label}` });
    expectNear(out.hIm[l]!, value('h1_im'), { abs: h, label: `Im h, ${label}` });
  }
});

test('hard spheres: t = i j/h', () => {
  const out = besselOrders(10);
  const rows = readTable('phase_shifts.csv').filter(({ potential }) => potential === 'hard_sphere');
  expect(rows.length).toBeGreaterThan(30);
  for (const row of rows) {
    const l = Number(row['l']);
    sphericalBesselHankel(Number(row['k']) * Number(row['parameters']!.split('=')[1]), 0, out);
    const h2 = out.hRe[l]! ** 2 + out.hIm[l]! ** 2;
    expectNear((out.jRe[l]! * out.hIm[l]!) / h2, Number(row['t_re']), { abs: 1e-12, label: 'Re t' });
    expectNear((out.jRe[l]! * out.hRe[l]!) / h2, Number(row['t_im']), { abs: 1e-12, label: 'Im t' });
  }
});

test('an argument without meaning is refused', () => {
  for (const [x, y] of [
    [0, 0],
    [Number.NaN, 1],
    [1, -1],
    [Infinity, 0],
  ] as const)
    expect(() => sphericalBesselHankel(x, y, besselOrders(3))).toThrow(RangeError);
});
