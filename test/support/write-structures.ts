/** Small writers for round trips: what they write, the readers must give back. */
import type { Atom, Structure } from '@ringtrue/core';

export const writeXyz = (atoms: readonly Atom[], comment = ''): string =>
  `${atoms.length}\n${comment}\n${atoms.map(({ element, position }) => `${element} ${position.join(' ')}`).join('\n')}\n`;

/** PDB columns; coordinates rounded to 0.001 Å. */
export function writePdb(atoms: readonly Atom[], cryst1 = ''): string {
  const line = ({ element, name, position, occupancy, residue, alternate }: Atom, i: number): string => {
    const label = element.length === 1 && name.length < 4 ? ` ${name}`.padEnd(4) : name.padEnd(4);
    const { chain = 'A', number = 1, insertion = '', name: residueName = 'LIG' } = residue ?? {};
    return (
      `HETATM${String(i + 1).padStart(5)} ${label}${(alternate ?? ' ').padEnd(1)}${residueName.padStart(3)} ${chain.padEnd(1)}` +
      `${String(number).padStart(4)}${insertion.padEnd(1)}   ${position.map((v) => v.toFixed(3).padStart(8)).join('')}` +
      `${occupancy.toFixed(2).padStart(6)}${'20.00'.padStart(6)}          ${element.toUpperCase().padStart(2)}`
    );
  };
  return `${cryst1}${atoms.map(line).join('\n')}\nEND\n`;
}

/** Small-molecule CIF; `fractional` (3n). */
export function writeCif(
  { cell, operators, atoms }: Pick<Structure, 'cell' | 'operators' | 'atoms'>,
  fractional: ArrayLike<number>,
): string {
  const { a, b, c, alpha, beta, gamma } = cell!;
  const rows = atoms.map(
    ({ name, element, occupancy }, i) => `${name} ${element} ${[0, 1, 2].map((k) => fractional[3 * i + k]).join(' ')} ${occupancy}`,
  );
  return `data_round
_cell_length_a ${a}
_cell_length_b ${b}
_cell_length_c ${c}
_cell_angle_alpha ${alpha}
_cell_angle_beta ${beta}
_cell_angle_gamma ${gamma}
loop_
_space_group_symop_operation_xyz
${operators.map(({ text }) => `'${text}'`).join('\n')}
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
${rows.join('\n')}
`;
}

/** mmCIF with the columns the archive writes. */
export function writeMmcif(atoms: readonly Atom[]): string {
  const columns =
    'group_PDB id type_symbol label_atom_id label_alt_id label_comp_id label_asym_id label_seq_id Cartn_x Cartn_y Cartn_z occupancy B_iso_or_equiv auth_seq_id auth_asym_id'.split(
      ' ',
    );
  const quote = (text: string) => (/['"\s]/.test(text) ? `"${text}"` : text);
  const rows = atoms.map(
    ({ element, name, position, occupancy, residue, alternate }, i) =>
      `ATOM ${i + 1} ${element.toUpperCase()} ${quote(name)} ${alternate ?? '.'} ${residue?.name ?? 'LIG'} ${residue?.chain || 'A'} ${residue?.number ?? '.'} ` +
      `${position.join(' ')} ${occupancy} 20.00 ${residue?.number ?? 1} ${residue?.chain || 'A'}`,
  );
  return `data_round\nloop_\n${columns.map((column) => `_atom_site.${column}`).join('\n')}\n${rows.join('\n')}\n`;
}
