/** The rows of an _atom_site loop, of either CIF dialect, made into atoms; coordinates stay as written, fractional or Cartesian. */
import { type Diagnostic, ReadError } from '../errors.js';
import type { CifValue } from './cif-tokens.js';
import { chargeOf, elementOfLabel, elementOfType } from './labels.js';
import { decimal, numberWithSu } from './numbers.js';
import type { Atom, Residue, Vec3 } from './types.js';

const NAMES = [
  'x',
  'y',
  'z',
  'label',
  'type_symbol',
  'occupancy',
  'u_iso_or_equiv',
  'b_iso_or_equiv',
  'label_atom_id',
  'auth_atom_id',
  'label_alt_id',
  'label_comp_id',
  'auth_comp_id',
  'label_asym_id',
  'auth_asym_id',
  'label_seq_id',
  'auth_seq_id',
  'pdbx_pdb_ins_code',
  'pdbx_pdb_model_num',
  'pdbx_formal_charge',
  'disorder_group',
  'disorder_assembly',
  'calc_flag',
] as const;
type Name = (typeof NAMES)[number];

interface Draft extends Omit<Atom, 'element'> {
  /** Undefined until the formula is known. */
  readonly element: string | undefined;
}

export class AtomRows {
  readonly columns: readonly number[];
  readonly isFractional: boolean;
  readonly dialect: 'mmcif' | 'cif';
  private readonly slot: Partial<Record<Name, number>> = {};
  private readonly models = new Map<string, Draft[]>();
  private readonly types = new Map<string, ReturnType<typeof elementOfType>>();
  private readonly interned = new Map<string, string>();
  private residue: Residue | undefined;
  private readonly diagnostics: Diagnostic[];
  private rowLine = 0;

  constructor(tags: readonly string[], line: number, diagnostics: Diagnostic[]) {
    this.diagnostics = diagnostics;
    const keys = tags.map((tag) => tag.replace(/^_atom_site[._]/, ''));
    this.isFractional = !keys.includes('cartn_x');
    this.dialect = tags[0]!.startsWith('_atom_site.') && !(this.isFractional && keys.includes('label')) ? 'mmcif' : 'cif';
    const columns: number[] = [];
    for (const name of NAMES) {
      const column = keys.indexOf(name.length === 1 ? `${this.isFractional ? 'fract' : 'cartn'}_${name}` : name);
      if (column < 0) continue;
      this.slot[name] = columns.length;
      columns.push(column);
    }
    this.columns = columns;
    for (const axis of ['x', 'y', 'z'] as const) {
      if (this.slot[axis] === undefined)
        throw new ReadError(`line ${line}: the atom list has no column for ${axis}; coordinates need x, y and z`, { line });
    }
  }

  /** Called by the scanner, so bound as a property. */
  readonly row = (values: readonly CifValue[], line: number): void => {
    this.rowLine = line;
    const get = (name: Name): CifValue => {
      const slot = this.slot[name];
      return slot === undefined ? undefined : values[slot];
    };
    const label = get('label') ?? get('auth_atom_id') ?? get('label_atom_id') ?? get('type_symbol') ?? '?';
    const x = get('x');
    const y = get('y');
    const z = get('z');
    if (x === undefined || y === undefined || z === undefined) {
      this.diagnostics.push({ code: 'no-coordinates', message: `line ${line}: atom ${label} has no coordinates and is left out`, line });
      return;
    }
    if (get('calc_flag') === 'dum') {
      this.diagnostics.push({ code: 'dummy-atom', message: `line ${line}: ${label} is marked a dummy atom and is left out`, line });
      return;
    }
    let position: Vec3;
    let su: Vec3 | undefined;
    if (this.isFractional || x.endsWith(')') || y.endsWith(')') || z.endsWith(')')) {
      const [px, sx] = this.coordinate(x, 'x');
      const [py, sy] = this.coordinate(y, 'y');
      const [pz, sz] = this.coordinate(z, 'z');
      position = [px, py, pz];
      if (sx + sy + sz > 0) su = [sx, sy, sz];
    } else position = [this.plain(x, 'x'), this.plain(y, 'y'), this.plain(z, 'z')];

    const alternate = get('label_alt_id') ?? get('disorder_group');
    const assembly = get('disorder_assembly');
    const type = this.typeOf(get('type_symbol'));
    const charge = this.chargeOf(get('pdbx_formal_charge'), line) ?? type?.charge;
    const u = this.optional(get('u_iso_or_equiv'), 'U', line);
    const b = this.optional(get('b_iso_or_equiv'), 'B', line);
    const uIso = u ?? (b === undefined ? undefined : b / (8 * Math.PI ** 2));
    const residue = this.residueOf(get, line);
    // Set one by one, not spread together: this runs a million times.
    const draft: { -readonly [Key in keyof Draft]: Draft[Key] } = {
      name: this.intern(label),
      element: type?.element,
      position,
      occupancy: this.occupancy(get('occupancy'), label, line),
      line,
    };
    if (uIso !== undefined) draft.uIso = uIso;
    if (su) draft.positionSu = su;
    if (alternate !== undefined) draft.alternate = this.intern(alternate);
    if (assembly !== undefined) draft.assembly = this.intern(assembly);
    if (residue) draft.residue = residue;
    if (charge !== undefined) draft.formalCharge = charge;
    const model = get('pdbx_pdb_model_num') ?? '1';
    const list = this.models.get(model);
    if (list) list.push(draft);
    else this.models.set(model, [draft]);
  };

  /** The atoms of each model, elements settled with the help of the formula. Atoms of no known element are left out and said. */
  finish(formula: ReadonlySet<string>, anisotropic: ReadonlyMap<string, number>): Map<string, Atom[]> {
    const among = formula.size > 0 ? formula : undefined;
    const finished = new Map<string, Atom[]>();
    for (const [model, drafts] of this.models) {
      const atoms: Atom[] = [];
      for (const draft of drafts) {
        const element = draft.element ?? elementOfLabel(draft.name, among);
        if (element === undefined) {
          this.diagnostics.push({
            code: 'unknown-element',
            message: `line ${draft.line}: the element of ${draft.name} is not known; the atom is left out`,
            ...(draft.line === undefined ? {} : { line: draft.line }),
          });
          continue;
        }
        const mean = draft.uIso === undefined ? anisotropic.get(draft.name) : undefined;
        // Written into the draft, not copied: two million atoms need not exist twice.
        const atom = draft as { -readonly [Key in keyof Atom]: Atom[Key] };
        atom.element = element;
        if (mean !== undefined) atom.uIso = mean;
        atoms.push(atom);
      }
      finished.set(model, atoms);
    }
    return finished;
  }

  private coordinate(text: string, axis: string): readonly [number, number] {
    const number = numberWithSu(text);
    return Number.isFinite(number[0]) ? number : this.fail(text, axis);
  }

  private plain(text: string, axis: string): number {
    const value = decimal(text);
    return Number.isFinite(value) ? value : this.fail(text, axis);
  }

  private fail(text: string, axis: string): never {
    const line = this.rowLine;
    throw new ReadError(`line ${line}: ${axis} should be a number, found "${text.slice(0, 40)}"; write ? for an unknown one`, {
      line,
      text,
    });
  }

  private typeOf(text: CifValue): ReturnType<typeof elementOfType> {
    if (text === undefined) return undefined;
    if (!this.types.has(text)) this.types.set(text, elementOfType(text));
    return this.types.get(text);
  }

  private chargeOf(text: CifValue, line: number): number | undefined {
    if (text === undefined) return undefined;
    const charge = /^[+-]?\d+$/.test(text) ? Number(text) : chargeOf(text);
    if (charge === undefined)
      this.diagnostics.push({ code: 'bad-charge', message: `line ${line}: "${text}" is no charge and is not used`, line });
    return charge === 0 ? undefined : charge;
  }

  private optional(text: CifValue, what: string, line: number): number | undefined {
    if (text === undefined) return undefined;
    const [value] = numberWithSu(text);
    if (Number.isFinite(value)) return value;
    this.diagnostics.push({
      code: 'bad-displacement',
      message: `line ${line}: ${what} should be a number, found "${text.slice(0, 20)}"; it is not used`,
      line,
    });
    return undefined;
  }

  private occupancy(text: CifValue, label: string, line: number): number {
    if (text === undefined || text === '1.00') return 1;
    const [value] = numberWithSu(text);
    if (!Number.isFinite(value))
      throw new ReadError(`line ${line}: the occupancy of ${label} should be a number, found "${text.slice(0, 40)}"`, { line, text });
    return clampOccupancy(value, label, line, this.diagnostics);
  }

  private residueOf(get: (name: Name) => CifValue, line: number): Residue | undefined {
    const name = get('auth_comp_id') ?? get('label_comp_id');
    if (name === undefined) return undefined;
    const chain = get('auth_asym_id') ?? get('label_asym_id') ?? '';
    const digits = get('auth_seq_id') ?? get('label_seq_id');
    const number = digits === undefined ? Number.NaN : Number(digits);
    const insertion = get('pdbx_pdb_ins_code') ?? '';
    const last = this.residue;
    const same =
      last &&
      last.name === name &&
      last.chain === chain &&
      last.insertion === insertion &&
      (last.number === number || (Number.isNaN(number) && last.number === 0));
    if (same) return last;
    if (digits !== undefined && Number.isNaN(number)) {
      this.diagnostics.push({
        code: 'bad-residue-number',
        message: `line ${line}: "${digits}" is no residue number; 0 is shown in its place`,
        line,
      });
    }
    this.residue = { name: this.intern(name), number: Number.isNaN(number) ? 0 : number, insertion, chain: this.intern(chain) };
    return this.residue;
  }

  /** One string object for all equal names, so that millions of slices do not keep the file's text alive. */
  private intern(text: string): string {
    const known = this.interned.get(text);
    if (known !== undefined) return known;
    this.interned.set(text, text);
    return text;
  }
}

/** Occupancies outside 0 … 1 are cut to that range, and said. */
export function clampOccupancy(value: number, label: string, line: number, diagnostics: Diagnostic[]): number {
  if (value > 0 && value <= 1) return value;
  if (value === 0) {
    diagnostics.push({ code: 'occupancy-zero', message: `line ${line}: ${label} has occupancy 0 and does not scatter`, line });
    return 0;
  }
  const cut = value < 0 ? 0 : 1;
  diagnostics.push({
    code: 'occupancy-range',
    message: `line ${line}: ${label} has occupancy ${value}, outside 0 to 1; ${cut} is used`,
    line,
  });
  return cut;
}
