/** Which column is what: stated by the user, or guessed from names and magnitudes, the guess put in words. */

import { InputError, ReadError } from '../errors.js';
import type { ColumnRoles, DataTable, EnergyUnit } from './types.js';

type Role = Exclude<keyof ColumnRoles, never>;

/** Column words of XDI's dictionary and of common practice. The first that fits counts. */
const WORDS: readonly (readonly [Role, RegExp])[] = [
  ['energy', /^(e|en|energy|energies|ev|kev|mono_?energy)$/i],
  ['angle', /^(angle|theta|bragg|braggangle|mono_?angle)$/i],
  ['k', /^(k|k_?inverse_?angstrom|k_?1\/a)$/i],
  ['chi', /^(chi|chik|chi_?k|k\d?_?chi|chi\(k\))$/i],
  ['i0', /^(i0|io|i_0|monitor|i_?zero)$/i],
  ['transmitted', /^(it|i1|itrans|trans|transmitted|transmission)$/i],
  ['reference', /^(ir|i2|iref|irefer|ref|reference)$/i],
  ['fluorescence', /^(if|iff|ifl|ifluor|fluor|fluo|fluorescence|pips|sum)(_?\d+)?$|^(sca|roi|ch|det)_?\d+$/i],
  ['mu', /^(mu|xmu|mux|mue|absorbance|absorption|abs|mutrans|mufluor|norm|normtrans|normfluor)$/i],
];

/** The columns as words, for messages: "energy = column 1 (energy), …". */
export function rolesInWords(roles: ColumnRoles, names: readonly string[]): string {
  const label = (n: number) => (names[n - 1] ? `column ${n} (${names[n - 1]})` : `column ${n}`);
  return Object.entries(roles)
    .map(([role, at]) => `${role} = ${Array.isArray(at) ? at.map(label).join(' + ') : label(at as number)}`)
    .join(', ');
}

/**
 * Roles from column names, else from magnitudes.
 *
 * @throws {ReadError} the columns cannot be told apart: they must be stated
 */
export function guessRoles({ names, columns }: DataTable): ColumnRoles {
  const found: Partial<Record<Role, number[]>> = {};
  names.forEach((name, i) => {
    const role = WORDS.find(([, pattern]) => pattern.test(name))?.[0];
    if (!role) return;
    found[role] ??= [];
    found[role].push(i + 1);
  });
  const one = (role: Role) => found[role]?.[0];
  const roles: Record<string, number | readonly number[]> = {};
  const put = (role: Role, at: number | readonly number[] | undefined) => {
    if (at !== undefined) roles[role] = at;
  };
  if (one('k') && one('chi')) return { k: one('k')!, chi: one('chi')! };
  if (one('energy')) put('energy', one('energy'));
  else if (one('angle')) put('angle', one('angle'));
  const abscissa = roles['energy'] ?? roles['angle'];
  const ready = one('mu');
  const pair = one('i0') && (one('transmitted') || found.fluorescence);
  if (abscissa && (ready || pair)) {
    if (pair) {
      put('i0', one('i0'));
      // One detection only: transmission where it was recorded; the fluorescence can be asked for
      if (one('transmitted')) put('transmitted', one('transmitted'));
      else put('fluorescence', found.fluorescence);
      if (one('transmitted')) put('reference', one('reference'));
    } else put('mu', ready);
    return roles as ColumnRoles;
  }
  if (columns.length === 2) {
    const x = columns[0]!;
    const last = Math.max(x[0]!, x.at(-1)!);
    // No K or L3 edge with an EXAFS region lies below 1 keV here, no k beyond 30 Å⁻¹
    if (last < 30 && Math.min(x[0]!, x.at(-1)!) < 4 && names.every((name) => !/^e/i.test(name))) return { k: 1, chi: 2 };
    return { energy: 1, mu: 2 };
  }
  const shown = names.map((name, i) => `${i + 1} ${name || '?'} (${columns[i]![0]} …)`).join(', ');
  throw new ReadError(`the columns cannot be told apart: ${shown}; state them, like energy=1,i0=2,it=3`);
}

const OPTION_WORDS = new Map<string, Role>([
  ['energy', 'energy'],
  ['e', 'energy'],
  ['angle', 'angle'],
  ['k', 'k'],
  ['mu', 'mu'],
  ['i0', 'i0'],
  ['it', 'transmitted'],
  ['if', 'fluorescence'],
  ['ir', 'reference'],
  ['chi', 'chi'],
]);

/**
 * Columns as the command line states them: "energy=1,i0=2,if=3+4+5".
 *
 * @throws {InputError} unknown word, or no column number
 */
export function parseColumnRoles(text: string): ColumnRoles {
  const roles: Record<string, number | number[]> = {};
  for (const part of text.split(',')) {
    const [word = '', at = ''] = part.split('=').map((piece) => piece.trim());
    const role = OPTION_WORDS.get(word.toLowerCase());
    const numbers = at.split('+').map(Number);
    if (!role || numbers.some((n) => !(Number.isInteger(n) && n > 0)) || (numbers.length > 1 && role !== 'fluorescence')) {
      throw new InputError(`columns: "${part}" should be like energy=1, mu=2, i0=2, it=3, if=4+5, ir=6, angle=1, k=1 or chi=2`);
    }
    roles[role] = role === 'fluorescence' ? numbers : numbers[0]!;
  }
  return roles as ColumnRoles;
}

/** @throws {InputError} a stated column does not exist, or the roles make no spectrum */
export function checkRoles(roles: ColumnRoles, count: number): void {
  for (const [role, at] of Object.entries(roles)) {
    for (const n of Array.isArray(at) ? at : [at]) {
      if (!(n >= 1 && n <= count)) throw new InputError(`columns: ${role}=${n}, but the file has ${count} columns`);
    }
  }
  const absorption = roles.mu ?? (roles.i0 && (roles.transmitted || roles.fluorescence?.length));
  const spectrum = (roles.energy || roles.angle) && absorption;
  if (!spectrum && !(roles.k && roles.chi)) {
    throw new InputError('columns: needed are energy or angle with mu, or with i0 and it or if; or k with chi');
  }
}

/** Unit of an abscissa that states none: keV when no value reaches 200, else eV. */
export function unitByMagnitude(energy: Float64Array): EnergyUnit {
  let largest = 0;
  for (const e of energy) largest = Math.max(largest, Math.abs(e));
  return largest < 200 ? 'keV' : 'eV';
}
