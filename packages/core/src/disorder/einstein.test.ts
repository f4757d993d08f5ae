import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { MASS } from '../../../../test/support/spring-bodies.js';
import type { Site } from '../structure/types.js';
import { BOND_FREQUENCIES } from './bond-frequencies.js';
import { correlatedDebye } from './debye.js';
import { defaultDebyeTemperature } from './debye-temperatures.js';
import { bondKind, einsteinByBond } from './einstein.js';
import { suggestThermalModel } from './suggest.js';
import type { ThermalVertex } from './types.js';

const vertex = (atom: number, element: string, x: number): ThermalVertex => ({ atom, element, position: [x, 0, 0], mass: MASS[element]! });
const beyond = (temperature: number) => correlatedDebye({ debyeTemperature: 400, atomDensity: 1 / 18, temperature });

test('bonds are told apart by their elements and length', () => {
  const kinds: [string, string, number, string | undefined][] = [
    ['Mn', 'O', 1.62, 'metal–oxo'],
    ['Mn', 'O', 1.82, 'metal–bridging oxide or hydroxo'],
    ['O', 'Fe', 2.0, 'metal–carboxylate, alkoxide or phenolate'],
    ['Fe', 'O', 2.15, 'metal–water'],
    ['Zn', 'N', 2.0, 'metal–ammine, imidazole or porphyrin'],
    ['Fe', 'S', 2.29, 'metal–thiolate or bridging sulfide'],
    ['C', 'N', 1.16, 'C≡N'],
    ['C', 'N', 1.33, 'C=N or aromatic C–N'],
    ['Fe', 'O', 3.2, undefined],
    ['Mn', 'Mn', 2.7, undefined],
  ];
  for (const [a, b, r, kind] of kinds) expect(bondKind(a, b, r)?.kind, `${a}–${b} ${r}`).toBe(kind);
  for (const { wavenumber, range } of BOND_FREQUENCIES) {
    expect(wavenumber).toBeGreaterThanOrEqual(range[0]);
    expect(wavenumber).toBeLessThanOrEqual(range[1]);
  }
});

test('a bond follows its own oscillator, everything else the model beyond', () => {
  const model = einsteinByBond({ temperature: 100, beyond: beyond(100) });
  const thiolate = [vertex(0, 'Fe', 0), vertex(1, 'S', 2.29)];
  // 24.25437/(μ θ) coth(θ/2T), θ = 330 cm⁻¹ · 1.438777 K
  const mu = (MASS['Fe']! * MASS['S']!) / (MASS['Fe']! + MASS['S']!);
  const theta = 330 * 1.438776877;
  expectNear(model.sigma2(thiolate), 24.25437 / (mu * theta) / Math.tanh(theta / 200), { rel: 1e-6 });
  expectNear(model.sigma2AtZero(thiolate), 24.25437 / (mu * theta), { rel: 1e-6 });
  const far = [vertex(0, 'Fe', 0), vertex(1, 'S', 4.5)];
  const triangle = [...thiolate, vertex(2, 'S', -2.29)];
  for (const route of [far, triangle]) expect(model.sigma2(route)).toBe(beyond(100).sigma2(route));
  expect(model.sigma2AtZero(triangle)).toBe(beyond(100).sigma2AtZero(triangle));
});

test("the user's frequency goes first, in either order", () => {
  const at = (pair: string, wavenumber: number) =>
    einsteinByBond({ temperature: 0, beyond: beyond(0), frequencies: { [pair]: wavenumber } }).sigma2([
      vertex(0, 'Fe', 0),
      vertex(1, 'S', 2.29),
    ]);
  expectNear(at('S-Fe', 400), at('Fe-S', 200) / 2, { rel: 1e-12 });
  expect(() => at('Fe-S', 0)).toThrow(/frequency of Fe-S must be > 0 cm⁻¹/);
  expect(() => at('FeS', 300)).toThrow(/"FeS" should be two elements/);
  expect(() => einsteinByBond({ temperature: 10, beyond: beyond(20) })).toThrow(/is for 20 K, this one for 10 K/);
  expect(() => einsteinByBond({ temperature: -1, beyond: beyond(0) })).toThrow(/temperature must be ≥ 0 K/);
});

test('Debye temperatures of elements, a stated guess for compounds', () => {
  expect(defaultDebyeTemperature(['Cu', 'Cu'])).toMatchObject({ value: 343 });
  expect(defaultDebyeTemperature(['Zn', 'S'])).toMatchObject({ value: 400 });
  expect(defaultDebyeTemperature(['Zn', 'S']).source).toMatch(/guess/);
  expect(defaultDebyeTemperature([]).value).toBe(400);
});

test('a metal gets Debye, a compound and a molecule springs, a trajectory itself', () => {
  const site = (periodic: boolean, ...elements: string[]): Site => ({
    label: 'A',
    element: elements[0]!,
    weight: 1,
    periodic,
    radius: periodic ? 6 : Infinity,
    diagnostics: [],
    atoms: elements.map((element, i) => ({
      element,
      name: '',
      position: [2 * i, 0, 0],
      distance: 2 * i,
      occupancy: 1,
      source: i,
      symmetry: '',
    })),
  });
  expect(suggestThermalModel(site(true, 'Cu', 'Cu')).model).toBe('debye');
  expect(suggestThermalModel(site(true, 'Zn', 'S')).reason).toMatch(/directed or ionic/);
  expect(suggestThermalModel(site(false, 'Fe', 'S')).reason).toMatch(/molecule/);
  const frames = (n: number) => ({
    format: 'xyz' as const,
    title: '',
    atoms: [],
    moreFrames: Array.from({ length: n - 1 }, () => []),
    operators: [],
    diagnostics: [],
  });
  expect(suggestThermalModel(site(false, 'Fe', 'S'), frames(200)).model).toBe('ensemble');
  expect(suggestThermalModel(site(false, 'Fe', 'S'), frames(3))).toMatchObject({
    model: 'springs',
    reason: expect.stringMatching(/3 models are too few/),
  });
});
