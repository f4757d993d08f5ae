import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { truthChi } from '../../../../test/support/synthetic-scan.js';
import { massAttenuation } from '../elements/index.js';
import { energyEvFromK } from '../spectrum/index.js';
import { readScan } from './read-scan.js';
import { reduce } from './reduce.js';
import { selfAbsorption } from './self-absorption.js';

test('a damped small oscillation gets its size back', () => {
  // The thick sample's signal itself: I = μ_a (1 + χ)/(μ_other + μ_a (1 + χ) + g μ_f), all in units of μ_a; χ small, for the formula is its first order
  const [other, fluorescence, angleIn, angleOut] = [0.8, 1.1, 30, 60];
  const g = Math.sin(Math.PI / 6) / Math.sin(Math.PI / 3);
  const signal = (chi: number) => (1 + chi) / (other + 1 + chi + g * fluorescence);
  const measured = signal(1e-5) / signal(0) - 1;
  const given = { absorber: 1, total: other + 1, atFluorescence: fluorescence, angleIn, angleOut };
  const [factor] = selfAbsorption(Float64Array.of(7112), 7112, given, 'Fe', 'K').factor;
  expectNear(measured * factor!, 1e-5, { rel: 1e-4, label: 'chi' }); // second order in chi
  expect(factor).toBeGreaterThan(1.4);
});

const E0 = 7112;
/** μ/ρ of iron's K shell and of the rest of hematite (Fe 0.6994, O 0.3006 by mass), cm²/g: straight on from below the edge in ln–ln. */
const FE = 0.69943;
const fall = Math.log(massAttenuation(26, 7111) / massAttenuation(26, 6700)) / Math.log(7111 / 6700);
const others = (e: number) => FE * massAttenuation(26, 7111) * (e / 7111) ** fall + (1 - FE) * massAttenuation(8, e);
const shell = (e: number) => FE * massAttenuation(26, e) + (1 - FE) * massAttenuation(8, e) - others(e);

/** Fluorescence of a thin or thick sample, with a weak oscillation, as a file of columns. */
function fluorescence(signal: (shellWithChi: number, e: number) => number) {
  const energies: number[] = [];
  for (let e = -200; e < -30; e += 5) energies.push(e);
  for (let e = -30; e < 25; e += 0.5) energies.push(e);
  for (let k = 2.6; k < 15.5; k += 0.05) energies.push(energyEvFromK(k));
  const rows = energies.map((above) => {
    const e = E0 + above;
    const k = above > 0 ? Math.sqrt(above / energyEvFromK(1)) : 0;
    const rise = 1 / (1 + Math.exp(-above / 0.6));
    const own = shell(Math.max(e, E0)) * rise * (1 + truthChi(k, [{ n: 1, R: 2.2, sigma2: 0.005 }]));
    return `${e} 1 ${signal(own, e) + 0.01}`;
  });
  return readScan(`# energy_eV i0 ifluor\n${rows.join('\n')}\n`, { element: 'Fe', edge: 'K' });
}
// The plain reduction takes a shell that falls with E^−2.7, so the thin sample is given one: its chi comes out untouched
const thin = fluorescence((own, e) => (own / shell(Math.max(e, E0))) * (e / E0) ** -2.7);
const atLine = FE * massAttenuation(26, 6403.9) + (1 - FE) * massAttenuation(8, 6403.9);
const thick = fluorescence((own, e) => own / (own + others(e) + Math.tan(Math.PI / 6) * atLine));
const SETTINGS = { backgroundBelow: 1, e0: E0 };

/** Size of chi against that of the thin sample between two k, and what differs between them as part of it. */
function against(chi: Float64Array, reference: Float64Array, from: number, to: number) {
  let [product, square, difference] = [0, 0, 0];
  for (let i = Math.round(from / 0.05); i <= Math.round(to / 0.05); i++) {
    const weight = (0.05 * i) ** 4;
    product += weight * chi[i]! * reference[i]!;
    square += weight * reference[i]! ** 2;
    difference += weight * (chi[i]! - reference[i]!) ** 2;
  }
  return { size: product / square, difference: Math.sqrt(difference / square) };
}

test('a thick sample of given composition gives the chi of a thin one', () => {
  const { chi } = reduce([thin], SETTINGS);
  const composition = { composition: 'Fe2O3', angleIn: 30, angleOut: 60 };
  const corrected = reduce([thick], { ...SETTINGS, selfAbsorption: composition });
  const plain = reduce([thick], SETTINGS);
  for (const [from, to] of [
    [3, 6],
    [6, 10],
    [10, 14],
  ] as const) {
    const { size, difference } = against(corrected.chi, chi, from, to);
    expectNear(size, 1, { abs: 0.01, label: `size of chi, k ${from} to ${to}` }); // measured 0.0016 at most
    expect(difference).toBeLessThan(0.015); // s chi, the second order the formula leaves: 0.77 times chi, which is 0.02 at most
    expect(against(plain.chi, chi, from, to).size).toBeLessThan(0.3);
  }
  const codes = (reduction: typeof plain) => reduction.warnings.map(({ code }) => code);
  expect(codes(plain)).toContain('self-absorption-risk');
  expect(codes(corrected)).not.toContain('self-absorption-risk');
  const choice = (reduction: typeof plain) => reduction.choices.find(({ what }) => what === 'self-absorption');
  expect(choice(corrected)!.why).toMatch(/^given: Fe2O3 .*56\.\d at the fluorescence \(6404 eV\); .*beam 30° and detector 60°/);
  expect(choice(plain)!.why).toMatch(/^default: /);
});

test('a dilute sample is hardly corrected; stated absorptions correct as their composition does', () => {
  const energyEv = Float64Array.of(7000, E0, 7500, 8000);
  const dilute = selfAbsorption(energyEv, E0, { composition: 'Fe:0.0001,O:0.9999' }, 'Fe', 'K');
  for (const factor of dilute.factor) expectNear(factor, 1, { abs: 2e-3, label: 'factor' }); // 1e-4 of 355 in some 20 cm²/g
  const stated = { absorber: shell(E0), total: shell(E0) + others(E0), atFluorescence: atLine };
  const byHand = selfAbsorption(energyEv, E0, stated, 'Fe', 'K').factor;
  const computed = selfAbsorption(energyEv, E0, { composition: 'Fe2O3' }, 'Fe', 'K').factor;
  expect(computed[0]).toBe(1);
  expectNear(computed[1]!, byHand[1]!, { rel: 1e-3, label: 'factor at the edge' }); // the mass fraction above has five digits
  expect(computed[1]).toBeGreaterThan(3);
  expect(computed[3]).toBeLessThan(computed[1]!);
  // A scan whose energy scale is 8 eV low: its edge, not the table's, is where the shell begins
  const low = selfAbsorption(
    energyEv.map((e) => e - 8),
    E0 - 8,
    { composition: 'Fe2O3' },
    'Fe',
    'K',
  ).factor;
  expectNear(low[1]!, computed[1]!, { rel: 1e-9, label: 'factor at a shifted edge' });
});

test.each([
  [{ absorber: 1, total: 0.5, atFluorescence: 1 }, 'Fe', /absorber ≤ total/],
  [{ composition: 'Fe2O3', angleIn: 0 }, 'Fe', /angles in \(0, 90\]/],
  [{ composition: 'TiO2' }, 'Fe', /"TiO2" holds no Fe/],
  [{ composition: 'Fe2O3' }, undefined, /element has to be stated/],
  [{ composition: 'Fe2Q3' }, 'Fe', /"Q" is no element/],
] as const)('%o is refused in plain words', (given, element, message) => {
  expect(() => selfAbsorption(Float64Array.of(7112, 7200), 7112, given, element, 'K')).toThrow(message);
});
