/**
 * PDB fixed columns (format 3.3) with the sins of the world: blank or lower-case element columns, hybrid-36 and overflowing
 * numbers, six-digit serials that push the line to the right, short lines, several models, the 1 × 1 × 1 placeholder cell.
 */
import { elementSymbol } from '../elements/index.js';
import { type Diagnostic, ReadError } from '../errors.js';
import { cellGeometry } from './cell.js';
import { clampOccupancy } from './cif-atoms.js';
import { chargeOf, elementOfPdbName } from './labels.js';
import { Lines } from './lines.js';
import { decimalAt } from './numbers.js';
import { IDENTITY } from './operators.js';
import { PdbConnections } from './pdb-connections.js';
import { PdbLinks } from './pdb-links.js';
import { PdbStatistics } from './pdb-statistics.js';
import { spaceGroupByName } from './space-groups.js';
import type { Atom, Cell, Residue, Structure, SymmetryOperator, Vec3 } from './types.js';

const BLANK = 32;
const PER_B = 1 / (8 * Math.PI ** 2);

/**
 * A PDB text.
 * @throws {ReadError} no atoms, an unreadable coordinate, occupancy or cell, an unknown space group
 */
export function readPdb(text: string): Structure {
  const lines = new Lines(text);
  const diagnostics: Diagnostic[] = [];
  const statistics = new PdbStatistics();
  const linkRecords = new PdbLinks();
  const connections = new PdbConnections();
  const reader = new AtomReader(text, diagnostics);
  const frames: Atom[][] = [[]];
  let crystal: Crystal | undefined;
  let title = '';
  let header = '';
  reading: while (lines.next()) {
    const { start, end } = lines;
    if (end - start < 3) continue;
    switch (recordOf(text, start, end)) {
      case 'ATOM':
      case 'HETATM': {
        const atom = reader.read(lines);
        if (atom) frames[frames.length - 1]!.push(atom);
        break;
      }
      case 'TER':
        reader.residue = undefined;
        break;
      case 'MODEL':
        if (frames[frames.length - 1]!.length > 0) frames.push([]);
        reader.residue = undefined;
        break;
      case 'CRYST1':
        crystal = readCryst1(text, start, end, lines.number);
        break;
      case 'TITLE':
        title = `${title} ${text.slice(start + 10, end).trim()}`.trim();
        break;
      case 'HEADER':
        header = text.slice(start + 10, Math.min(end, start + 50)).trim();
        break;
      case 'LINK':
        linkRecords.take(text.slice(start, end), lines.number);
        break;
      case 'CONECT':
        connections.take(text.slice(start, end), lines.number);
        break;
      case 'EXPDTA':
      case 'REMARK':
        statistics.take(text.slice(start, end));
        break;
      case 'END':
        break reading;
    }
  }
  const [first = [], ...others] = frames.filter((frame) => frame.length > 0);
  if (first.length === 0) throw new ReadError('the PDB file holds no atoms: there is no usable ATOM or HETATM line');
  reader.summarise();
  checkOccupancySums(first, diagnostics);
  checkDuplicates(first, diagnostics);
  const known = statistics.result();
  const links = [...linkRecords.resolve(first, crystal, diagnostics), ...connections.resolve(text, first, diagnostics)];
  return {
    format: 'pdb',
    title: title || header,
    atoms: first,
    moreFrames: others,
    ...(crystal ? { cell: crystal.cell, spaceGroup: crystal.name } : {}),
    operators: crystal?.operators ?? [IDENTITY],
    ...(known ? { statistics: known } : {}),
    ...(links.length > 0 ? { links } : {}),
    diagnostics: [...diagnostics, ...(crystal?.diagnostics ?? [])],
  };
}

function recordOf(text: string, start: number, end: number): string {
  if (text.startsWith('ATOM  ', start)) return 'ATOM';
  if (text.startsWith('HETATM', start)) return 'HETATM';
  return text.slice(start, Math.min(start + 6, end)).trimEnd();
}

interface Crystal {
  readonly cell: Cell;
  readonly name: string;
  readonly operators: readonly SymmetryOperator[];
  readonly diagnostics: readonly Diagnostic[];
}

function readCryst1(text: string, start: number, end: number, line: number): Crystal | undefined {
  const bounds = [6, 15, 24, 33, 40, 47, 54];
  const values = [0, 1, 2, 3, 4, 5].map((i) => {
    const [from, to] = [Math.min(start + bounds[i]!, end), Math.min(start + bounds[i + 1]!, end)];
    const value = decimalAt(text, from, to);
    if (Number.isFinite(value)) return value;
    const columns = [bounds[i]! + 1, bounds[i + 1]!] as const;
    throw new ReadError(
      `line ${line}, columns ${columns.join('–')}: a cell length or angle should stand here, found "${text.slice(from, to).trim()}"; remove CRYST1 if there is no crystal`,
      { line, columns, text: text.slice(from, to) },
    );
  });
  const [a, b, c, alpha, beta, gamma] = values as [number, number, number, number, number, number];
  // 1 × 1 × 1 (and, from some programs, 0 × 0 × 0) stands for "no crystal": NMR, electron microscopy, models.
  if ((a === 1 && b === 1 && c === 1) || (a === 0 && b === 0 && c === 0)) return undefined;
  const cell: Cell = { a, b, c, alpha, beta, gamma };
  try {
    cellGeometry(cell);
  } catch (error) {
    throw new ReadError(`line ${line}: ${(error as Error).message}`, { line });
  }
  const name = text.slice(start + 55, Math.min(end, start + 66)).trim();
  if (name === '') {
    return {
      cell,
      name: 'P 1',
      operators: [IDENTITY],
      diagnostics: [{ code: 'no-symmetry', message: `line ${line}: CRYST1 names no space group; P 1 is assumed`, line }],
    };
  }
  const choice = spaceGroupByName(name, cell);
  if (!choice)
    throw new ReadError(`line ${line}, columns 56–66: the space group "${name}" is not known; write its full symbol, like P 1 21 1`, {
      line,
      columns: [56, 66],
      text: name,
    });
  const diagnostics = choice.assumed ? [{ code: 'setting-assumed', message: `line ${line}: ${choice.assumed} is assumed`, line }] : [];
  return { cell, name, operators: choice.operators, diagnostics };
}

class AtomReader {
  residue: Residue | undefined;
  private residueKey = '';
  private readonly text: string;
  private readonly diagnostics: Diagnostic[];
  private readonly interned = new Map<string, string>();
  private readonly trims = new Map<string, string>();
  /** Two character codes of the element columns → symbol, or '' where they are none. */
  private readonly symbols = new Map<number, string>();
  private readonly elements = new Map<string, string | undefined>();
  private guessed = 0;
  private shifted = 0;

  constructor(text: string, diagnostics: Diagnostic[]) {
    this.text = text;
    this.diagnostics = diagnostics;
  }

  read({ start, end, number: line }: Lines): Atom | undefined {
    const { text } = this;
    // "ATOM  100000": a serial of more than five digits pushes everything after it to the right.
    let serialEnd = start + 6;
    while (serialEnd < end && isDigit(text.charCodeAt(serialEnd))) serialEnd++;
    const shift = serialEnd > start + 11 ? serialEnd - start - 11 : 0;
    if (shift > 0) this.shifted++;
    const o = start + shift; // columns count from here, column n at o + n − 1
    const position: Vec3 = [
      this.coordinate(o, end, 31, 'x', line),
      this.coordinate(o, end, 39, 'y', line),
      this.coordinate(o, end, 47, 'z', line),
    ];
    const name4 = this.intern(text.slice(Math.min(o + 12, end), Math.min(o + 16, end)));
    const residue = this.residueOf(o, end, line);
    const element = this.elementOf(o, end, name4, residue.name, line);
    if (element === undefined) return undefined;
    const name = this.trimmed(name4);
    // Set one by one, not spread together: this runs a million times, and most atoms have the same few fields.
    const atom: { -readonly [Key in keyof Atom]: Atom[Key] } = {
      name,
      element,
      position,
      occupancy: this.occupancy(o, end, name, line),
      residue,
      line,
    };
    const b = decimalAt(text, Math.min(o + 60, end), Math.min(o + 66, end));
    if (Number.isFinite(b)) atom.uIso = b * PER_B;
    if (o + 16 < end && text.charCodeAt(o + 16) !== BLANK) atom.alternate = this.intern(text.charAt(o + 16));
    if (o + 78 < end && (text.charCodeAt(o + 78) !== BLANK || text.charCodeAt(o + 79) !== BLANK)) {
      const charge = chargeOf(text.slice(o + 78, Math.min(o + 80, end)));
      if (charge !== undefined) atom.formalCharge = charge;
    }
    return atom;
  }

  summarise(): void {
    if (this.guessed > 0)
      this.diagnostics.push({
        code: 'element-from-name',
        message: `${this.guessed} atoms have no element column; their elements are taken from the atom names`,
      });
    if (this.shifted > 0)
      this.diagnostics.push({
        code: 'shifted-columns',
        message: `${this.shifted} lines are pushed to the right by serial numbers above 99999 and are read accordingly`,
      });
  }

  private coordinate(o: number, end: number, first: number, axis: string, line: number): number {
    const { text } = this;
    const from = Math.min(o + first - 1, end);
    const to = Math.min(from + 8, end);
    const value = decimalAt(text, from, to);
    // A number is right-justified in its columns; a blank last column, or a digit cut off by it, betrays a shifted line.
    const last = text.charCodeAt(to - 1);
    const isWhole = isDigit(last) || (last === 46 && !isDigit(text.charCodeAt(to)));
    if (Number.isFinite(value) && (isWhole || this.isFree(o, end, first, value))) return value;
    const columns = [first, first + 7] as const;
    throw new ReadError(
      `line ${line}, columns ${columns.join('–')}: ${axis} should be a number like "  12.345", found "${text.slice(from, to)}"; ` +
        'correct it, or delete the line if the atom has no place',
      { line, columns, text: text.slice(from, to) },
    );
  }

  /** Hand-written lines, left-justified: believed if the blank-separated numbers say the same as the columns. */
  private isFree(o: number, end: number, first: number, value: number): boolean {
    const tokens = this.text
      .slice(o + 30, Math.min(o + 66, end))
      .trim()
      .split(/\s+/);
    // A character lost before the coordinates moves the element's first letter out of its columns: ZN would be read as N.
    if (o + 75 < end && this.text.charCodeAt(o + 75) > BLANK) return false;
    return Number(tokens[(first - 31) / 8]) === value;
  }

  private occupancy(o: number, end: number, name: string, line: number): number {
    const from = Math.min(o + 54, end);
    const to = Math.min(o + 60, end);
    if (this.text.startsWith('  1.00', from)) return 1;
    const value = decimalAt(this.text, from, to);
    if (Number.isFinite(value)) return clampOccupancy(value, name, line, this.diagnostics);
    if (this.text.slice(from, to).trim() === '') return 1;
    const found = this.text.slice(from, to);
    throw new ReadError(`line ${line}, columns 55–60: the occupancy should be a number like "  1.00", found "${found}"`, {
      line,
      columns: [55, 60],
      text: found,
    });
  }

  private elementOf(o: number, end: number, name4: string, residue: string, line: number): string | undefined {
    const first = o + 76 < end ? this.text.charCodeAt(o + 76) : BLANK;
    const second = o + 77 < end ? this.text.charCodeAt(o + 77) : BLANK;
    if (first !== BLANK || second !== BLANK) {
      const key = (first << 16) | second;
      let element = this.symbols.get(key);
      if (element === undefined) {
        const written = String.fromCharCode(first, second).trim();
        element = (/^[A-Za-z]+$/.test(written) ? elementSymbol(written) : undefined) ?? '';
        this.symbols.set(key, element);
      }
      if (element !== '') return element;
      this.unknown(name4, `"${String.fromCharCode(first, second).trim()}" is no element`, line);
      return undefined;
    }
    this.guessed++;
    const key = name4 + residue;
    if (!this.elements.has(key)) this.elements.set(key, elementOfPdbName(name4.padEnd(4), residue));
    const element = this.elements.get(key);
    if (element === undefined) this.unknown(name4, 'its name tells no element', line);
    return element;
  }

  private unknown(name: string, why: string, line: number): void {
    this.diagnostics.push({
      code: 'unknown-element',
      message: `line ${line}: atom ${name.trim()} is left out: ${why}; write the element into columns 77–78`,
      line,
    });
  }

  /** Columns 18–27: residue name, chain, number, insertion code; the same object for all atoms of a residue. */
  private residueOf(o: number, end: number, line: number): Residue {
    if (this.residue && this.text.startsWith(this.residueKey, o + 17)) return this.residue;
    const key = this.text.slice(Math.min(o + 17, end), Math.min(o + 27, end));
    this.residueKey = key;
    const digits = key.slice(5, 9);
    const number = hybrid36(digits);
    if (Number.isNaN(number)) {
      this.diagnostics.push({
        code: 'bad-residue-number',
        message: `line ${line}: "${digits}" is no residue number; 0 is shown in its place`,
        line,
      });
    }
    this.residue = {
      name: this.intern(key.slice(0, 3).trim()),
      number: Number.isNaN(number) ? 0 : number,
      insertion: key.slice(9, 10).trim(),
      chain: this.intern(key.slice(4, 5).trim()),
    };
    return this.residue;
  }

  private trimmed(text: string): string {
    let short = this.trims.get(text);
    if (short === undefined) {
      short = text.trim();
      this.trims.set(text, short);
    }
    return short;
  }

  private intern(text: string): string {
    const known = this.interned.get(text);
    if (known !== undefined) return known;
    this.interned.set(text, text);
    return text;
  }
}

const isDigit = (code: number): boolean => code >= 48 && code <= 57;

/**
 * Four columns of a residue number: decimal, or hybrid-36 ("A000" follows 9999; upper-case letters first, then lower-case).
 * NaN when it is neither.
 */
export function hybrid36(field: string): number {
  const text = field.trim();
  if (/^[+-]?\d+$/.test(text)) return Number(text);
  if (!/^([A-Z][A-Z0-9]{3}|[a-z][a-z0-9]{3})$/.test(text)) return Number.NaN;
  const isUpper = text.charCodeAt(0) < 97;
  const value = Number.parseInt(text, 36);
  return value - 10 * 36 ** 3 + 10 ** 4 + (isUpper ? 0 : 26 * 36 ** 3);
}

/** Alternates of one atom whose occupancies sum to more than 1 are said; the weights are taken relative to the sum later. */
function checkOccupancySums(atoms: readonly Atom[], diagnostics: Diagnostic[]): void {
  const sums = new Map<string, { sum: number; atom: Atom }>();
  for (const atom of atoms) {
    if (atom.alternate === undefined) continue;
    const { chain, number, insertion } = atom.residue!;
    const key = `${chain}|${number}${insertion}|${atom.name}`;
    const entry = sums.get(key);
    if (entry) entry.sum += atom.occupancy;
    else sums.set(key, { sum: atom.occupancy, atom });
  }
  for (const { sum, atom } of sums.values()) {
    if (sum <= 1.05) continue; // 0.34 + 0.33 + 0.34 and the like are rounding
    diagnostics.push({
      code: 'occupancy-sum',
      message: `line ${atom.line}: the alternate positions of ${atom.name} in ${atom.residue!.name} ${atom.residue!.number} have occupancies that sum to ${sum.toFixed(2)}`,
      line: atom.line!,
    });
  }
}

/** The same atom of the same residue written twice in one place. */
function checkDuplicates(atoms: readonly Atom[], diagnostics: Diagnostic[]): void {
  let first = 0; // of the present residue
  for (let i = 1; i < atoms.length; i++) {
    const atom = atoms[i]!;
    if (atom.residue !== atoms[first]!.residue) first = i;
    // Two hundred back, so that a file that calls all its atoms one residue stays linear; findSites meets any others.
    for (let j = Math.max(first, i - 200); j < i; j++) {
      const other = atoms[j]!;
      if (other.name !== atom.name || other.alternate !== atom.alternate) continue;
      if (other.position.some((v, axis) => v !== atom.position[axis])) continue;
      diagnostics.push({
        code: 'duplicate-atom',
        message: `line ${atom.line}: ${atom.name} occurs twice at the same place; one is used`,
        line: atom.line!,
      });
      break;
    }
  }
}
