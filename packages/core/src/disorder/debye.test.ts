import fc from 'fast-check';
import { expect, test } from 'vitest';
import { plainDebyeSigma2 } from '../../../../test/reference/debye-plain.js';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { InputError } from '../errors.js';
import { correlatedDebye } from './debye.js';
import type { ThermalVertex } from './types.js';

const vertex = (atom: number, position: readonly [number, number, number], mass = 63.546, element = 'Cu'): ThermalVertex => ({
  atom,
  position,
  mass,
  element,
});
const coordinate = fc.double({ min: -6, max: 6, noNaN: true });
const anyRoute = fc
  .array(fc.tuple(coordinate, coordinate, coordinate, fc.double({ min: 1, max: 240, noNaN: true })), { minLength: 2, maxLength: 4 })
  .map((list) => list.map(([x, y, z, m], i) => vertex(i, [x, y, z], m)))
  .filter((route) =>
    route.every((v, i) => {
      const w = route[(i + 1) % route.length]!;
      return Math.hypot(...v.position.map((c, k) => c - w.position[k]!)) > 0.5;
    }),
  );

test('agrees with the plain double sum over random routes with unlike masses and repeated atoms', () => {
  const random = seededRandom(11);
  const point = () => [0, 0, 0].map(() => 5 * (random() - 0.5)) as unknown as [number, number, number];
  for (let trial = 0; trial < 6; trial++) {
    const [a, b, c] = [vertex(0, [0, 0, 0], 55), vertex(1, point(), 16), vertex(2, point(), 207)];
    for (const route of [
      [a, b],
      [a, b, c],
      [a, b, a, c],
      [a, b, c, b],
    ]) {
      const temperature = trial * 60;
      const fast = correlatedDebye({ debyeTemperature: 400, atomDensity: 0.09, temperature }).sigma2(route);
      // Midpoint rule with 20 000 points: error about h² /24 · f'' ~ 1e-8 relative.
      expectNear(fast, plainDebyeSigma2(route, 400, 0.09, temperature), { rel: 2e-7, label: `trial ${trial}, ${route.length} legs` });
    }
  }
});

test('σ² is not negative, grows with temperature, and starts from its zero-point value', () => {
  fc.assert(
    fc.property(anyRoute, fc.double({ min: 0, max: 900, noNaN: true }), fc.double({ min: 0, max: 900, noNaN: true }), (route, t1, t2) => {
      const at = (temperature: number) => correlatedDebye({ debyeTemperature: 350, atomDensity: 0.08, temperature });
      const [cold, hot] = [at(Math.min(t1, t2)).sigma2(route), at(Math.max(t1, t2)).sigma2(route)];
      const zero = at(t1).sigma2AtZero(route);
      const rounding = 1e-12;
      expect(zero).toBeGreaterThanOrEqual(0);
      expect(cold).toBeGreaterThanOrEqual(zero - rounding);
      expect(hot).toBeGreaterThanOrEqual(cold - rounding);
      expect(at(0).sigma2(route)).toBe(zero);
    }),
    { numRuns: 60 },
  );
});

test('a route backwards, or its mirror image, has the same σ²', () => {
  fc.assert(
    fc.property(anyRoute, (route) => {
      const model = correlatedDebye({ debyeTemperature: 350, atomDensity: 0.08, temperature: 200 });
      const back = [route[0]!, ...route.slice(1).reverse()];
      const mirror = route.map((v) => ({ ...v, position: [-v.position[1], v.position[0], -v.position[2]] as const }));
      // 3e-8 Å of rounding in the remembered distances.
      expectNear(model.sigma2(back), model.sigma2(route), { rel: 1e-6, abs: 1e-10 });
      expectNear(model.sigma2(mirror), model.sigma2(route), { rel: 1e-6, abs: 1e-10 });
    }),
    { numRuns: 60 },
  );
});

test('bad input is refused in one line', () => {
  const good = { debyeTemperature: 315, atomDensity: 0.085, temperature: 10 };
  for (const debyeTemperature of [0, -1, Number.NaN, Infinity])
    expect(() => correlatedDebye({ ...good, debyeTemperature })).toThrow(/Debye temperature must be > 0 K/);
  expect(() => correlatedDebye({ ...good, atomDensity: 0 })).toThrow(RangeError);
  for (const temperature of [-1, Number.NaN]) expect(() => correlatedDebye({ ...good, temperature })).toThrow(/temperature must be ≥ 0 K/);
  const model = correlatedDebye(good);
  expect(() => model.sigma2([vertex(0, [0, 0, 0])])).toThrow(InputError);
  expect(() => model.sigma2([vertex(0, [0, 0, 0]), vertex(1, [0, 0, 0])])).toThrow(/must be apart/);
  expect(() => model.sigma2([vertex(0, [0, 0, 0]), vertex(1, [Number.NaN, 0, 0])])).toThrow(/must be apart/);
  expect(() => model.sigma2([vertex(0, [0, 0, 0]), vertex(1, [2, 0, 0], Number.NaN)])).toThrow(/atom 1 \(Cu\) needs a mass/);
});
