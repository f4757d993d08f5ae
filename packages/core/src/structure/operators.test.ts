import { expect, test } from 'vitest';
import { ReadError } from '../errors.js';
import { formatOperator, parseOperator, tidyOperators } from './operators.js';
import { spaceGroupByHall, spaceGroupByName, spaceGroupByNumber } from './space-groups.js';

test('operators in every hand', () => {
  expect(parseOperator('-x, y+1/2, -z')).toEqual({
    rotation: [-1, 0, 0, 0, 1, 0, 0, 0, -1],
    translation: [0, 0.5, 0],
    text: '-x,y+1/2,-z',
  });
  expect(parseOperator('1/2+X,-Y,0.25-Z').text).toBe('x+1/2,-y,-z+1/4');
  expect(parseOperator('x-y,x,z+.3333').translation).toEqual([0, 0, 1 / 3]);
  expect(parseOperator('X-Y , -Y+2/3, 1*Z').rotation).toEqual([1, -1, 0, 0, -1, 0, 0, 0, 1]);
  for (const text of ['x-y,x,z+5/6', '-x+1/8,z,y-1/3', 'x,y,z']) {
    const { rotation, translation } = parseOperator(text);
    expect(formatOperator(rotation, translation)).toBe(text);
  }
});

test.each(['', 'x,y', 'x,y,z,x', 'x,y,q', 'x,y,z+', 'x,y,y', 'x,,z', 'x,y,1/2'])('"%s" is refused', (text) => {
  expect(() => parseOperator(text, 12)).toThrow(ReadError);
  expect(() => parseOperator(text, 12)).toThrow(/^line 12: /);
});

test('identity first, none twice, lattice translations apart', () => {
  const list = ['-x,-y,-z', 'x,y,z', 'x+1,y,z', '-x,-y,-z+2'].map((text) => parseOperator(text));
  expect(tidyOperators(list).map(({ text }) => text)).toEqual(['x,y,z', '-x,-y,-z']);
});

const cell = { a: 5, b: 6, c: 7, alpha: 90, beta: 100, gamma: 90 };
const hexagonal = { a: 5, b: 5, c: 13, alpha: 90, beta: 90, gamma: 120 };
const rhombohedral = { a: 5, b: 5, c: 5, alpha: 55, beta: 55, gamma: 55 };

// Orders of the groups: International Tables A, general position's multiplicity.
test.each([
  ['P 21/c', cell, 4],
  ['P21/c', cell, 4],
  ['P 1 21/n 1', cell, 4],
  ['p 21 21 21', cell, 4],
  ['C 1 2 1', cell, 4],
  ['I 1 2 1', cell, 4],
  ['Pnma', cell, 8],
  ['F m -3 m', cell, 192],
  ['F m 3 m', cell, 192],
  ['I 41/a m d :2', cell, 32],
  ['P 63/m m c', hexagonal, 24],
  ['R -3 c :H', hexagonal, 36],
  ['R -3 c', hexagonal, 36],
  ['R -3 c', rhombohedral, 12],
  ['R -3 m :R', rhombohedral, 12],
  ['H 3 2', hexagonal, 18],
  ['H 3', hexagonal, 9],
  ['P_21', cell, 2],
] as const)('%s has its operators', (name, itsCell, order) => {
  expect(spaceGroupByName(name, itsCell)?.operators.length).toBe(order);
});

test('P 21/c of the table is P 21/c of International Tables A (number 14, unique axis b, cell choice 1)', () => {
  const texts = spaceGroupByName('P 21/c', cell)!.operators.map(({ translation, rotation }) =>
    formatOperator(
      rotation,
      translation.map((v) => ((v % 1) + 1) % 1),
    ),
  );
  expect(texts.sort()).toEqual(['-x,-y,-z', '-x,y+1/2,-z+1/2', 'x,-y+1/2,z+1/2', 'x,y,z']);
});

test('two origins: said which is taken; unknown names are undefined', () => {
  expect(spaceGroupByName('F d -3 m', cell)?.assumed).toMatch(/origin choice 1/);
  expect(spaceGroupByName('F d -3 m:1', cell)?.assumed).toBeUndefined();
  expect(spaceGroupByName('F d -3 m:2', cell)?.assumed).toBeUndefined();
  expect(spaceGroupByName('Q 17', cell)).toBeUndefined();
  expect(spaceGroupByHall('-P 2ybc')?.name).toBe('P 1 21/c 1');
  expect(spaceGroupByNumber(225, cell)?.operators.length).toBe(192);
  expect(spaceGroupByNumber(231, cell)).toBeUndefined();
});
