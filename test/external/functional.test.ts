// Local functionals at points against libxc 5.2.3 (general-purpose library of functionals).
import { expect, test } from 'vitest';
import { localFunctional } from '../../packages/core/src/atom/index.js';
import { expectNear } from '../support/expect-near.js';
import { readTable } from '../support/table.js';

test('exchange and correlation agree with libxc', () => {
  const rows = readTable('lda_xc_points.csv');
  const exchange = new Map(rows.filter((r) => r['functional'] === 'lda_x').map((r) => [r['rs_bohr'], r]));
  let compared = 0;
  for (const row of rows) {
    const name = { lda_c_vwn: 'vwn', lda_c_vbh: 'barth-hedin' }[row['functional']!] as 'vwn' | 'barth-hedin' | undefined;
    if (!name) continue;
    const x = exchange.get(row['rs_bohr'])!;
    const rho = 3 / (4 * Math.PI * Number(row['rs_bohr']) ** 3);
    const own = localFunctional(name);
    const label = `${name} at rs = ${row['rs_bohr']}`;
    // The table prints 1e-10 Ha.
    expectNear(own.energy(rho), Number(x['energy_per_electron_hartree']) + Number(row['energy_per_electron_hartree']), {
      abs: 1e-8,
      label,
    });
    expectNear(own.potential(rho), Number(x['potential_hartree']) + Number(row['potential_hartree']), { abs: 1e-8, label });
    compared++;
  }
  expect(compared).toBeGreaterThan(10);
});
