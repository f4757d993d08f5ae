import fc from 'fast-check';
import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { distributionPhase, morseThirdCumulant, thirdCumulantPhase } from './phase-terms.js';
import { distanceResolution, groupShells, hiddenByOneShell, type ShellPath } from './shells.js';

const path = (element: string, halfLength: number, degeneracy = 1, thermal = 0.003): ShellPath => ({
  element,
  halfLength,
  degeneracy,
  thermal,
});

test('a Jahn–Teller octahedron is one shell of mixed spread, its nitrogen neighbour another', () => {
  const paths = [path('O', 1.95, 4), path('O', 2.03, 2), path('N', 1.97), path('O', 3.4)];
  const shells = groupShells(paths, distanceResolution(3, 13));
  expect(shells.map((s) => [s.element, s.count])).toEqual([
    ['N', 1],
    ['O', 6],
    ['O', 1],
  ]);
  const oxygen = shells[1]!;
  expectNear(oxygen.meanDistance, (4 * 1.95 + 2 * 2.03) / 6, { abs: 1e-12 });
  // (2/3)(1/3) d², d = 0.08
  expectNear(oxygen.sigma2.static, (2 / 9) * 0.08 ** 2, { abs: 1e-12, label: 'static' });
  expectNear(oxygen.sigma2.total, oxygen.sigma2.static + 0.003, { abs: 1e-15, label: 'total' });
  // Two-point distribution: p q (q − p) d³ with the fewer on the far side → skewed to the right.
  expectNear(oxygen.thirdCumulant, (2 / 9) * (1 / 3) * 0.08 ** 3, { abs: 1e-12, label: 'third' });
});

test('the moments of a shell are those of a sample drawn from its members', () => {
  const random = seededRandom(5);
  const gauss = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
  const paths = [path('S', 2.28, 3, 0.002), path('S', 2.33, 1, 0.009)];
  const [shell] = groupShells(paths, 0.2);
  const n = 200_000;
  const lengths = Array.from({ length: n }, () => {
    const p = paths[random() < 0.75 ? 0 : 1]!;
    return p.halfLength + Math.sqrt(p.thermal) * gauss();
  });
  const mean = lengths.reduce((a, b) => a + b) / n;
  const moment = (m: number) => lengths.reduce((a, b) => a + (b - mean) ** m, 0) / n;
  // Sampling errors of 200 000 draws, four standard deviations: σ/√n, σ²√(2/n), σ³√(6/n).
  const sigma = Math.sqrt(shell!.sigma2.total);
  expectNear(shell!.meanDistance, mean, { abs: (4 * sigma) / Math.sqrt(n), label: 'mean' });
  expectNear(shell!.sigma2.total, moment(2), { abs: 4 * 1.4 * sigma ** 2 * Math.sqrt(2 / n), label: 'variance' });
  expectNear(shell!.thirdCumulant, moment(3), { abs: 4 * 2 * sigma ** 3 * Math.sqrt(6 / n), label: 'third' });
});

test('no shell spans more than the resolution, none is lost, and neighbours that could join are joined', () => {
  const list = fc.array(fc.tuple(fc.constantFrom('O', 'N', 'Fe'), fc.double({ min: 1, max: 6, noNaN: true })), { maxLength: 40 });
  fc.assert(
    fc.property(list, fc.double({ min: 0, max: 0.5, noNaN: true }), (pairs, resolution) => {
      const paths = pairs.map(([element, R]) => path(element, R));
      const shells = groupShells(paths, resolution);
      expect(shells.flatMap((s) => s.members).sort((a, b) => a - b)).toEqual(paths.map((_, i) => i));
      for (const s of shells) expect(s.longest - s.shortest).toBeLessThanOrEqual(resolution * (1 + 1e-9));
      for (const element of ['O', 'N', 'Fe']) {
        const like = shells.filter((s) => s.element === element).sort((a, b) => a.shortest - b.shortest);
        for (let i = 0; i + 1 < like.length; i++) expect(like[i + 1]!.longest - like[i]!.shortest).toBeGreaterThan(resolution);
      }
    }),
  );
});

test('one shell hides nothing of a single distance and much of two that beat', () => {
  const range = { kMin: 3, kMax: 12 };
  const one = [path('O', 2.0, 6)];
  expect(hiddenByOneShell(groupShells(one, 0.15)[0]!, one, range)).toBeLessThan(1e-12);
  const slight = [path('O', 1.99, 3), path('O', 2.01, 3)];
  const strong = [path('O', 1.93, 3), path('O', 2.07, 3)];
  const hidden = (paths: ShellPath[]) => hiddenByOneShell(groupShells(paths, 0.17)[0]!, paths, range);
  expect(hidden(slight)).toBeGreaterThan(0);
  expect(hidden(slight)).toBeLessThan(0.02);
  // ±0.03 Å: cos(2kd) against exp(−2k²d²), 2 % at k = 12; without the static part in the Gaussian it would be 25 %.
  expect(hidden([path('O', 1.97, 3), path('O', 2.03, 3)])).toBeLessThan(0.03);
  // Halves 0.14 Å apart beat to nothing at k = π/0.28 = 11.2 and come back inverted; a Gaussian cannot.
  expect(hidden(strong)).toBeGreaterThan(0.15);
  // A signal given is used: a phase that cancels the sine leaves nothing to hide.
  const silent = hiddenByOneShell(groupShells(strong, 0.17)[0]!, strong, { ...range, signal: () => ({ amplitude: 0, phase: 0 }) });
  expect(silent).toBe(0);
});

// The exact average of sin(2kr)/r² e^{−2r/λ} over a narrow Gaussian distribution of r, by direct summation.
test('the distribution term is the phase shift of an explicit average', () => {
  const [R, sigma2, lambda, k] = [2.5, 0.004, 8, 6];
  let [re, im] = [0, 0];
  for (let i = -4000; i <= 4000; i++) {
    const x = (i / 4000) * 8 * Math.sqrt(sigma2);
    const weight = (Math.exp((-x * x) / (2 * sigma2)) * Math.exp((-2 * (R + x)) / lambda)) / (R + x) ** 2;
    re += weight * Math.cos(2 * k * x);
    im += weight * Math.sin(2 * k * x);
  }
  // First order in σ²/R²: the neglected terms are (σ/R)² = 6e-4 of it, about 3 σ²/R² · 2kσ²/R.
  expectNear(Math.atan2(im, re), distributionPhase(k, sigma2, R, lambda), { rel: 0.01, label: 'phase' });
});

test('the Morse cumulant is positive and its phase draws the shell in', () => {
  expectNear(morseThirdCumulant(0.00894, 0.00313), 0.7 * (3 * 0.00894 ** 2 - 2 * 0.00313 ** 2), { rel: 1e-12 });
  expect(thirdCumulantPhase(10, 1e-4)).toBeCloseTo(-(4 / 3) * 0.1, 12);
});

test('paths that cannot be are named', () => {
  expect(() => groupShells([path('O', 2), path('O', Number.NaN)], 0.1)).toThrow(/path 1 \(O\) needs a half length/);
  expect(() => groupShells([path('O', 2, 0)], 0.1)).toThrow(/degeneracy/);
  expect(() => groupShells([path('O', 2, 1, -1)], 0.1)).toThrow(/thermal/);
  expect(() => groupShells([], -1)).toThrow(RangeError);
  expect(() => distanceResolution(5, 5)).toThrow(RangeError);
});
