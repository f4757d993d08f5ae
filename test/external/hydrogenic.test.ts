// Point-nucleus levels in closed form (Sommerfeld–Dirac and Schrödinger), evaluated by mpmath with c = 137.035999084.
import { test } from 'vitest';
import { fillHalfPoints, logMesh, RadialSolver } from '../../packages/core/src/atom/radial-level.js';
import { expectNear } from '../support/expect-near.js';
import { readTable } from '../support/table.js';

test('hydrogen-like levels, Dirac and Schrödinger', () => {
  const mesh = logMesh(-16, 0.005, 4400);
  const solver = new RadialSolver(mesh);
  const potential = { rV: new Float64Array(4400), rVHalf: new Float64Array(4400) };
  for (const row of readTable('hydrogenic_levels.csv')) {
    const Z = Number(row['Z']);
    const n = Number(row['n']);
    const l = Number(row['l']);
    potential.rV.fill(-Z);
    fillHalfPoints(potential);
    const label = `Z = ${Z}, n = ${n}, κ = ${row['kappa']}`;
    const guess = -0.4 * (Z / n) ** 2;
    // The mesh ends at e^6 = 400 bohr; measured error of this step: below 2e-10 relative for Schrödinger, 3e-10 for Dirac.
    const free = solver.solve(potential, { Z, n, kappa: -(l + 1), a: 0, guess });
    expectNear(free, Number(row['E_schroedinger_hartree']), { rel: 1e-9, label: `Schrödinger ${label}` });
    const dirac = solver.solve(potential, { Z, n, kappa: Number(row['kappa']), a: 137.035999084 ** -2, guess });
    expectNear(dirac, Number(row['E_dirac_hartree']), { rel: 1e-9, label: `Dirac ${label}` });
  }
});
