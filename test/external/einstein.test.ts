// Einstein σ² against its closed form in extended precision; the source stands at the head of the table.
import { expect, test } from 'vitest';
import { correlatedDebye, einsteinByBond } from '../../packages/core/src/disorder/index.js';
import { expectNear } from '../support/expect-near.js';
import { MASS } from '../support/spring-bodies.js';
import { readTable } from '../support/table.js';

test('pairs of unlike masses, 10–500 K', () => {
  const rows = readTable(new URL('data/einstein.csv', import.meta.url));
  expect(rows.length).toBe(35);
  for (const row of rows) {
    const [a, b] = [row['atom_A']!, row['atom_B']!];
    const temperature = Number(row['T_K']);
    const beyond = correlatedDebye({ debyeTemperature: 300, atomDensity: 0.08, temperature });
    const model = einsteinByBond({ temperature, beyond, frequencies: { [`${a}-${b}`]: Number(row['wavenumber_per_cm']) } });
    const sigma2 = model.sigma2([
      { atom: 0, element: a, position: [0, 0, 0], mass: MASS[a] ?? 65.38 },
      // The table's reduced mass (6 decimals) fixes the partner's.
      { atom: 1, element: b, position: [0, 0, 2], mass: 1 / (1 / Number(row['reduced_mass_u']) - 1 / (MASS[a] ?? 65.38)) },
    ]);
    // Half the last printed digit, 5e-10 Å², and the rounding of the wavenumber to 1e-4 cm⁻¹, doubled at high T (σ² ∝ ν⁻²).
    expectNear(sigma2, Number(row['sigma2_angstrom2']), {
      abs: 6e-10,
      rel: 1e-4 / Number(row['wavenumber_per_cm']),
      label: `${a}–${b} ${temperature} K`,
    });
  }
});
