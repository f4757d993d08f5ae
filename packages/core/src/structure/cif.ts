/**
 * CIF of small molecules and inorganic crystals, and the archive's mmCIF: one reader. Tags of both dialects are met as one
 * ("_atom_site.Cartn_x" and "_atom_site_Cartn_x"). Listed symmetry operators win; the space-group name is used only without them.
 */
import { type Diagnostic, ReadError } from '../errors.js';
import { type CellGeometry, cellGeometry, transform } from './cell.js';
import { AtomRows } from './cif-atoms.js';
import { type CifValue, scanCif } from './cif-tokens.js';
import { numberWithSu } from './numbers.js';
import { IDENTITY, parseOperator, tidyOperators } from './operators.js';
import { type SpaceGroupChoice, spaceGroupByHall, spaceGroupByName, spaceGroupByNumber } from './space-groups.js';
import type { Atom, Cell, RefinementStatistics, Structure, SymmetryOperator, Vec3 } from './types.js';

interface Pair {
  readonly value: string;
  readonly line: number;
}

class Block {
  readonly pairs = new Map<string, Pair>();
  readonly operators: SymmetryOperator[] = [];
  readonly anisotropic = new Map<string, number>();
  atoms: AtomRows | undefined;
  readonly name: string;

  constructor(name: string) {
    this.name = name;
  }

  text(...keys: string[]): string | undefined {
    for (const key of keys) {
      const pair = this.pairs.get(key);
      if (pair) return pair.value;
    }
    return undefined;
  }

  /** Value and s.u. of a number, or undefined when the file leaves it open. */
  number(...keys: string[]): readonly [number, number] | undefined {
    for (const key of keys) {
      const pair = this.pairs.get(key);
      if (!pair) continue;
      const number = numberWithSu(pair.value);
      if (!Number.isFinite(number[0])) {
        throw new ReadError(`line ${pair.line}: ${key} should be a number, found "${pair.value.slice(0, 40)}"`, {
          line: pair.line,
          text: pair.value,
        });
      }
      return number;
    }
    return undefined;
  }
}

const OPERATOR_TAG = /^_(space_group_symop_operation_xyz|symmetry_equiv_pos_as_xyz)$/;

/** Reads until the first data block with atoms is whole. */
function scan(text: string, diagnostics: Diagnostic[]): Block | undefined {
  let block = new Block('');
  let found: Block | undefined;
  let more: string | undefined;
  const plain = (tag: string) => tag.replace('.', '_');
  const startAtoms = (tags: readonly string[], line: number) => {
    block.atoms = new AtomRows(tags, line, diagnostics);
    return block.atoms;
  };
  const single = new Map<string, { value: CifValue; line: number }>();
  const closeBlock = () => {
    // One atom written as pairs, not as a loop.
    if (!block.atoms && single.size > 0) {
      const rows = startAtoms([...single.keys()], [...single.values()][0]!.line);
      const values = [...single.values()];
      rows.row(
        rows.columns.map((column) => values[column]!.value),
        values[0]!.line,
      );
    }
    single.clear();
    if (block.atoms && !found) found = block;
    else if (block.atoms) more ??= block.name;
  };
  scanCif(text, {
    block(name) {
      closeBlock();
      block = new Block(name);
    },
    pair(tag, value, line) {
      const key = plain(tag);
      if (key.startsWith('_atom_site_') && !key.startsWith('_atom_site_aniso')) single.set(tag, { value, line });
      else if (value !== undefined && OPERATOR_TAG.test(key)) block.operators.push(parseOperator(value, line));
      else if (value !== undefined) block.pairs.set(key, { value, line });
    },
    loop(tags, line) {
      if (found) return tags.some((tag) => /^_atom_site[._](fract|cartn)_x$/.test(tag)) ? startAtoms(tags, line) : undefined;
      const keys = tags.map(plain);
      const operator = keys.findIndex((key) => OPERATOR_TAG.test(key));
      if (operator >= 0) {
        return {
          columns: [operator],
          row: ([value], rowLine) => {
            if (value !== undefined) block.operators.push(parseOperator(value, rowLine));
          },
        };
      }
      if (keys.some((key) => /^_atom_site_(fract|cartn)_x$/.test(key))) return startAtoms(tags, line);
      const aniso = ['label', 'u_11', 'u_22', 'u_33'].map((name) => keys.indexOf(`_atom_site_aniso_${name}`));
      if (aniso.every((column) => column >= 0)) {
        return {
          columns: aniso,
          row: ([label, ...u]) => {
            const mean = u.reduce((sum, value) => sum + (value === undefined ? Number.NaN : numberWithSu(value)[0]), 0) / 3;
            if (label !== undefined && Number.isFinite(mean)) block.anisotropic.set(label, mean);
          },
        };
      }
      // One-row loops of what is otherwise written as pairs (refinement statistics, space group).
      if (/^_(refine|exptl|cell|symmetry|space_group|reflns)[._]/.test(tags[0]!) || tags.includes('_exptl.method')) {
        return {
          columns: tags.map((_, i) => i),
          row: (values, rowLine) =>
            values.forEach((value, i) => {
              if (value !== undefined && !block.pairs.has(keys[i]!)) block.pairs.set(keys[i]!, { value, line: rowLine });
            }),
        };
      }
      return undefined;
    },
  });
  closeBlock();
  if (more !== undefined)
    diagnostics.push({ code: 'more-blocks', message: `only the data block "${found!.name}" is read; "${more}" holds atoms too` });
  return found;
}

/**
 * A CIF or mmCIF text.
 * @throws {ReadError} no atoms, an impossible cell, an unreadable number or operator, an unknown space group
 */
export function readCif(text: string): Structure {
  const diagnostics: Diagnostic[] = [];
  const block = scan(text, diagnostics);
  const rows = block?.atoms;
  if (!block || !rows) throw new ReadError('the CIF holds no atoms: there is no _atom_site loop with coordinates');
  const formula = block.text('_chemical_formula_sum');
  const cell = cellOf(block);
  const geometry = cell && geometryOf(cell, block);
  const isMacromolecule = rows.dialect === 'mmcif';
  if (rows.isFractional && !geometry)
    throw new ReadError('the atoms have fractional coordinates but the file gives no unit cell; add _cell_length_a … _cell_angle_gamma');
  const models = rows.finish(new Set([...(formula ?? '').matchAll(/[A-Z][a-z]?/g)].map(([symbol]) => symbol)), block.anisotropic);
  if (rows.isFractional)
    for (const [, atoms] of models) for (let i = 0; i < atoms.length; i++) atoms[i] = toCartesian(atoms[i]!, geometry!);
  const [first, ...others] = [...models.values()];
  if (!first || first.length === 0) throw new ReadError('the CIF holds no atom with coordinates and a known element');
  const group = cell ? symmetryOf(block, cell, diagnostics, isMacromolecule) : { operators: [IDENTITY] };
  const statistics = statisticsOf(block);
  return {
    format: rows.dialect,
    title: (
      block.text('_struct_title', '_chemical_name_common', '_chemical_name_systematic', '_chemical_formula_sum') ?? block.name
    ).trim(),
    atoms: first,
    moreFrames: others,
    ...(cell ? { cell } : {}),
    operators: group.operators,
    ...(group.name ? { spaceGroup: group.name } : {}),
    ...(statistics ? { statistics } : {}),
    diagnostics,
  };
}

function cellOf(block: Block): Cell | undefined {
  const lengths = ['a', 'b', 'c'].map((axis) => block.number(`_cell_length_${axis}`)?.[0]);
  const angles = ['alpha', 'beta', 'gamma'].map((axis) => block.number(`_cell_angle_${axis}`)?.[0]);
  if (lengths.every((length) => length === undefined)) return undefined;
  const [a, b, c] = lengths;
  if (a === undefined || b === undefined || c === undefined)
    throw new ReadError('the unit cell is incomplete; give _cell_length_a, _b and _c');
  const [alpha = 90, beta = 90, gamma = 90] = angles;
  if (a === 1 && b === 1 && c === 1) return undefined; // the placeholder of models without a crystal
  return { a, b, c, alpha, beta, gamma };
}

function geometryOf(cell: Cell, block: Block): CellGeometry {
  try {
    return cellGeometry(cell);
  } catch (error) {
    const line = block.pairs.get('_cell_length_a')?.line;
    throw new ReadError(`${line ? `line ${line}: ` : ''}${(error as Error).message}`, line ? { line } : {});
  }
}

/** Fractional to Cartesian, s.u. included: su(r_i)² = Σ_j A_ij² su(f_j)². The s.u. of the cell itself is smaller and left out. */
function toCartesian(atom: Atom, { toCartesian: A }: CellGeometry): Atom {
  const position = transform(A, atom.position);
  const su = atom.positionSu;
  if (!su) return { ...atom, position };
  const spread = (row: number) => Math.hypot(A[3 * row]! * su[0], A[3 * row + 1]! * su[1], A[3 * row + 2]! * su[2]);
  return { ...atom, position, positionSu: [spread(0), spread(1), spread(2)] satisfies Vec3 };
}

function symmetryOf(
  block: Block,
  cell: Cell,
  diagnostics: Diagnostic[],
  isMacromolecule: boolean,
): { operators: readonly SymmetryOperator[]; name?: string } {
  const name = block.text(
    '_space_group_name_h-m_alt',
    '_symmetry_space_group_name_h-m',
    '_space_group_name_h-m_full',
    '_space_group_name_h-m_ref',
  );
  const hall = block.text('_space_group_name_hall', '_symmetry_space_group_name_hall');
  const number = block.number('_space_group_it_number', '_symmetry_int_tables_number')?.[0];
  if (block.operators.length > 0) {
    return { operators: tidyOperators(block.operators), ...(name ? { name } : {}) };
  }
  const choice: SpaceGroupChoice | undefined =
    (hall && spaceGroupByHall(hall)) ||
    (name && spaceGroupByName(name, cell)) ||
    (!name && number && spaceGroupByNumber(number, cell)) ||
    undefined;
  if (choice) {
    if (choice.assumed)
      diagnostics.push({ code: 'setting-assumed', message: `the file lists no symmetry operators; ${choice.assumed} is assumed` });
    return { operators: choice.operators, name: name ?? choice.name };
  }
  if (name || hall) {
    throw new ReadError(
      `the space group "${name ?? hall}" is not known and the file lists no symmetry operators; add them (_space_group_symop_operation_xyz)`,
    );
  }
  diagnostics.push({
    code: 'no-symmetry',
    message: `the file gives neither symmetry operators nor a space group; P 1 is assumed${isMacromolecule ? '' : ', so that symmetry-related atoms not listed are missing'}`,
  });
  return { operators: [IDENTITY] };
}

function statisticsOf(block: Block): RefinementStatistics | undefined {
  const value = (...keys: string[]) => {
    const text = block.text(...keys);
    const number = text === undefined ? Number.NaN : numberWithSu(text)[0];
    return Number.isFinite(number) ? number : undefined;
  };
  const percent = value('_refine_ls_percent_reflns_obs', '_reflns_percent_possible_obs');
  const entries = {
    resolution: value('_refine_ls_d_res_high', '_reflns_d_resolution_high'),
    rWork: value('_refine_ls_r_factor_r_work', '_refine_ls_r_factor_obs', '_refine_ls_r_factor_gt'),
    rFree: value('_refine_ls_r_factor_r_free'),
    completeness: percent === undefined ? undefined : percent / 100,
    reflections: value('_refine_ls_number_reflns_obs', '_refine_ls_number_reflns', '_reflns_number_obs'),
    method: block.text('_exptl_method'),
  };
  const known = Object.fromEntries(Object.entries(entries).filter(([, entry]) => entry !== undefined));
  return Object.keys(known).length > 0 ? (known as RefinementStatistics) : undefined;
}
