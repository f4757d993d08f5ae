// Correlated Debye σ² against an independent quadrature; the sources stand at the head of the two tables.
import { expect, test } from 'vitest';
import { correlatedDebye, type ThermalVertex } from '../../packages/core/src/disorder/index.js';
import { expectNear } from '../support/expect-near.js';
import { readTable } from '../support/table.js';

const densityOf = (kD: number) => kD ** 3 / (6 * Math.PI ** 2);

test('shells 1–6 of copper, nickel, iron and ZnSe, 10–1000 K', () => {
  const rows = readTable(new URL('data/debye-shells.csv', import.meta.url));
  expect(rows.length).toBe(144);
  for (const row of rows) {
    const model = correlatedDebye({
      debyeTemperature: Number(row['theta_D_K']),
      atomDensity: densityOf(Number(row['kD_per_angstrom'])),
      temperature: Number(row['T_K']),
    });
    const route: ThermalVertex[] = [
      { atom: 0, element: 'X', position: [0, 0, 0], mass: Number(row['mass_absorber_u']) },
      { atom: 1, element: 'Y', position: [Number(row['R_angstrom']), 0, 0], mass: Number(row['mass_scatterer_u']) },
    ];
    // The table prints 9 decimals (half a digit: 2e-7 relative of the smallest) and R to 1e-6 Å.
    expectNear(model.sigma2(route), Number(row['sigma2_sqrtMiMj_variant_angstrom2']), {
      rel: 1e-6,
      label: `${row['system']} R ${row['R_angstrom']} T ${row['T_K']}`,
    });
  }
});

test('triangles, collinear routes and routes over the absorber in copper', () => {
  const rows = readTable(new URL('data/debye-routes.csv', import.meta.url));
  expect(rows.length).toBe(27);
  for (const row of rows) {
    const model = correlatedDebye({
      debyeTemperature: Number(row['theta_D_K']),
      atomDensity: 4 / Number(row['lattice_a_angstrom']) ** 3,
      temperature: Number(row['T_K']),
    });
    const positions = JSON.parse(row['atom_positions_angstrom_json']!) as [number, number, number][];
    const route = positions.map((position, atom): ThermalVertex => ({ atom, element: 'Cu', position, mass: 63.546 }));
    expectNear(model.sigma2(route), Number(row['sigma2_angstrom2']), { rel: 1e-6, label: `${row['path']} T ${row['T_K']}` });
  }
});

// Closed forms of the same model, evaluated independently (Si(x) from its series): Cu, θ 315 K, first shell.
test('T = 0 and the classical slope of copper', () => {
  const at = (temperature: number) =>
    correlatedDebye({ debyeTemperature: 315, atomDensity: 4 / 3.6149 ** 3, temperature }).sigma2([
      { atom: 0, element: 'Cu', position: [0, 0, 0], mass: 63.546 },
      { atom: 1, element: 'Cu', position: [1.80745, 1.80745, 0], mass: 63.546 },
    ]);
  expectNear(at(0), 0.003129571, { rel: 1e-6, label: 'σ² at 0 K' });
  // The next term of coth, (θ/2T)²/6, is 1e-8 of the slope here.
  expectNear((at(8e5) - at(4e5)) / 4e5, 2.8421962019e-5, { rel: 1e-6, label: 'dσ²/dT' });
});

// EXAFS literature on foils, from memory (e.g. Fornasini et al., Phys. Rev. B 70, 174301 (2004) for copper; ranges as remembered).
test('first shells of copper, nickel and platinum lie within the scatter of the literature', () => {
  const first = (a: number, mass: number, debyeTemperature: number, temperature: number) =>
    correlatedDebye({ debyeTemperature, atomDensity: 4 / a ** 3, temperature }).sigma2([
      { atom: 0, element: 'M', position: [0, 0, 0], mass },
      { atom: 1, element: 'M', position: [a / 2, a / 2, 0], mass },
    ]);
  expectNear(first(3.6149, 63.546, 315, 300), 0.0085, { abs: 0.0005, label: 'Cu 300 K' });
  expectNear(first(3.6149, 63.546, 315, 15), 0.00315, { abs: 0.00025, label: 'Cu 15 K' });
  expectNear(first(3.6149, 63.546, 315, 78), 0.0035, { abs: 0.0003, label: 'Cu 78 K' });
  expectNear(first(3.524, 58.693, 390, 300), 0.006, { abs: 0.0006, label: 'Ni 300 K' });
  expectNear(first(3.9242, 195.084, 240, 300), 0.005, { abs: 0.0005, label: 'Pt 300 K' });
});
