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

test('a CONECT counts like a link; serials of nobody and bonds across the file are said', () => {
  expect(bonded(`${file()}\nCONECT    1    2    3`)).toEqual(['S', 'O']);
  const bad = readStructure(`${file()}\nCONECT    1    9\nCONECT    1    4`);
  expect(bad.links).toBeUndefined();
  expect(bad.diagnostics.map(({ code, line }) => [code, line])).toEqual([
    ['conect-without-atom', 5],
    ['conect-too-long', 5],
  ]);
});

test('a link to a symmetry copy bonds that image alone', () => {
  // P 1 with a = 12 Å: the oxygen at −9 Å has an image at 3 Å, too long a bond by radii; its own place stays unbonded.
  const cell = 'CRYST1   12.000   20.000   20.000  90.00  90.00  90.00 P 1           1';
  const record = 'LINK        ZN    ZN A   1                 OD2 ASP A   3     1555   2655  3.00';
  const without = describeSites(readStructure(`${cell}\n${file()}`), { absorber: 'Zn', radius: 10 }).sites[0]!;
  const site = describeSites(readStructure(`${cell}\n${file(record)}`), { absorber: 'Zn', radius: 10 }).sites[0]!;
  const shell = (one: typeof site) => one.neighbours.flatMap(({ label, symmetry, bonded: is }) => (is ? [`${label} ${symmetry}`] : []));
  expect(shell(without)).toEqual(['SG CYS A2 x,y,z']);
  expect(shell(site)).toEqual(['SG CYS A2 x,y,z', 'OD2 ASP A3 x+1,y,z']);
  const far = readStructure(`${cell.replace('12.000', '16.000')}\n${file(record)}`);
  expect(far.links).toBeUndefined();
  expect(far.diagnostics).toContainEqual(expect.objectContaining({ code: 'link-too-long', line: 2 }));
});
