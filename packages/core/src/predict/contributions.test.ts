import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { readStructure } from '../structure/index.js';
import { predict } from './predict.js';

const SITE = `11
invented
Fe 0 0 0
S 2.3 0 0
S -2.3 0.1 0
O 0 2.05 0
O 0 -2.0 0.2
C 0 3.2 0.5
C 0 -3.1 0.9
C 3.4 1.4 0
N 1.6 -3.6 1
Cl -3 3 1
F 2 2 -3.4
`;

test('the parts by shell and by order each add up to the whole', () => {
  const { k, chi, contributions, shells } = predict(
    readStructure(SITE),
    { absorber: 'Fe', temperature: 100, bands: true, kMax: 10 },
    { file: 'x', version: '1' },
  );
  const { byShell, byOrder } = contributions!;
  const largest = Math.max(...chi.map(Math.abs));
  for (const parts of [byShell, byOrder]) {
    for (let i = 0; i < k.length; i++) {
      const sum = parts.reduce((total, part) => total + part.chi[i]!, 0);
      expectNear(sum, chi[i]!, { abs: 1e-12 * largest, label: `chi at ${k[i]}` }); // rounding of the sum alone
    }
  }
  expect(byOrder[0]!.label).toBe('single scattering');
  expect(byShell.map(({ label }) => label)).toEqual(expect.arrayContaining([shells[0]!.label, 'other shells', 'multiple scattering']));
});

test('without bands there are none', () => {
  expect(predict(readStructure(SITE), { absorber: 'Fe', kMax: 8 }, { file: 'x', version: '1' })).not.toHaveProperty('contributions');
});
