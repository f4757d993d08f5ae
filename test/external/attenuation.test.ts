/** Attenuation of the elements against the tabulation it was thinned from and against handbook values. */
import { expect, test } from 'vitest';
import { elementBySymbol, emissionLineEv, massAttenuation, shellAttenuation } from '../../packages/core/src/elements/index.js';
import { expectNear } from '../support/expect-near.js';
import { readTable } from '../support/table.js';

test('the tabulation comes back around seven edges', () => {
  const rows = readTable('mass-attenuation.csv');
  expect(rows.length).toBe(175);
  for (const row of rows) {
    const Z = elementBySymbol(row['symbol']!).Z;
    const energyEv = Number(row['energy_eV']);
    // 0.5 %: how far the thinned table is off the whole one
    expectNear(massAttenuation(Z, energyEv), Number(row['total_cm2_per_g']), { rel: 0.005, label: `${row['symbol']} at ${energyEv} eV` });
  }
});

// Hubbell & Seltzer, NISTIR 5632 (1995), quoted from memory. 2 %: their stated uncertainty above 5 keV.
test.each([
  ['Cu', 10000, 215.9],
  ['Fe', 8000, 305.6],
  ['H', 10000, 0.3854],
  ['C', 10000, 2.373],
  ['O', 10000, 5.952],
  ['Al', 10000, 26.23],
  ['Si', 10000, 33.89],
  ['Pb', 10000, 130.6],
  ['Pb', 100000, 5.549],
])('%s at %d eV agrees with the handbook', (symbol, energyEv, expected) => {
  expectNear(massAttenuation(elementBySymbol(symbol).Z, energyEv), expected, { rel: 0.02, label: `${symbol}, cm²/g` });
});

// X-Ray Data Booklet (LBNL), table 1-2, quoted from memory. 0.5 eV: levels are rounded to 0.1 … 1 eV; U 4 eV, its M5 level differs between tabulations
test.each([
  ['Ti', 'K', 4510.84, 0.5],
  ['Fe', 'K', 6403.84, 0.5],
  ['Cu', 'K', 8047.78, 0.5],
  ['Mo', 'K', 17479.34, 0.5],
  ['Pt', 'L3', 9442.3, 0.5],
  ['U', 'L3', 13614.7, 4],
] as const)('%s %s: its strongest line agrees with the handbook', (symbol, edge, expected, abs) => {
  expectNear(emissionLineEv(elementBySymbol(symbol).Z, edge), expected, { abs, label: 'line, eV' });
});

test('the K edges of Mg to Cu and the L3 edges of Zn to U stand in the table of attenuation', () => {
  for (let Z = 12; Z <= 92; Z++) {
    const shell = shellAttenuation(Z, Z < 30 ? 'K' : 'L3');
    expect(shell.at(shell.energyEv)).toBeGreaterThan(0.2 * massAttenuation(Z, shell.energyEv));
  }
});

// Steps by log-log extrapolation of xraylib 4.0.0 CS_Photo from both sides, as in atomic-absorption.csv. 0.5 %: the thinning; scattering has no step
test.each([
  ['Fe', 'K', 354.532],
  ['Zn', 'K', 218.585],
  ['Pt', 'L3', 116.201],
] as const)('the shell of %s %s alone has the step of the whole tabulation', (symbol, edge, expected) => {
  const shell = shellAttenuation(elementBySymbol(symbol).Z, edge);
  expectNear(shell.at(shell.energyEv), expected, { rel: 0.005, label: 'step, cm²/g' });
});

test('what lies outside the table is refused', () => {
  expect(() => massAttenuation(26, 999)).toThrow(/Fe is tabulated from 1 to 100 keV, 999\.0 eV/);
  expect(() => massAttenuation(26, Number.NaN)).toThrow(/1 to 100 keV/);
  expect(() => massAttenuation(94, 9000)).toThrow(/Pu lies beyond the table/);
  expect(() => shellAttenuation(26, 'L3')).toThrow(/Fe L3 edge at 708\.1 eV is not in the table/);
  expect(() => emissionLineEv(26, 'L3')).toThrow(/L lines of Ni \(28\) to U \(92\)/);
});
