// Worked bond-valence sums of handbook crystals, computed independently from the bond lengths with R0 and b of Brown & Altermatt,
// Acta Cryst. B41, 244 (1985); Cu(I)–O 1.610 from Brown's accumulated table (2013). The lengths are printed to 1e-4 Å, so a sum of
// six bonds of half a unit is good to 6 · 0.5 · 5e-5 / 0.37 = 4e-4.
import { readFileSync } from 'node:fs';
import { findSites, readStructure } from '@ringtrue/core';
import { expect, test } from 'vitest';
import { bondValenceSums } from '../../packages/core/src/structure/index.js';
import { expectNear } from '../support/expect-near.js';

const CASES = [
  ['MnO', 'Mn', 2, [2.2224, 2.2224, 2.2224, 2.2224, 2.2224, 2.2224], 1.86472, 1.89978],
  ['NiO', 'Ni', 2, [2.0884, 2.0884, 2.0884, 2.0884, 2.0884, 2.0884], 1.85442, 1.90102],
  ['FeO_ideal', 'Fe', 2, [2.163, 2.163, 2.163, 2.163, 2.163, 2.163], 1.88193, 1.92216],
  ['TiO2_rutile', 'Ti', 4, [1.9485, 1.9485, 1.9485, 1.9485, 1.9801, 1.9801], 4.06858, 4.1743],
  ['Fe2O3_hematite', 'Fe', 3, [1.9457, 1.9457, 1.9457, 2.1162, 2.1162, 2.1162], 2.95402, 3.03646],
  ['CuO_tenorite', 'Cu', 2, [1.9508, 1.9508, 1.9609, 1.9609, 2.784, 2.784], 1.99406, 2.03914],
  ['Cu2O_cuprite', 'Cu', 1, [1.8488, 1.8488], 1.04893, 1.08328],
  ['ZnO_wurtzite', 'Zn', 2, [1.9745, 1.9745, 1.9745, 1.9884], 1.90795, 1.95914],
] as const;

test.each(CASES)('%s: %s(%i)', (crystal, element, state, distances, listed, toSix) => {
  const sumOf = (bonds: readonly number[]) =>
    bondValenceSums(
      element,
      bonds.map((distance) => ({ element: 'O', distance, distanceSd: 0.01, occupancy: 1 })),
    ).find(({ oxidationState }) => oxidationState === state)!;
  expectNear(sumOf(distances).sum, listed, { abs: 8e-4, label: 'listed bonds' });
  const structure = readStructure(readFileSync(new URL(`./crystals/${crystal}.cif`, import.meta.url), 'utf8'));
  const [site] = findSites(structure, { absorber: element, radius: 6 });
  const oxygens = site!.atoms.filter((atom) => atom.element === 'O').map(({ distance }) => distance);
  expectNear(sumOf(oxygens).sum, toSix, { abs: 1e-4, label: 'all oxygens to 6 Å' });
  expect(sumOf(distances).sources.length).toBe(1);
});

test('a ligand without parameters is named, not guessed', () => {
  const [sum] = bondValenceSums('Zn', [
    { element: 'O', distance: 2, distanceSd: 0, occupancy: 1 },
    { element: 'Se', distance: 2.4, distanceSd: 0, occupancy: 1 },
  ]);
  expect(sum!.missing).toEqual(['Se']);
  expect(bondValenceSums('Xe', [{ element: 'O', distance: 2, distanceSd: 0, occupancy: 1 }])).toEqual([]);
});
