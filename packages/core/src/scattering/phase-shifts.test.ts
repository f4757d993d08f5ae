import { test } from 'vitest';
import { type PlainSphere, plainT } from '../../../../test/reference/radial-plain.js';
import { expectNear } from '../../../../test/support/expect-near.js';
import { SphereSolver } from './phase-shifts.js';

test('relativistic, with loss, heavy and light: t agrees with the slow plain integration', () => {
  const c = 137.035999177;
  for (const Z of [8, 29, 79]) {
    const radius = 2.4;
    const energy = 6;
    const e = { re: energy + 0.4, im: 0.12 };
    const p = { re: 3.5713, im: 0.0337 };
    const V = (r: number) => ({ re: (-Z * Math.exp(-2.5 * r)) / r - 0.4, im: -0.1 * Math.exp(-r) });
    const sphere: PlainSphere = { potential: V, Z, radius, c, energy, e, p };
    const n = Math.ceil(Math.log(radius / 1e-6) / 0.0125) + 1;
    const r = Float64Array.from({ length: n }, (_, i) => radius * Math.exp(0.0125 * (i - n + 1)));
    const re = new Float64Array(12);
    const im = new Float64Array(12);
    const wave = { energy, rVRe: r.map((x) => x * V(x).re), rVIm: r.map((x) => x * V(x).im), eRe: e.re, eIm: e.im, pRe: p.re, pIm: p.im };
    new SphereSolver(r, Z, 11, c).solve(wave, 11, re, im);
    for (const l of [0, 1, 2, 3, 6]) {
      const plain = plainT(l, sphere, 12_000);
      // Sub-steps of 0.06 rad: 1e-6 (see test/external/phase-shifts.test.ts); gold's start at the nucleus adds as much.
      expectNear(re[l]!, plain.re, { abs: 4e-6, label: `Re t, Z = ${Z}, l = ${l}` });
      expectNear(im[l]!, plain.im, { abs: 4e-6, label: `Im t, Z = ${Z}, l = ${l}` });
    }
  }
});
