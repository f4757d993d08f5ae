import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { asColumns, syntheticScan } from '../../../../test/support/synthetic-scan.js';
import { readScan } from './read-scan.js';
import { reduce } from './reduce.js';
import { selfAbsorptionFactors } from './self-absorption.js';

test('a damped small oscillation gets its size back', () => {
  // The thick sample's signal itself: I = μ_a (1 + χ)/(μ_other + μ_a (1 + χ) + g μ_f), all in units of μ_a; χ small, for the formula is its first order
  const [other, fluorescence, angleIn, angleOut] = [0.8, 1.1, 30, 60];
  const g = Math.sin(Math.PI / 6) / Math.sin(Math.PI / 3);
  const signal = (chi: number) => (1 + chi) / (other + 1 + chi + g * fluorescence);
  const measured = signal(1e-5) / signal(0) - 1;
  const [factor] = selfAbsorptionFactors(Float64Array.of(1), {
    absorber: 1,
    total: other + 1,
    atFluorescence: fluorescence,
    angleIn,
    angleOut,
  });
  expectNear(measured * factor!, 1e-5, { rel: 1e-4, label: 'chi' }); // second order in chi
  expect(factor).toBeGreaterThan(1.4);
});

test('fluorescence warns, and the correction raises chi by its factor', () => {
  const { energyEv, mu } = syntheticScan('Fe', { shells: [{ n: 6, R: 2, sigma2: 0.005 }] });
  const text = asColumns({ energyEv, mu })
    .replace('mu', 'i0 ifluor')
    .replace(/^(\d\S*) (\S+)$/gm, '$1 1 $2');
  const scan = readScan(text, { element: 'Fe', edge: 'K' });
  const plain = reduce([scan], { backgroundBelow: 1 });
  expect(plain.warnings.map(({ code }) => code)).toContain('self-absorption-risk');
  const sample = { absorber: 1, total: 3, atFluorescence: 2 };
  const corrected = reduce([scan], { backgroundBelow: 1, selfAbsorption: sample });
  const at = 160; // k = 8
  const decay = ((plain.e0 + 243.8) / plain.e0) ** -2.7;
  const expected = selfAbsorptionFactors(Float64Array.of(decay), sample)[0]!;
  expectNear(corrected.chi[at]! / plain.chi[at]!, expected, { rel: 0.05, label: 'factor at k = 8' }); // the step is fitted anew
  expect(() => selfAbsorptionFactors(Float64Array.of(1), { ...sample, total: 0.5 })).toThrow(/absorber ≤ total/);
});
