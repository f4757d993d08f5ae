// Free atoms against the NIST tables of density-functional atoms: Kotochigova, Levine, Shirley, Stiles & Clark, Phys. Rev. A 55, 191
// (1997), as converged by dftatom; speed of light of that time, 137.0359895. Functional VWN, Dirac with MacDonald–Vosko exchange.
import { expect, test } from 'vitest';
import { groundConfiguration, shellName, solveAtom } from '../../packages/core/src/atom/index.js';
import type { FreeAtom } from '../../packages/core/src/atom/types.js';
import { expectNear } from '../support/expect-near.js';
import { readTable } from '../support/table.js';

const solved = new Map<string, FreeAtom>();
function solve(Z: number, relativity: 'none' | 'dirac'): FreeAtom {
  const key = `${Z} ${relativity}`;
  const atom = solved.get(key) ?? solveAtom({ Z, relativity, exchangeCorrelation: 'vwn', speedOfLight: 137.0359895 });
  solved.set(key, atom);
  return atom;
}

for (const row of readTable('atom_total_energies.csv')) {
  test(`total energy of ${row['symbol']}`, () => {
    const Z = Number(row['Z']);
    // Table: 1e-6 Ha stated; half the last printed digit is below it. Dirac totals differ by 1e-8 relative between programs.
    expectNear(solve(Z, 'none').total, Number(row['E_tot_LDA_nonrel_hartree']), { abs: 2e-6, label: 'Schrödinger total, Ha' });
    expectNear(solve(Z, 'dirac').total, Number(row['E_tot_RLDA_dirac_hartree']), { abs: 2e-6, rel: 1e-8, label: 'Dirac total, Ha' });
  });
}

test('every tabulated level, Schrödinger and Dirac', () => {
  const rows = readTable('atom_eigenvalues.csv');
  expect(rows.length).toBeGreaterThan(200);
  for (const { Z, method, orbital, j, eigenvalue_hartree: wanted } of rows) {
    const dirac = method !== 'LDA_nonrel';
    const name = dirac ? `${orbital!.slice(0, 2)}${j!.includes('/') ? j : `${Math.round(2 * Number(j))}/2`}` : orbital;
    const level = solve(Number(Z), dirac ? 'dirac' : 'none').levels.find(({ label }) => label === name);
    expect(level, `Z = ${Z} ${method} ${name}`).toBeDefined();
    expectNear(level!.energy, Number(wanted), { abs: 5e-6, label: `Z = ${Z} ${method} ${name}, Ha` });
  }
});

test('configurations of every element compiled elsewhere', () => {
  for (const { Z, symbol, ground_state_configuration: wanted } of readTable('configurations.csv')) {
    const own = groundConfiguration(Number(Z)).map(({ n, l, electrons }) => `${shellName(n, l)}${electrons}`);
    expect(own, symbol).toEqual(wanted!.split(' '));
  }
});

test('every element from 1 to 92 converges and is neutral', () => {
  for (let Z = 1; Z <= 92; Z++) {
    const atom = solveAtom({ Z });
    let electrons = 0;
    for (let i = 0; i < atom.r.length; i++) electrons += atom.radialDensity[i]! * atom.r[i]! * atom.dx;
    expectNear(electrons, Z, { rel: 1e-9, label: `electrons of Z = ${Z}` });
    // A neutral atom leaves no Coulomb tail, and near the nucleus the bare charge.
    expectNear(atom.rCoulomb.at(-1)!, 0, { abs: 1e-6, label: `rV far out, Z = ${Z}` });
    expectNear(atom.rCoulomb[0]!, -Z, { rel: 1e-3, label: `rV at the nucleus, Z = ${Z}` });
  }
});

test('core-hole atoms converge and are neutral', () => {
  for (const [Z, coreHole] of [
    [11, 'K'],
    [16, 'K'],
    [25, 'K'],
    [29, 'K'],
    [47, 'K'],
    [57, 'L3'],
    [78, 'L3'],
    [79, 'L2'],
    [82, 'L1'],
    [92, 'L3'],
  ] as const) {
    const atom = solveAtom({ Z, coreHole });
    expectNear(
      atom.levels.reduce((sum, { occupation }) => sum + occupation, 0),
      Z,
      { abs: 1e-12, label: `electrons of the ${coreHole} hole in Z = ${Z}` },
    );
    expect(atom.levels[0]!.energy).toBeLessThan(solveAtom({ Z }).levels[0]!.energy);
  }
});
