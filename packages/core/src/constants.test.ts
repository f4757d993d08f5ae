import { expect, test } from 'vitest';
import { expectNear } from '../../../test/support/expect-near.js';
import { BOHR_ANGSTROM, EV_PER_K_SQUARED, HARTREE_EV, HBAR_JS, SPEED_OF_LIGHT } from './constants.js';

// CODATA 2022, 2 m_e e/ħ² = 0.262468423965 Å⁻² eV⁻¹, computed from m_e, e, h (an independent route); half the last digit allowed.
test('k² per eV agrees with the value from m_e, e and h', () => {
  expectNear(1 / EV_PER_K_SQUARED, 0.262468423965, { abs: 5e-12, label: 'k² per eV' });
});

test('the Rydberg energy is half a hartree and e²/a0 c consistent', () => {
  expectNear(HARTREE_EV / 2, 13.60569312299, { abs: 2e-11, label: 'Rydberg, eV' });
  // Bohr radius = ħ/(m_e c α); with m_e c² = 510998.95069 eV (CODATA 2022).
  const hbarEvs = HBAR_JS / 1.602176634e-19;
  expectNear(BOHR_ANGSTROM, ((hbarEvs * 2.99792458e18) / 510998.95069) * SPEED_OF_LIGHT, { rel: 1e-9, label: 'Bohr radius, Å' });
  expect(SPEED_OF_LIGHT).toBeGreaterThan(137);
});
