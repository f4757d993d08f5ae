// The same files read by gemmi 0.5.7 (Wojdyr, J. Open Source Softw. 7, 4200 (2022)), a general-purpose reader of structure files,
// as the command `gemmi` of Debian: same atoms, same coordinates, same cell. Skipped where the command is absent.
import { execFileSync } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { readStructure, type Structure } from '@ringtrue/core';
import { describe, expect, test } from 'vitest';
import { cellGeometry } from '../../packages/core/src/structure/index.js';
import { expectNear } from '../support/expect-near.js';

function gemmi(...args: string[]): string | undefined {
  try {
    return execFileSync('gemmi', args, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] });
  } catch {
    return undefined;
  }
}

const version = gemmi('--version')?.trim();
if (version === undefined)
  console.warn('general-reader: the command gemmi is not installed; the comparison is skipped (apt-get install gemmi)');

const folder = (name: string): string => fileURLToPath(new URL(`./${name}/`, import.meta.url));
const files = (name: string, pattern: RegExp): string[] =>
  readdirSync(folder(name))
    .filter((file) => pattern.test(file))
    .map((file) => folder(name) + file);
const base = (path: string): string => path.split('/').at(-1)!;

/** Files that one of the two refuses or reads differently on purpose, and why. */
const APART: Readonly<Record<string, string>> = {
  'p03_bom.pdb': 'gemmi loses the CRYST1 line after a byte order mark',
  'p04_cr_only.pdb': 'gemmi finds no lines',
  'p12_cryst1_placeholder.pdb': 'gemmi keeps the 1 × 1 × 1 cell as a number, here it means no crystal',
  'p16_serial_shifted.pdb': 'gemmi reads the shifted columns',
  'p18_occupancy_sums.pdb': 'occupancies are cut to 0 … 1 here',
  'p20_nan.pdb': 'refused here',
  'p21_stars_coords.pdb': 'refused here; gemmi reads 0, 0, 0',
  'p28_unknown_element.pdb': 'atoms of unknown element are left out here',
  'p30_empty.pdb': 'refused here',
  'p31_headers_only.pdb': 'refused here',
  'm04_no_auth_columns.mmcif': 'gemmi needs the auth columns',
  'm05_single_atom_no_loop.mmcif': 'gemmi needs a loop',
  'm06_bad_row_length.mmcif': 'refused by both',
  'm08_nan.mmcif': 'refused here',
  'c06_unknown_coordinates.cif': 'atoms without coordinates are left out here',
  'c07_wrong_cell.cif': 'refused here',
};

/** Element, position and occupancy of each atom of gemmi's own mmCIF output; its rows hold no quoted blanks. */
function macromolecule(path: string): { cell: string[]; atoms: { element: string; position: number[]; occupancy: number; b: number }[] } {
  const lines = gemmi('convert', '--to=mmcif', path, '-')!.split('\n');
  const start = lines.findIndex((line) => line.startsWith('_atom_site.'));
  const tags = lines
    .slice(start)
    .filter((line) => line.startsWith('_atom_site.'))
    .map((line) => line.trim().slice(11));
  const rows = lines.slice(start + tags.length, lines.length).filter((line) => /^(\d|ATOM|HETATM)/.test(line));
  const cell = ['length_a', 'length_b', 'length_c', 'angle_alpha', 'angle_beta', 'angle_gamma'].flatMap(
    (tag) =>
      lines
        .find((line) => line.startsWith(`_cell.${tag} `))
        ?.trim()
        .split(/\s+/)
        .slice(1) ?? [],
  );
  const atoms = rows.map((row) => {
    const values = row.match(/'[^']*(?:'\S[^']*)*'(?=\s)|"[^"]*"|\S+/g)!;
    const get = (tag: string) => values[tags.indexOf(tag)]!;
    return {
      element: get('type_symbol'),
      position: ['x', 'y', 'z'].map((axis) => Number(get(`Cartn_${axis}`))),
      occupancy: Number(get('occupancy')),
      b: Number(get('B_iso_or_equiv')),
    };
  });
  return { cell, atoms };
}

const elementOf = (text: string) => (text === 'D' ? 'H' : text.charAt(0) + text.slice(1).toLowerCase());

function expectCell(structure: Structure, cell: readonly number[]): void {
  const { a, b, c, alpha, beta, gamma } = structure.cell!;
  expect([a, b, c, alpha, beta, gamma]).toEqual(cell);
}

describe.skipIf(version === undefined)('against gemmi', () => {
  test.each(
    files('structures', /\.(pdb|mmcif)$/)
      .filter((path) => !(base(path) in APART))
      .map((path) => [base(path), path] as const),
  )('%s', (_, path) => {
    const structure = readStructure(readFileSync(path, 'utf8'));
    const { atoms, cell } = macromolecule(path);
    const own = [structure.atoms, ...structure.moreFrames].flat();
    expect(own.map(({ element }) => element)).toEqual(atoms.map(({ element }) => elementOf(element)));
    own.forEach((atom, i) => {
      // gemmi prints nine digits at most.
      atom.position.forEach((v, axis) => {
        expectNear(v, atoms[i]!.position[axis]!, { abs: 1e-6, label: `atom ${i}` });
      });
      expect(atom.occupancy).toBe(atoms[i]!.occupancy);
      if (atom.uIso !== undefined) expectNear(atom.uIso * 8 * Math.PI ** 2, atoms[i]!.b, { abs: 1e-5, label: 'B' });
    });
    if (structure.cell) expectCell(structure, cell.map(Number));
  });

  test.each(
    [...files('structures', /\.cif$/), ...files('crystals', /\.cif$/)]
      .filter((path) => !(base(path) in APART))
      .map((path) => [base(path), path] as const),
  )('%s', (_, path) => {
    const structure = readStructure(readFileSync(path, 'utf8'));
    const [block] = Object.values(JSON.parse(gemmi('cif2json', path, '-')!) as Record<string, Record<string, unknown>>) as [
      Record<string, unknown>,
    ];
    const number = (value: unknown) => Number(String(value).replace(/\(\d+\)$/, ''));
    expectCell(
      structure,
      ['length_a', 'length_b', 'length_c', 'angle_alpha', 'angle_beta', 'angle_gamma'].map((tag) => number(block[`_cell_${tag}`])),
    );
    const columns = ['x', 'y', 'z'].map((axis) => (block[`_atom_site_fract_${axis}`] as unknown[]).map(number));
    expect(structure.atoms.map(({ name }) => name)).toEqual(block['_atom_site_label']);
    const { toFractional: B } = cellGeometry(structure.cell!);
    structure.atoms.forEach(({ position: r }, i) => {
      for (let axis = 0; axis < 3; axis++) {
        const f = B[3 * axis]! * r[0] + B[3 * axis + 1]! * r[1] + B[3 * axis + 2]! * r[2];
        expectNear(f, columns[axis]![i]!, { abs: 1e-14, label: `atom ${i}, axis ${axis}` });
      }
    });
  });
});
