/** Structure files as text: XYZ, PDB, mmCIF. Å, Å². */
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import type { DraftAtom } from './relax.js';

export interface WrittenAtom extends DraftAtom {
  readonly position: Vec3;
  /** Isotropic U, Å². */
  readonly u?: number;
  /** U11 … U23, Å². */
  readonly anisotropic?: readonly [number, number, number, number, number, number];
}

export interface Crystal {
  readonly title: string;
  /** Å; orthorhombic, P 21 21 21. */
  readonly cell: Vec3;
  readonly temperature: number;
  readonly resolution: number;
  readonly rWork: number;
  readonly rFree: number;
  /** Per cent. */
  readonly completeness: number;
  readonly reflections: number;
}

const OPERATORS = ['x,y,z', 'x+1/2,-y+1/2,-z', '-x,y+1/2,-z+1/2', '-x+1/2,-y,z+1/2'];

export const xyz = (comment: string, atoms: readonly { readonly element: string; readonly position: Vec3 }[]): string =>
  `${atoms.length}\n${comment}\n${atoms
    .map(({ element, position }) => `${element.padEnd(2)} ${position.map((v) => clean(v.toFixed(4)).padStart(10)).join(' ')}\n`)
    .join('')}`;

/** −0.000 is 0.000. */
const clean = (text: string): string => (/^-0\.?0*$/.test(text) ? text.slice(1) : text);
const b = (u: number): string => (8 * Math.PI ** 2 * u).toFixed(2);
const isProtein = ({ residue }: DraftAtom): boolean => /^(ASP|GLU|HIS|CYS|ARG|LYS)$/.test(residue.name);

export function pdb(atoms: readonly WrittenAtom[], crystal: Crystal, remarks: readonly string[]): string {
  const { title, cell, temperature, resolution, rWork, rFree, completeness, reflections } = crystal;
  const field = (value: string | number, width: number) => String(value).padStart(width);
  const lines = [
    'HEADER    OXIDOREDUCTASE (INVENTED)               01-JAN-00   XXXX',
    `TITLE     ${title.toUpperCase()}`,
    ...remarks.map((text) => `REMARK 400 ${text.toUpperCase()}`),
    'EXPDTA    X-RAY DIFFRACTION',
    'REMARK   2',
    `REMARK   2 RESOLUTION.    ${resolution.toFixed(2)} ANGSTROMS.`,
    'REMARK   3',
    `REMARK   3   RESOLUTION RANGE HIGH (ANGSTROMS) : ${resolution.toFixed(2)}`,
    `REMARK   3   COMPLETENESS FOR RANGE        (%) : ${completeness.toFixed(1)}`,
    `REMARK   3   NUMBER OF REFLECTIONS             : ${reflections}`,
    `REMARK   3   R VALUE            (WORKING SET) : ${rWork.toFixed(3)}`,
    `REMARK   3   FREE R VALUE                     : ${rFree.toFixed(3)}`,
    `REMARK 200  TEMPERATURE           (KELVIN) : ${temperature.toFixed(1)}`,
    `CRYST1${cell.map((v) => field(v.toFixed(3), 9)).join('')}${field('90.00', 7).repeat(3)} P 21 21 21    4`,
  ];
  atoms.forEach((atom, i) => {
    const { name, element, residue, position, u = 0.15, anisotropic } = atom;
    const label = element.length === 1 ? ` ${name}`.padEnd(4) : name.padEnd(4);
    const head = `${field(i + 1, 5)} ${label} ${field(residue.name, 3)} A${field(residue.number, 4)} `;
    const tail = `${element.toUpperCase().padStart(2)}`;
    lines.push(
      `${(isProtein(atom) ? 'ATOM' : 'HETATM').padEnd(6)}${head}   ${position.map((v) => field(clean(v.toFixed(3)), 8)).join('')}${field('1.00', 6)}${field(b(u), 6)}          ${tail}`,
    );
    if (anisotropic) lines.push(`ANISOU${head} ${anisotropic.map((v) => field(Math.round(1e4 * v), 7)).join('')}      ${tail}`);
  });
  return `${[...lines, 'END'].map((line) => line.padEnd(80)).join('\n')}\n`;
}

export function mmcif(atoms: readonly WrittenAtom[], crystal: Crystal, comments: readonly string[]): string {
  const { title, cell, temperature, resolution, rWork, rFree, completeness, reflections } = crystal;
  const items: [string, string | number][] = [
    ['_struct.title', `'${title}'`],
    ['_exptl.method', "'X-RAY DIFFRACTION'"],
    ['_diffrn.ambient_temp', temperature],
    ...['a', 'b', 'c'].map((axis, i): [string, string] => [`_cell.length_${axis}`, cell[i]!.toFixed(3)]),
    ...['alpha', 'beta', 'gamma'].map((angle): [string, string] => [`_cell.angle_${angle}`, '90.00']),
    ['_symmetry.space_group_name_H-M', "'P 21 21 21'"],
    ['_refine.ls_d_res_high', resolution.toFixed(2)],
    ['_refine.ls_R_factor_R_work', rWork.toFixed(3)],
    ['_refine.ls_R_factor_R_free', rFree.toFixed(3)],
    ['_refine.ls_percent_reflns_obs', completeness.toFixed(1)],
    ['_refine.ls_number_reflns_obs', reflections],
  ];
  const columns =
    'group_PDB id type_symbol label_atom_id label_alt_id label_comp_id label_asym_id label_seq_id Cartn_x Cartn_y Cartn_z occupancy B_iso_or_equiv auth_seq_id auth_asym_id'.split(
      ' ',
    );
  const rows = atoms.map((atom, i) => {
    const { name, element, residue, position, u = 0.1 } = atom;
    const place = position.map((v) => clean(v.toFixed(3))).join(' ');
    const [group, sequence] = isProtein(atom) ? ['ATOM', residue.number] : ['HETATM', '.'];
    return `${group} ${i + 1} ${element.toUpperCase()} ${name} . ${residue.name} A ${sequence} ${place} 1.00 ${b(u)} ${residue.number} A`;
  });
  return [
    'data_invented',
    ...comments.map((text) => `# ${text}`),
    ...items.map(([tag, value]) => `${tag.padEnd(36)} ${value}`),
    'loop_',
    '_symmetry_equiv.id',
    '_symmetry_equiv.pos_as_xyz',
    ...OPERATORS.map((text, i) => `${i + 1} '${text}'`),
    'loop_',
    ...columns.map((column) => `_atom_site.${column}`),
    ...rows,
    '#',
    '',
  ].join('\n');
}
