import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { readStructure } from '../structure/index.js';
import type { Vec3 } from '../structure/types.js';
import { lightTensor } from './light.js';
import { predict } from './predict.js';

/** A tetragonal crystal of dumbbells along x: with the fourfold axis half of them lie along y. Invented. */
const crystal = (operators: readonly string[], atoms: readonly string[]): string =>
  `data_x
_cell_length_a 6
_cell_length_b 6
_cell_length_c 5
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
loop_
_space_group_symop_operation_xyz
${operators.map((text) => `'${text}'`).join('\n')}
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
${atoms.join('\n')}
`;
const FOURFOLD = ['x,y,z', '-y,x,z+1/2', '-x,-y,z', 'y,-x,z+1/2'];
const ONE = crystal(FOURFOLD, ['Cu1 Cu 0 0 0', 'S1 S 0.37 0 0']);
const LISTED = crystal(
  ['x,y,z'],
  ['Cu1 Cu 0 0 0', 'Cu2 Cu 0 0 0.5', 'S1 S 0.37 0 0', 'S2 S 0.63 0 0', 'S3 S 0 0.37 0.5', 'S4 S 0 0.63 0.5'],
);
const chiOf = (text: string, electricVector?: Vec3): Float64Array =>
  predict(
    readStructure(text),
    { absorber: 'Cu', radius: 4, maxLegs: 3, kMax: 8, debyeTemperature: 300, ...(electricVector ? { electricVector } : {}) },
    { file: 'x', version: '0' },
  ).chi;
const difference = (a: Float64Array, b: Float64Array): number =>
  Math.sqrt(a.reduce((sum, x, i) => sum + (x - b[i]!) ** 2, 0) / a.reduce((sum, x) => sum + x * x, 0));

test('absorbers that symmetry turns see the light from other sides: one listed atom with its operators, or all of them listed', () => {
  for (const e of [
    [1, 0, 0],
    [0, 0, 1],
    [1, 2, 1],
  ] as const) {
    // The kept set of weak paths differs a little between one site and two: 0.003 of the strongest each.
    expect(difference(chiOf(ONE, e), chiOf(LISTED, e)), `electric vector ${e}`).toBeLessThan(0.01);
  }
});

test('along and across differ, and their mean is the unpolarised spectrum', () => {
  const [x, y, z] = [chiOf(ONE, [2, 0, 0]), chiOf(ONE, [0, 1, 0]), chiOf(ONE, [0, 0, 1])];
  expect(difference(x, y)).toBeLessThan(1e-6);
  expect(difference(x, z)).toBeGreaterThan(0.5);
  const mean = x.map((value, i) => (value + y[i]! + z[i]!) / 3);
  // Weak paths are chosen for each direction on its own.
  expect(difference(chiOf(ONE), mean)).toBeLessThan(0.02);
});

test('a cubic crystal looks alike from all sides', () => {
  const threefold = crystal(['x,y,z', 'z,x,y', 'y,z,x', '-x,-y,z', '-x,y,-z', 'x,-y,-z'], ['Cu1 Cu 0 0 0']).replace('_c 5', '_c 6');
  const whole = readStructure(`${threefold}`);
  const tensor = lightTensor({ ...whole, operators: whole.operators.slice(0, 3) }, [1, 0, 0]);
  [0, 4, 8].forEach((at) => void expectNear(tensor[at]!, 1 / 3, { abs: 1e-12, label: 'a third of unity' }));
});

test('a vector without direction is refused', () => {
  expect(() => lightTensor(readStructure(ONE), [0, 0, 0])).toThrow('electric vector');
  expect(() => lightTensor(readStructure(ONE), [Number.NaN, 0, 1])).toThrow('electric vector');
});
