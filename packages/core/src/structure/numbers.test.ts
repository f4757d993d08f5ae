import { expect, test } from 'vitest';
import { seededRandom } from '../../../../test/support/random.js';
import { chargeOf, elementOfLabel, elementOfPdbName, elementOfType } from './labels.js';
import { decimal, numberWithSu } from './numbers.js';
import { hybrid36 } from './pdb.js';

test('decimals are the doubles their text means', () => {
  const random = seededRandom(3);
  for (let i = 0; i < 2000; i++) {
    const text = (random() * 10 ** Math.floor(6 * random()) * (random() < 0.5 ? -1 : 1)).toFixed(Math.floor(17 * random()));
    expect(decimal(text)).toBe(Number(text));
  }
  expect(['+3.', '.5', '-0.25', '1.0D+00', '2.5e-3', ' 7 '].map(decimal)).toEqual([3, 0.5, -0.25, 1, 0.0025, 7]);
});

test.each(['', ' ', '.', '-', 'nan', 'NaN', 'inf', '-Infinity', '1,5', '0x10', '1e', '1 2', '*****', '1.2.3', '--1'])(
  '"%s" is no number',
  (text) => {
    expect(decimal(text)).toBeNaN();
  },
);

test('standard uncertainties in units of the last digit', () => {
  expect(numberWithSu('1.234(5)')).toEqual([1.234, 0.005]);
  expect(numberWithSu('-0.5000(13)')).toEqual([-0.5, 0.0013]);
  expect(numberWithSu('90.5(2)')[1]).toBeCloseTo(0.2, 15);
  expect(numberWithSu('120(3)')).toEqual([120, 3]);
  expect(numberWithSu('1.5')).toEqual([1.5, 0]);
  for (const bad of ['1.2(x)', '(5)', '1.2()', 'a(1)']) expect(numberWithSu(bad)[0]).toBeNaN();
});

test('elements from labels, types and PDB names', () => {
  expect(['Fe1', 'FE1', 'fe', 'O1A', 'OW3', '26', 'Ho1', 'Co2'].map((label) => elementOfLabel(label))).toEqual([
    'Fe',
    'Fe',
    'Fe',
    'O',
    'O',
    'Fe',
    'Ho',
    'Co',
  ]);
  expect(elementOfLabel('CA1', new Set(['C', 'H', 'Fe']))).toBe('C');
  expect(elementOfLabel('CA1', new Set(['Ca', 'C']))).toBe('Ca');
  expect(['Q1', 'Xx', '*', '104', ''].map((label) => elementOfLabel(label))).toEqual([
    undefined,
    undefined,
    undefined,
    undefined,
    undefined,
  ]);
  expect(elementOfType('Mg2+')).toEqual({ element: 'Mg', charge: 2 });
  expect(elementOfType('D')).toEqual({ element: 'H' });
  expect(elementOfPdbName(' CA ', 'GLY')).toBe('C');
  expect(elementOfPdbName('CA  ', 'CA')).toBe('Ca');
  expect(elementOfPdbName('CA  ', 'GLY')).toBe('C');
  expect(['2+', '+2', '1-', '-', '', '2'].map(chargeOf)).toEqual([2, 2, -1, -1, undefined, undefined]);
});

test('hybrid-36 residue numbers continue the decimal ones', () => {
  expect(['9999', 'A000', 'A001', 'ZZZZ', 'a000', '-3', 'A-01', '    '].map(hybrid36)).toEqual([
    9999,
    10000,
    10001,
    1223055,
    1223056,
    -3,
    Number.NaN,
    Number.NaN,
  ]);
});
