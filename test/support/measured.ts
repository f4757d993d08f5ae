/** The measured standards, which are not part of the project: tests that need them run where the folder stands beside it. */
import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const FOLDER = process.env['RINGTRUE_MEASURED'] ?? fileURLToPath(new URL('../../../shared/measured', import.meta.url));

/** χ(k) as reduced elsewhere, or undefined where the folder is absent. */
export function measuredChi(name: string): { k: Float64Array; chi: Float64Array } | undefined {
  const path = `${FOLDER}/${name}.chi.csv`;
  if (!existsSync(path)) return undefined;
  const rows = readFileSync(path, 'utf8')
    .split('\n')
    .filter((line) => /^\d/.test(line))
    .map((line) => line.split(',').map(Number));
  return { k: Float64Array.from(rows, ([k]) => k!), chi: Float64Array.from(rows, ([, chi]) => chi!) };
}

/** A file of the folder as it is, or undefined where the folder is absent. */
export function measuredFile(name: string): string | undefined {
  const path = `${FOLDER}/${name}`;
  return existsSync(path) ? readFileSync(path, 'utf8') : undefined;
}

/** A substance whose crystal structure is known beyond doubt, and the ranges it is compared in. */
export interface Standard {
  readonly file: string;
  readonly absorber: string;
  readonly cell: readonly number[];
  readonly group: string;
  readonly atoms: readonly string[];
  readonly temperature: number;
  readonly debye: number;
  readonly kMax: number;
  readonly r: readonly [number, number];
  readonly rLow: number;
}

export const COPPER: Standard = {
  file: 'cu-foil-10K',
  absorber: 'Cu',
  cell: [3.603, 3.603, 3.603, 90, 90, 90],
  group: 'F m -3 m',
  atoms: ['Cu1 Cu 0 0 0'],
  temperature: 10,
  debye: 315,
  kMax: 15,
  r: [1.2, 2.8],
  rLow: 1,
};
export const CHROMIA: Standard = {
  file: 'cr2o3-100K',
  absorber: 'Cr',
  cell: [4.9557, 4.9557, 13.586, 90, 90, 120],
  group: 'R -3 c',
  atoms: ['Cr1 Cr 0 0 0.3475', 'O1 O 0.3058 0 0.25'],
  temperature: 100,
  debye: 600,
  kMax: 13,
  r: [1, 2.3],
  rLow: 0.8,
};
export const SPHALERITE: Standard = {
  file: 'zns-295K',
  absorber: 'Zn',
  cell: [5.4093, 5.4093, 5.4093, 90, 90, 90],
  group: 'F -4 3 m',
  atoms: ['Zn1 Zn 0 0 0', 'S1 S 0.25 0.25 0.25'],
  temperature: 295,
  debye: 340,
  kMax: 13,
  r: [1.3, 2.6],
  rLow: 1,
};

/** Its crystal as a CIF. */
export function cifOf({ cell, group, atoms }: Standard): string {
  const names = ['length_a', 'length_b', 'length_c', 'angle_alpha', 'angle_beta', 'angle_gamma'];
  return `data_x\n${names.map((name, i) => `_cell_${name} ${cell[i]}`).join('\n')}\n_space_group_name_H-M_alt '${group}'\nloop_\n_atom_site_label\n_atom_site_type_symbol\n_atom_site_fract_x\n_atom_site_fract_y\n_atom_site_fract_z\n${atoms.join('\n')}\n`;
}

export const skipped = (name: string): string =>
  `${name}: the folder of measured standards is not beside the project (RINGTRUE_MEASURED names it), skipped`;
