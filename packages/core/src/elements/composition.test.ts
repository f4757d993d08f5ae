import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { parseComposition } from './composition.js';

const fractions = (text: string) => Object.fromEntries(parseComposition(text).map(({ symbol, massFraction }) => [symbol, massFraction]));

test('formulas become parts by mass', () => {
  // By hand with the standard atomic weights 55.845, 15.999, 40.078, 1.008; rounded to 1e-4
  expectNear(fractions('Fe2O3')['Fe']!, 0.6994, { abs: 1e-4, label: 'Fe in Fe2O3' });
  expectNear(fractions('Ca(OH)2')['O']!, 0.4319, { abs: 1e-4, label: 'O in Ca(OH)2' });
  expect(fractions('Fe3(PO4)2(H2O)8')).toEqual(fractions('Fe3P2O16H16'));
  expectNear(fractions('Li0.5CoO2')['Li']!, 0.0368, { abs: 1e-4, label: 'Li in Li0.5CoO2' }); // 3.47/94.40
  expect(fractions('Co')).toEqual({ Co: 1 });
  expect(fractions('CO')).not.toHaveProperty('Co');
});

test('parts by mass are taken as they are', () => {
  expect(fractions('Fe:0.05, Si:0.44, O:0.51')).toEqual({ Fe: 0.05, Si: 0.44, O: 0.51 });
});

test.each([
  ['', /no element/],
  ['Fe2O3)', /"\)" without/],
  ['Fe(OH2', /"\(" without/],
  ['Xy2O', /"Xy" is no element symbol/],
  ['fe2O3', /"fe2O3" cannot be read/],
  ['Fe0O3', /an amount of 0/],
  ['(2Fe)', /a number follows/],
  ['Fe:0.5,O:0.3', /add up to 0\.800/],
  ['Fe:0.5,O', /got "O"/],
  ['Fe:0.5,Fe:0.5', /given twice/],
  ['Fe:,O:1', /got "Fe:"/],
])('"%s" is refused in plain words', (text, message) => {
  expect(() => parseComposition(text)).toThrow(message);
});
