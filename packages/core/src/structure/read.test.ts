// All texts here are invented.
import { describe, expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { BOHR_ANGSTROM } from '../constants.js';
import { ReadError } from '../errors.js';
import { findSites, readStructure, XyzFrames } from './index.js';

const codes = (text: string) => readStructure(text).diagnostics.map(({ code }) => code);

describe('extended XYZ', () => {
  test('columns in any order, units in bohr, a turned lattice', () => {
    const structure = readStructure('1\nLattice="0 4 0 -4 0 0 0 0 4" Properties=charge:R:1:pos:R:3:species:S:1 units=bohr\n0.5 1 2 3 Cu\n');
    expect(structure.atoms[0]).toMatchObject({ element: 'Cu', position: [BOHR_ANGSTROM, 2 * BOHR_ANGSTROM, 3 * BOHR_ANGSTROM] });
    expectNear(structure.cell!.a, 4 * BOHR_ANGSTROM, { rel: 1e-15 });
    expect(structure.diagnostics.map(({ code }) => code)).toEqual(['units-bohr']);
    // Six neighbours of a simple cubic lattice, whatever way it is turned.
    expect(
      findSites(structure, { radius: 2.2 })[0]!
        .atoms.slice(1)
        .map(({ distance }) => distance.toFixed(9)),
    ).toEqual(Array(6).fill((4 * BOHR_ANGSTROM).toFixed(9)));
  });

  test('a lattice that does not repeat is no crystal, whatever its numbers', () => {
    expect(readStructure('1\nLattice="0 0 0 0 0 0 0 0 0" pbc="F F F"\nCu 0 0 0\n').cell).toBeUndefined();
  });

  test('dummies are left out and said; an unknown element is an error; a changing cell is said', () => {
    expect(codes('2\n\nX 0 0 0\nFe 1 0 0\n')).toEqual(['dummy-atom']);
    expect(() => readStructure('1\n\nQv 0 0 0\n')).toThrow(/^line 3: "Qv" is no element/);
    const frame = (a: number) => `1\nLattice="${a} 0 0 0 ${a} 0 0 0 ${a}"\nCu 0 0 0\n`;
    expect(codes(frame(4) + frame(4))).toEqual([]);
    expect(codes(frame(4) + frame(4.1))).toEqual(['cell-changes']);
  });

  test.each([
    ['1\nLattice="1 0 0 0 1 0"\nCu 0 0 0\n', /line 2: Lattice should hold nine numbers/],
    ['1\nLattice="1 0 0 2 0 0 0 0 1"\nCu 0 0 0\n', /line 2: cell angle gamma is 0°/],
    ['1\nProperties=pos:R:3\n0 0 0\n', /line 2: Properties should name species/],
    ['1\n\nCu 0 0\n', /line 3: an element and three coordinates/],
    ['0\n\n', /a frame of 0 atoms/],
  ])('%j', (text, message) => {
    expect(() => readStructure(text)).toThrow(ReadError);
    expect(() => readStructure(text)).toThrow(message);
  });

  test('a stream holds no more than a frame and gives each frame once', () => {
    const reader = new XyzFrames();
    let frames = 0;
    for (let i = 0; i < 1000; i++) frames += reader.push(`2\nstep ${i}\nFe 0 0 ${i}\nO 1 0 0\n`).length;
    expect(frames).toBe(1000);
    expect(reader.end()).toEqual([]);
    expect(() => {
      const cut = new XyzFrames();
      cut.push('2\n\nFe 0 0 0\n');
      cut.end();
    }).toThrow(/2 atoms are announced, but the file ends after 1/);
  });
});

const cif = (header: string, rows: string, columns = '_atom_site_label\n_atom_site_fract_x\n_atom_site_fract_y\n_atom_site_fract_z') =>
  `data_one\n_cell_length_a 5\n_cell_length_b 6\n_cell_length_c 7\n${header}\nloop_\n${columns}\n${rows}\n`;
const P1 = "_symmetry_space_group_name_H-M 'P 1'";

describe('CIF', () => {
  test('operators listed win over a name that says otherwise', () => {
    const structure = readStructure(cif(`${P1}\nloop_\n_space_group_symop_operation_xyz\nx,y,z\n-x,-y,-z`, 'Fe1 .1 .2 .3'));
    expect(structure.operators.map(({ text }) => text)).toEqual(['x,y,z', '-x,-y,-z']);
  });

  test('a formula settles CA1; anisotropic displacements give the mean', () => {
    const aniso =
      'loop_\n_atom_site_aniso_label\n_atom_site_aniso_U_11\n_atom_site_aniso_U_22\n_atom_site_aniso_U_33\nFE1 0.01(1) 0.02 0.03';
    const structure = readStructure(`${cif(`${P1}\n_chemical_formula_sum 'C2 Fe'`, 'CA1 0 0 0\nFE1 .5 .5 .5')}\n${aniso}\n`);
    expect(structure.atoms.map(({ element }) => element)).toEqual(['C', 'Fe']);
    expectNear(structure.atoms[1]!.uIso!, 0.02, { rel: 1e-14 });
  });

  test('the first block with atoms is read, others are named', () => {
    const two = `data_global\n_struct_title 'x'\n${cif(P1, 'Fe1 0 0 0')}${cif(P1, 'Cu1 0 0 0').replace('data_one', 'data_two')}`;
    const structure = readStructure(two);
    expect(structure.atoms.map(({ element }) => element)).toEqual(['Fe']);
    expect(structure.diagnostics).toMatchObject([{ code: 'more-blocks', message: expect.stringContaining('"two"') }]);
  });

  test('without any symmetry P 1 is assumed aloud, or refused when strict', () => {
    expect(codes(cif('', 'Fe1 0 0 0'))).toEqual(['no-symmetry']);
    expect(() => readStructure(cif('', 'Fe1 0 0 0'), { strict: true })).toThrow(ReadError);
  });

  test.each([
    [cif("_symmetry_space_group_name_H-M 'Q 17'", 'Fe1 0 0 0'), /space group "Q 17" is not known/],
    [cif(`${P1}\n_struct_title 'open`, 'Fe1 0 0 0'), /line 6: a quoted value is not closed/],
    [cif(`${P1}\n_struct_title\n;open`, 'Fe1 0 0 0'), /line 7: a text field opened by ";" is never closed/],
    [cif(P1, 'Fe1 0 0 0 0'), /the loop of line 6 has 4 columns/],
    [cif(P1, 'Fe1 0 0 0', '_atom_site_label\n_atom_site_fract_x\n_atom_site_fract_y\n_atom_site_U'), /no column for z/],
    [cif(P1, 'Fe1 0 0 0').replace('_cell_length_b 6\n', ''), /the unit cell is incomplete/],
    [cif(P1, 'Fe1 0 0 0').replace(/_cell.*\n/g, ''), /the file gives no unit cell/],
    [cif(P1, 'Fe1 0 0 0').replace('_a 5', '_a five'), /line 2: _cell_length_a should be a number/],
    [cif(P1, 'Zz1 0 0 0').replace('Zz1', '?'), /no atom with coordinates and a known element/],
    ['data_x\n_cell_length_a 5\n', /holds no atoms/],
  ])('case %#', (text, message) => {
    expect(() => readStructure(text)).toThrow(ReadError);
    expect(() => readStructure(text)).toThrow(message);
  });
});

test.each([
  ['hello world', /neither XYZ .* nor CIF .*"hello world"/],
  ['PK\u0003\u0004\0\0', /binary/],
  [' \n\n ', /empty/],
])('%j is no structure', (text, message) => {
  expect(() => readStructure(text)).toThrow(message);
});

test('a PDB file: hexagonal cell by the archive’s name, unknown group refused with its columns', () => {
  const atom = 'HETATM    1 ZN    ZN A   1       1.000   2.000   3.000  1.00 20.00          ZN\n';
  const text = `CRYST1   60.000   60.000  150.000  90.00  90.00 120.00 H 3 2        18\n${atom}`;
  expect(readStructure(text).operators.length).toBe(18);
  expect(() => readStructure(text.replace('H 3 2', 'Q 3 2'))).toThrow(/^line 1, columns 56–66: the space group "Q 3 2" is not known/);
  expect(() => readStructure(text.replace('150.000', '150.0x0'))).toThrow(/^line 1, columns 25–33/);
});

test('an mmCIF residue number that is none is said with its line, once a residue', () => {
  const text = [
    'data_x',
    'loop_',
    ...'group_PDB id type_symbol label_atom_id label_comp_id label_asym_id auth_seq_id Cartn_x Cartn_y Cartn_z occupancy'
      .split(' ')
      .map((name) => `_atom_site.${name}`),
    'HETATM 1 Zn ZN ZNC A 1x2 0 0 0 1',
    'HETATM 2 O O1 ZNC A 1x2 2 0 0 1',
    'HETATM 3 O O HOH A . 0 2 0 1',
  ].join('\n');
  const { diagnostics, atoms } = readStructure(text);
  expect(atoms).toHaveLength(3);
  const said = diagnostics.filter(({ code }) => code === 'bad-residue-number');
  expect(said).toMatchObject([{ line: 14, message: expect.stringContaining('"1x2" is no residue number') }]);
});
