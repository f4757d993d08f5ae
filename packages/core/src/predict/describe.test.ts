import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { readStructure } from '../structure/index.js';
import { predict } from './predict.js';

const context = { file: 'x', version: '1' };
/** Iron with four sulfurs, two of them farther off by `off` Å. */
const split = (off: number) => {
  const [a, b] = [2.25 / Math.sqrt(3), (2.25 + off) / Math.sqrt(3)];
  return readStructure(`5\n\nFe 0 0 0\nS ${a} ${a} ${a}\nS ${-a} ${-a} ${a}\nS ${b} ${-b} ${-b}\nS ${-b} ${b} ${-b}\n`);
};
const shellOf = (off: number) =>
  predict(split(off), { absorber: 'Fe', kMax: 12, maxLegs: 2, temperature: 10, thermal: 'einstein' }, context).shells[0]!;

test('what one shell hides: nothing of one distance, more the farther two lie apart', () => {
  expect(shellOf(0).hiddenByOneShell).toBe(0);
  const [near, far] = [shellOf(0.06), shellOf(0.14)];
  expect(near.count).toBe(4);
  expectNear(near.sigma2.static, 0.03 ** 2, { rel: 1e-6, label: 'static σ²' });
  // Two equal distances 2d apart: cos(2kd) against e^{−2k²d²}; the first term between them is (2kd)⁴/12, 3 % at k = 10, d = 0.04.
  expect(near.hiddenByOneShell).toBeGreaterThan(1e-4);
  expect(near.hiddenByOneShell).toBeLessThan(0.05);
  expect(far.hiddenByOneShell).toBeGreaterThan(5 * near.hiddenByOneShell);
});

test('every σ² says where it comes from, at which temperature, and what would suit the structure', () => {
  const run = (thermal: 'einstein' | 'springs' | 'debye' | 'none') =>
    predict(split(0), { absorber: 'Fe', kMax: 10, maxLegs: 3, temperature: 20, thermal }, context);
  const einstein = run('einstein');
  expect(einstein.paths[0]!.sigma2.from).toBe('metal–thiolate or bridging sulfide, 330 cm⁻¹ (270–400)');
  expect(einstein.paths.find(({ legs }) => legs === 3)!.sigma2.from).toBe('debye');
  expect(einstein.absorbers[0]!.thermal).toMatchObject({ model: 'einstein', temperature: 20, suggested: { model: 'springs' } });
  expect(einstein.absorbers[0]!.thermal.inputs['beyond: Debye temperature, K']).toBeGreaterThan(0);
  expect(run('springs').absorbers[0]!.thermal.inputs['boundary']).toBe('free molecule');
  expect(run('springs').paths[0]!.sigma2.from).toBe('springs');
  expect(run('none').paths[0]!.sigma2).toEqual({ thermal: 0, static: 0, from: 'none' });
});

test('B factors stand beside, as a bound, and are added to nothing', () => {
  const line = (n: number, name: string, element: string, x: number, b: number) =>
    `HETATM${String(n).padStart(5)} ${name.padEnd(4)} LIG A   1    ${x.toFixed(3).padStart(8)}   0.000   0.000  1.00${b.toFixed(2).padStart(6)}          ${element.padStart(2)}\n`;
  const pdb = (b: number) => readStructure(`${line(1, 'FE', 'FE', 0, b)}${line(2, ' S', 'S', 2.3, 2 * b)}END\n`);
  const run = (b: number) => predict(pdb(b), { absorber: 'Fe', kMax: 10, temperature: 20, thermal: 'springs' }, context).shells[0]!;
  // U = B/8π², of both atoms.
  expectNear(run(10).bFactorBound!, 30 / (8 * Math.PI ** 2), { rel: 1e-9, label: 'bound' });
  expect(run(20).sigma2).toEqual(run(10).sigma2);
  expect(shellOf(0).bFactorBound).toBeUndefined();
});
