// Diffraction-component precision index for invented refinement statistics, computed independently from the formulas of
// Cruickshank, Acta Cryst. D55, 583 (1999) and Blow, Acta Cryst. D58, 792 (2002). Printed to 1e-8 Å; the volume of Blow's form to
// 1e-4 Å³, a relative 1e-9.
import { readStructure } from '@ringtrue/core';
import { expect, test } from 'vitest';
import { blowSigma, coordinatePrecision, dpiFromR, dpiFromRFree } from '../../packages/core/src/structure/index.js';
import { expectNear } from '../support/expect-near.js';

// atoms, reflections, parameters, d_min, completeness, R, R_free, by R, by R_free, volume, Blow with (2π/3)^⅓
type Row = [number, number, number, number, number, number, number, number | undefined, number, number, number];
const ROWS: Row[] = [
  [3000, 25000, 11000, 2.0, 0.98, 0.18, 0.22, 0.16777365, 0.15345037, 97441.8019, 0.15345037],
  [1500, 60000, 6100, 1.2, 0.995, 0.13, 0.155, 0.02606763, 0.02945836, 49752.3151, 0.02945836],
  [8000, 30000, 33000, 2.8, 0.95, 0.21, 0.26, undefined, 0.38242054, 330988.6715, 0.38242054],
  [500, 18000, 2100, 1.0, 0.999, 0.1, 0.12, 0.01773909, 0.02000667, 8602.9699, 0.02000667],
];

test.each(ROWS)(
  '%i atoms, %i reflections',
  (atoms, reflections, parameters, resolution, completeness, r, rFree, byR, byRFree, volume, blow) => {
    const input = { atoms, reflections, resolution, completeness };
    expectNear(dpiFromRFree(input, rFree), byRFree, { abs: 6e-9, label: 'R free' });
    expectNear(blowSigma(input, volume, rFree), blow, { abs: 6e-9, rel: 1e-9, label: 'Blow' });
    const value = dpiFromR(input, r, parameters);
    if (byR === undefined) expect(value).toBeUndefined();
    else expectNear(value!, byR, { abs: 6e-9, label: 'R' });
  },
);

const pdb = (remarks: string) => `EXPDTA    X-RAY DIFFRACTION
${remarks}CRYST1   20.000   20.000   20.000  90.00  90.00  90.00 P 1           1
HETATM    1 ZN    ZN A   1       0.000   0.000   0.000  1.00 10.00          ZN
HETATM    2  O   HOH A   2       2.000   0.000   0.000  1.00 30.00           O
END
`;
const REMARKS = `REMARK   2 RESOLUTION.    2.00 ANGSTROMS.
REMARK   3   COMPLETENESS FOR RANGE        (%) : 98.0
REMARK   3   NUMBER OF REFLECTIONS             : 25000
REMARK   3   R VALUE            (WORKING SET) : 0.180
REMARK   3   FREE R VALUE                     : 0.220
`;

test('from the remarks of a PDB file, each atom by its own B', () => {
  const structure = readStructure(pdb(REMARKS));
  expect(structure.statistics).toEqual({
    resolution: 2,
    completeness: 0.98,
    reflections: 25000,
    rWork: 0.18,
    rFree: 0.22,
    method: 'X-RAY DIFFRACTION',
  });
  const precision = coordinatePrecision(structure);
  const wanted = dpiFromRFree({ atoms: 2, reflections: 25000, resolution: 2, completeness: 0.98 }, 0.22);
  expect(precision.method).toBe('cruickshank');
  expectNear(precision.sigma, wanted, { rel: 1e-12 });
  expectNear(precision.ofAtom(1), wanted * Math.sqrt(30 / 20), { rel: 1e-12 });
});

test('with less, the next best is taken and named', () => {
  expect(coordinatePrecision(readStructure(pdb(REMARKS.replace(/.*COMPLETENESS.*\n/, '')))).method).toBe('blow');
  expect(coordinatePrecision(readStructure(pdb('REMARK   2 RESOLUTION.    2.00 ANGSTROMS.\n')))).toMatchObject({
    method: 'resolution',
    sigma: 0.16,
  });
  expect(coordinatePrecision(readStructure(pdb(''))).method).toBe('assumed');
});

test('the uncertainties of a CIF, carried to Å', () => {
  const text = `data_t
_cell_length_a 10
_cell_length_b 20
_cell_length_c 5
_symmetry_space_group_name_H-M 'P 1'
loop_
_atom_site_label
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
Fe1 0.1000(3) 0.2000(2) 0.3000(4)
O1 0.3 0.2 0.3
`;
  const structure = readStructure(text);
  const su = structure.atoms[0]!.positionSu!;
  [0.003, 0.004, 0.002].forEach((wanted, axis) => {
    expectNear(su[axis]!, wanted, { abs: 1e-15, label: `axis ${axis}` });
  });
  const precision = coordinatePrecision(structure);
  expect(precision.method).toBe('stated');
  expectNear(precision.ofAtom(0), Math.sqrt((9e-6 + 16e-6 + 4e-6) / 3), { rel: 1e-12 });
  expect(precision.ofAtom(1)).toBe(0);
});
