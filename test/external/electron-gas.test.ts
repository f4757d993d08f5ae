// The plasmon-pole self-energy against quadrature done elsewhere (angle integral in closed form; brute-force q sums agree to
// 4e-6 Ha), closed-form facts of the electron gas, and mean free paths against TPP-2M.
import { expect, test } from 'vitest';
import {
  correlationReal,
  diracHara,
  imaginarySelfEnergy,
  KF_RS,
  plasmonThreshold,
} from '../../packages/core/src/scattering/electron-gas.js';
import { tabulatedSelfEnergy } from '../../packages/core/src/scattering/self-energy-table.js';
import { expectNear } from '../support/expect-near.js';
import { seededRandom } from '../support/random.js';
import { readTable } from '../support/table.js';

test('self-energy on the shell: exchange, real and imaginary correlation', () => {
  for (const row of readTable('heg_plasmon_pole_selfenergy.csv')) {
    const rs = Number(row['rs_bohr']);
    const x = Number(row['k_over_kF']);
    const kF = KF_RS / rs;
    const label = `rs = ${rs}, p/kF = ${x}`;
    // The table prints 1e-7 Ha.
    expectNear(kF * diracHara(x), Number(row['sigma_exchange_hartree']), { abs: 2e-7, label: `exchange, ${label}` });
    expectNear(correlationReal(rs, x * kF), Number(row['sigma_correlation_real_hartree']), { abs: 2e-7, label: `correlation, ${label}` });
    expectNear(imaginarySelfEnergy(rs, x * kF), Number(row['sigma_imag_hartree']), { abs: 2e-7, label: `loss, ${label}` });
  }
});

test('closed-form facts of the electron gas', () => {
  for (const row of readTable('heg_facts.csv')) {
    const rs = Number(row['rs_bohr']);
    expectNear(KF_RS / rs, Number(row['kF_per_bohr']), { abs: 5e-9, rel: 1e-8, label: 'kF' });
    expectNear(plasmonThreshold(rs), Number(row['plasmon_threshold_k_over_kF']), { rel: 1e-6, label: 'plasmon threshold' });
    expectNear((KF_RS / rs) * diracHara(1), Number(row['exchange_selfenergy_kF_hartree']), { abs: 1e-8, label: 'Σx(kF)' });
    expectNear((KF_RS / rs) * diracHara(1e-6), Number(row['exchange_selfenergy_k0_hartree']), { abs: 1e-8, label: 'Σx(0)' });
    expect(imaginarySelfEnergy(rs, (KF_RS / rs) * plasmonThreshold(rs) * 0.9999)).toBe(0);
    expect(imaginarySelfEnergy(rs, (KF_RS / rs) * plasmonThreshold(rs) * 1.01)).toBeLessThan(0);
  }
});

test('quadrature is converged: four times as many points change it by less than 1e-6 Ha', () => {
  for (const rs of [0.1, 1, 2, 5, 20])
    for (const x of [1.0001, 1.2, plasmonThreshold(rs) * 0.999, plasmonThreshold(rs) * 1.001, 3, 10, 40]) {
      const p = (x * KF_RS) / rs;
      expectNear(correlationReal(rs, p), correlationReal(rs, p, 4), { abs: 1e-6, label: `rs = ${rs}, p/kF = ${x}` });
    }
});

test('the table follows the quadrature on both sides of the cusp', () => {
  const random = seededRandom(7);
  const pair = new Float64Array(2);
  for (let i = 0; i < 1500; i++) {
    const rs = 0.05 * 400 ** random();
    const threshold = plasmonThreshold(rs);
    const x = i % 2 ? threshold / (1 - 0.98 * random() ** 2) : 1 + (threshold - 1) * random();
    tabulatedSelfEnergy(rs, x, threshold, pair);
    const kF = KF_RS / rs;
    // Measured: 5e-5 of kF where rs < 0.3 (there Σ itself is of order kF), 2e-5 Ha for valence densities.
    expectNear(pair[0]!, kF * diracHara(x) + correlationReal(rs, x * kF), { abs: 3e-5 + 4e-5 / rs, label: `rs = ${rs}, p/kF = ${x}` });
  }
});

test('mean free path of metals against TPP-2M', () => {
  // Tanuma, Powell & Penn, Surf. Interface Anal. 21, 165 (1994), itself good to 10 … 20 %. One plasmon pole at the density of
  // the valence and d electrons follows it for metals. Insulators lie 30 … 50 % below, since the pole knows no gap.
  const metals = ['Cu', 'Fe', 'Ni', 'Au'];
  const rows = readTable('imfp_tpp2m.csv').filter(
    ({ material, electron_energy_eV: e }) => metals.includes(material!) && Number(e) >= 200 && Number(e) <= 1000,
  );
  expect(rows.length).toBeGreaterThan(15);
  for (const row of rows) {
    const density =
      (Number(row['Nv_valence_electrons_per_formula']) * Number(row['density_g_per_cm3']) * 0.602214076 * 0.529177210544 ** 3) /
      Number(row['molar_mass_g_per_mol']);
    const rs = Math.cbrt(3 / (4 * Math.PI * density));
    const kF = KF_RS / rs;
    const p = Math.sqrt(kF * kF + (2 * Number(row['electron_energy_eV'])) / 27.211386245981);
    // λ = p/(2 |Im Σ|) for the intensity.
    const lambda = (p / (2 * -imaginarySelfEnergy(rs, p))) * 0.529177210544;
    expectNear(lambda, Number(row['imfp_angstrom']), { rel: 0.2, label: `${row['material']} at ${row['electron_energy_eV']} eV, Å` });
  }
});
