import { test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { gaussLegendreUnit } from '../numerics/gauss-legendre.js';
import { Antiderivative, addOverlap } from './overlap.js';

const DX = 1 / 160;
const s = Float64Array.from({ length: 2940 }, (_, i) => Math.exp(-14 + i * DX));

/** The average by its definition, ½ ∫ f(√(r² + R² − 2 r R x)) dx over the cosine: the slow, plain reference. */
function byDefinition(f: (s: number) => number, R: number, r: number): number {
  const { x, w } = gaussLegendreUnit(400);
  let sum = 0;
  for (let i = 0; i < x.length; i++) sum += w[i]! * f(Math.sqrt(r * r + R * R - 2 * r * R * (2 * x[i]! - 1)));
  return sum;
}

test('averages equal those by definition, for a smooth and for a screened Coulomb function', () => {
  const functions = { smooth: (x: number) => Math.exp(-0.8 * x), screened: (x: number) => -Math.exp(-1.3 * x) / x };
  const r = Float64Array.of(1e-4, 0.01, 0.1, 1, 2, 3.5);
  for (const [name, f] of Object.entries(functions)) {
    const G = new Antiderivative(
      -14,
      DX,
      s.map((x) => x * x * f(x)),
    );
    for (const R of [3.7, 4.8, 9]) {
      const out = new Float64Array(r.length).fill(1);
      addOverlap(G, R, 2, r, out);
      // Measured: 1e-7 relative, and 1e-8 near the centre, where antiderivatives cancel; times four.
      r.forEach(
        (ri, i) =>
          void expectNear(out[i]! - 1, 2 * byDefinition(f, R, ri), { rel: 1e-6, abs: 4e-8, label: `${name}, R = ${R}, r = ${ri}` }),
      );
    }
  }
});

test('outside its source a point charge averages to Z/R inside and Z/r outside', () => {
  const G = new Antiderivative(
    -14,
    DX,
    s.map((x) => x),
  );
  const r = Float64Array.of(0.5, 2, 3.9, 4.1, 7);
  const out = new Float64Array(r.length);
  addOverlap(G, 4, 1, r, out);
  // The antiderivative of s·(1/s) starts at the mesh's first point, 8e-7 bohr.
  r.forEach((ri, i) => void expectNear(out[i]!, 1 / Math.max(4, ri), { rel: 2e-6, label: `r = ${ri}` }));
});
