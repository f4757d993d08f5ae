import { expect, test } from 'vitest';
import { describeSites } from './describe.js';
import { readStructure } from './read.js';

const atom = (serial: number, name: string, residue: string, number: number, x: number, element: string): string =>
  `HETATM${String(serial).padStart(5)} ${name.padEnd(4)} ${residue.padStart(3)} A${String(number).padStart(4)}    ${x.toFixed(3).padStart(8)}${'0.000'.padStart(8)}${'0.000'.padStart(8)}  1.00 10.00          ${element.padStart(2)}`;
const link = (one: string, other: string): string => `LINK        ${one}               ${other}     1555   1555`;

/** An invented zinc with a sulfur at 2.3 Å and an oxygen at 2.95 Å, which radii alone call a neighbour. */
const file = (...links: string[]): string =>
  [
    ...links,
    atom(1, 'ZN', 'ZN', 1, 0, 'ZN'),
    atom(2, ' SG', 'CYS', 2, 2.3, 'S'),
    atom(3, ' OD1', 'ASP', 3, -2.95, 'O'),
    atom(4, ' OD2', 'ASP', 3, -9, 'O'),
  ].join('\n');

const bonded = (text: string) =>
  describeSites(readStructure(text), { absorber: 'Zn' }).sites[0]!.neighbours.flatMap(({ element, bonded: is }) => (is ? [element] : []));

test('a stated bond counts where radii would not have it', () => {
  expect(bonded(file())).toEqual(['S']);
  expect(bonded(file(link('ZN    ZN A   1 ', ' OD1 ASP A   3 ')))).toEqual(['S', 'O']);
});

test('a link to an atom that is not there, or is far away, is said with its line and left out', () => {
  const absent = readStructure(file(link('ZN    ZN A   1 ', ' OD1 ASP A   7 ')));
  expect(absent.links).toBeUndefined();
  expect(absent.diagnostics).toContainEqual(expect.objectContaining({ code: 'link-without-atoms', line: 1 }));
  const far = readStructure(file(link('ZN    ZN A   1 ', ' OD2 ASP A   3 ')));
  expect(far.links).toBeUndefined();
  expect(far.diagnostics).toContainEqual(expect.objectContaining({ code: 'link-too-long', message: expect.stringContaining('9.0 Å') }));
});
