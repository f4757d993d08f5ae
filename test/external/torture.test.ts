// Invented files, each with one sin of the world's coordinate files; the wanted result was written before the reader
// (test/external/structures/ORIGIN.md). Coordinates are compared exactly: the same decimal text must give the same double.
import { readFileSync } from 'node:fs';
import { findSites, readStructure } from '@ringtrue/core';
import { describe, expect, test } from 'vitest';

interface Expected {
  file: string;
  expect: string;
  n_atoms?: number;
  models?: number;
  frames?: number;
  n_in_cell?: number;
  cell?: number[] | null;
  elements?: string[];
  elements_usable?: string[];
  occupancy?: number[];
  charges?: number[];
  atoms?: {
    element: string;
    x?: number;
    y?: number;
    z?: number;
    resid?: string;
    resname?: string;
    chain?: string;
    charge?: number;
    occupancy?: number;
    altloc?: string;
  }[];
}

const folder = new URL('./structures/', import.meta.url);
const text = (file: string): string => readFileSync(new URL(file, folder), 'utf8');
const expected = JSON.parse(text('expected.json')) as Expected[];
const read = (file: string) => readStructure(text(file), { fileName: file });

/** What these files must not only refuse but say. */
const REMEDIES: Readonly<Record<string, RegExp>> = {
  'p20_nan.pdb': /^line 2, columns 31–38: x should be a number/,
  'p21_stars_coords.pdb': /^line 2, columns 31–38: x should be a number/,
  'p30_empty.pdb': /empty/,
  'p31_headers_only.pdb': /no atoms/,
  'm06_bad_row_length.mmcif': /^line 34: the loop of line 9 has 21 columns/,
  'm08_nan.mmcif': /^line 34: x should be a number/,
  'c07_wrong_cell.cif': /^line 2: cell length a is 0/,
  'x02_too_few.xyz': /^line 1: 4 atoms are announced, but the file ends after 2/,
  'x03_too_many.xyz': /^line 5: the number of atoms of a frame should stand here/,
  'x07_decimal_comma.xyz': /^line 3, columns 4–6: .*decimal point, not a comma/,
  'x08_nan_inf.xyz': /^line 4, columns 3–5: a coordinate should be a number/,
};

/** Outside 0 … 1 an occupancy is cut, and said; the policy asks to keep going. */
const cut = (occupancy: number): number => Math.max(0, Math.min(1, occupancy));

describe.each(expected)('$file', (wanted) => {
  const remedy = REMEDIES[wanted.file];
  if (remedy) {
    test('is refused with place and remedy', () => {
      expect(wanted.expect).toMatch(/error/);
      expect(() => read(wanted.file)).toThrow(expect.objectContaining({ name: 'ReadError', message: expect.stringMatching(remedy) }));
    });
    return;
  }
  test('is read as agreed', () => {
    expect(wanted.expect).toMatch(/ok/);
    const structure = read(wanted.file);
    const all = [structure.atoms, ...structure.moreFrames].flat();
    const unknown = structure.diagnostics.filter(({ code }) => code === 'unknown-element').length;
    if (wanted.n_atoms !== undefined) expect(all.length + unknown).toBe(wanted.n_atoms);
    if (wanted.expect.includes('warnings')) expect(structure.diagnostics).not.toEqual([]);
    const frames = wanted.models ?? wanted.frames;
    if (frames !== undefined) expect(structure.moreFrames.length + 1).toBe(frames);
    if (wanted.cell === null) expect(structure.cell).toBeUndefined();
    else if (wanted.cell) {
      const { a, b, c, alpha, beta, gamma } = structure.cell!;
      expect([a, b, c, alpha, beta, gamma]).toEqual(wanted.cell);
    }
    const elements = wanted.elements ?? wanted.elements_usable;
    if (elements) expect(structure.atoms.map(({ element }) => element)).toEqual(elements);
    if (wanted.occupancy) expect(structure.atoms.map(({ occupancy }) => occupancy)).toEqual(wanted.occupancy);
    if (wanted.charges) expect(structure.atoms.map(({ formalCharge }) => formalCharge)).toEqual(wanted.charges);
    wanted.atoms?.forEach((atom, i) => {
      const got = all[i]!;
      expect(got.element).toBe(atom.element === 'D' ? 'H' : atom.element);
      (['x', 'y', 'z'] as const).forEach((axis, j) => {
        if (atom[axis] !== undefined) expect(got.position[j]).toBe(atom[axis]);
      });
      if (atom.resid !== undefined) expect(`${got.residue!.number}${got.residue!.insertion}`).toBe(atom.resid);
      if (atom.resname !== undefined) expect(got.residue!.name).toBe(atom.resname);
      if (atom.chain !== undefined) expect(got.residue!.chain).toBe(atom.chain);
      if (atom.charge !== undefined) expect(got.formalCharge).toBe(atom.charge);
      if (atom.occupancy !== undefined) expect(got.occupancy).toBe(cut(atom.occupancy));
      if (atom.altloc !== undefined) expect(got.alternate).toBe(atom.altloc);
    });
    for (const atom of all) expect(atom.position.every(Number.isFinite)).toBe(true);
  });
});

test('the shifted line gives its own coordinates, not those of its columns', () => {
  expect(read('p16_serial_shifted.pdb').atoms[0]!.position).toEqual([10, 20, 30]);
});

test('atoms of unknown element are left out one by one, never renamed', () => {
  const { atoms, diagnostics } = read('p28_unknown_element.pdb');
  expect(atoms.map(({ element }) => element)).toEqual(['N']);
  expect(diagnostics.map(({ line }) => line)).toEqual([2, 3]);
});

test('each wrong occupancy has its message', () => {
  const lines = read('p18_occupancy_sums.pdb').diagnostics.map(({ line }) => line);
  expect(lines.sort()).toEqual([1, 3, 4, 5]);
});

test('alternates A and B are never neighbours of each other', () => {
  const sites = findSites(
    {
      ...read('p07_altlocs.pdb'),
      atoms: read('p07_altlocs.pdb').atoms.map((atom) => ({ ...atom, element: atom.element === 'O' ? 'S' : atom.element })),
    },
    { absorber: 'S', radius: 5 },
  );
  expect(sites.map(({ weight, atoms }) => [weight, atoms.length, atoms[1]!.distance.toFixed(12)])).toEqual([
    [0.6, 2, (1.4).toFixed(12)],
    [0.4, 2, Math.hypot(1.1, 1.2).toFixed(12)],
  ]);
});

test('an atom written twice never enters a cluster at distance 0', () => {
  const [site] = findSites(read('p19_duplicate_atoms.pdb'), { absorber: 'Zn', radius: 5 });
  expect(site!.atoms.length).toBe(4);
  expect(site!.atoms[1]!.distance).toBeGreaterThan(0.5);
});

test('models are not overlaid as neighbours', () => {
  expect(findSites(read('p11_two_models.pdb'), { absorber: 'Zn', radius: 5 })[0]!.atoms.length).toBe(2);
});

test.each([
  ['c01_uncertainties.cif', 8],
  ['c02_symops_only.cif', 4],
  ['c04_special_position_third.cif', 2],
])('%s holds %i atoms a cell', (file, count) => {
  const structure = read(file);
  const [site] = findSites(structure, { radius: 3 });
  const { a, b, c, gamma } = structure.cell!;
  expect(site!.atomDensity! * a * b * c * Math.sin((gamma * Math.PI) / 180)).toBeCloseTo(count, 9);
});

test('images of a third written with four digits merge: twelve neighbours, none at 0.0003 Å', () => {
  const [site] = findSites(read('c04_special_position_third.cif'), { radius: 2.52 });
  expect(site!.atoms.length).toBe(13);
  expect(site!.atoms[1]!.distance).toBeGreaterThan(2.49);
});

test('a character lost or added in a PDB line never gives another element or place', () => {
  const line = 'HETATM    4 ZN    ZN A 201      15.647   2.345  -3.125  1.00 20.00          ZN  ';
  for (let at = 0; at < 54; at++) {
    for (const spoiled of [line.slice(0, at) + line.slice(at + 1), `${line.slice(0, at)} ${line.slice(at)}`]) {
      let atoms: ReturnType<typeof read>['atoms'] = [];
      try {
        atoms = readStructure(`HEADER\n${spoiled}\n`).atoms;
      } catch (error) {
        expect(error).toMatchObject({ name: 'ReadError' });
      }
      for (const { element, position } of atoms) {
        if (at < 30) expect([element, ...position], spoiled).toEqual(['Zn', 15.647, 2.345, -3.125]);
        else expect(element, spoiled).toBe('Zn');
      }
    }
  }
});
