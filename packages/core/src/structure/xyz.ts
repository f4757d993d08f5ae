/**
 * XYZ: a count, a comment line, then "symbol x y z" a line, frame after frame. Extended XYZ says in the comment line
 * Lattice="ax ay az bx … cz", Properties=species:S:1:pos:R:3:…, pbc="T T F". Lengths are Å unless units=bohr is said.
 */
import { BOHR_ANGSTROM } from '../constants.js';
import { type Diagnostic, ReadError } from '../errors.js';
import { cellGeometry, cellOfVectors } from './cell.js';
import { elementOfLabel } from './labels.js';
import { decimalAt } from './numbers.js';
import { IDENTITY } from './operators.js';
import type { Atom, Cell, Structure, Vec3 } from './types.js';

export interface XyzFrame {
  readonly atoms: readonly Atom[];
  readonly comment: string;
  readonly cell?: Cell;
  readonly repeats?: readonly [boolean, boolean, boolean];
  /** Line of the count, from 1. */
  readonly line: number;
}

interface Header {
  readonly comment: string;
  readonly cell?: Cell;
  readonly repeats?: readonly [boolean, boolean, boolean];
  readonly scale: number;
  readonly speciesColumn: number;
  readonly positionColumn: number;
}

/**
 * A trajectory read as it arrives: feed pieces of text cut anywhere, take the frames that became complete. Holds one frame.
 * Lines end with LF or CRLF here.
 */
export class XyzFrames {
  readonly diagnostics: Diagnostic[] = [];
  private rest = '';
  private line = 0;
  private count = -1;
  private countLine = 0;
  private header: Header | undefined;
  private atoms: Atom[] = [];
  private running = new Map<string, number>();
  private readonly species = new Map<string, string>();
  private readonly starts = new Int32Array(64);
  private readonly ends = new Int32Array(64);
  private readonly said = new Set<string>();

  /** @throws {ReadError} what arrived is no XYZ */
  push(chunk: string): XyzFrame[] {
    const text = this.rest === '' ? chunk : this.rest + chunk;
    const frames: XyzFrame[] = [];
    let cursor = this.line === 0 && text.charCodeAt(0) === 0xfeff ? 1 : 0;
    for (let at = text.indexOf('\n', cursor); at >= 0; at = text.indexOf('\n', cursor)) {
      this.takeLine(text, cursor, at, frames);
      cursor = at + 1;
    }
    this.rest = text.slice(cursor);
    return frames;
  }

  /** The last line may lack its line break; a frame cut short is an error. */
  end(): XyzFrame[] {
    const frames: XyzFrame[] = [];
    if (this.rest !== '') this.takeLine(this.rest, this.line === 0 && this.rest.charCodeAt(0) === 0xfeff ? 1 : 0, this.rest.length, frames);
    this.rest = '';
    if (this.count > 0) {
      throw new ReadError(
        `line ${this.countLine}: ${this.count} atoms are announced, but the file ends after ${this.atoms.length}; correct the count or add the atoms`,
        { line: this.countLine },
      );
    }
    return frames;
  }

  private takeLine(text: string, start: number, end: number, frames: XyzFrame[]): void {
    this.line++;
    if (end > start && text.charCodeAt(end - 1) === 13) end--;
    if (this.count < 0) this.takeCount(text.slice(start, end));
    else if (!this.header) this.header = this.readHeader(text.slice(start, end));
    else this.takeAtom(text, start, end, this.header);
    if (this.header && this.atoms.length + this.leftOut === this.count) {
      const { comment, cell, repeats } = this.header;
      frames.push({
        atoms: this.atoms,
        comment,
        line: this.countLine,
        ...(cell ? { cell } : {}),
        ...(repeats ? { repeats } : {}),
      });
      this.count = -1;
      this.header = undefined;
      this.atoms = [];
      this.leftOut = 0;
      this.running = new Map();
    }
  }

  private leftOut = 0;

  private takeCount(line: string): void {
    const trimmed = line.trim();
    if (trimmed === '') return;
    if (!/^\d+$/.test(trimmed)) {
      throw new ReadError(
        `line ${this.line}: the number of atoms of a frame should stand here, found "${shorten(trimmed)}"; correct the count of the frame before`,
        {
          line: this.line,
          text: line,
        },
      );
    }
    this.count = Number(trimmed);
    this.countLine = this.line;
    if (this.count === 0) throw new ReadError(`line ${this.line}: a frame of 0 atoms; give the number of atoms`, { line: this.line });
  }

  private takeAtom(text: string, start: number, end: number, header: Header): void {
    const { starts, ends } = this;
    const { speciesColumn, positionColumn, scale } = header;
    const last = Math.max(speciesColumn, positionColumn + 2);
    let column = 0;
    for (let i = start; i < end && column <= last; ) {
      while (i < end && text.charCodeAt(i) <= 32) i++;
      if (i >= end) break;
      starts[column] = i;
      while (i < end && text.charCodeAt(i) > 32) i++;
      ends[column++] = i;
    }
    if (column <= last) {
      throw new ReadError(
        `line ${this.line}: an element and three coordinates should stand here, found "${shorten(text.slice(start, end))}"; ` +
          `the frame of line ${this.countLine} announces ${this.count} atoms`,
        { line: this.line, text: text.slice(start, end) },
      );
    }
    const label = text.slice(starts[speciesColumn], ends[speciesColumn]);
    const element = this.elementOf(label);
    const position: Vec3 = [
      this.coordinate(text, positionColumn, start) * scale,
      this.coordinate(text, positionColumn + 1, start) * scale,
      this.coordinate(text, positionColumn + 2, start) * scale,
    ];
    if (element === '') {
      this.leftOut++;
      return;
    }
    const number = (this.running.get(element) ?? 0) + 1;
    this.running.set(element, number);
    this.atoms.push({ name: element + number, element, position, occupancy: 1, line: this.line });
  }

  private coordinate(text: string, column: number, lineStart: number): number {
    const start = this.starts[column]!;
    const end = this.ends[column]!;
    const value = decimalAt(text, start, end);
    if (Number.isFinite(value)) return value;
    const found = text.slice(start, end);
    const remedy = /^[+-]?\d*,\d+$/.test(found) ? '; write a decimal point, not a comma' : '';
    throw new ReadError(
      `line ${this.line}, columns ${start - lineStart + 1}–${end - lineStart}: a coordinate should be a number, found "${shorten(found)}"${remedy}`,
      { line: this.line, columns: [start - lineStart + 1, end - lineStart], text: found },
    );
  }

  private elementOf(label: string): string {
    let element = this.species.get(label);
    if (element === undefined) {
      element = elementOfLabel(label) ?? '';
      if (element === '' && !/^(X|Xx|XX|Du|DU|Q|Bq|BQ|0)\d*$/.test(label)) {
        throw new ReadError(`line ${this.line}: "${shorten(label)}" is no element; write a symbol like Fe or an atomic number`, {
          line: this.line,
          text: label,
        });
      }
      this.species.set(label, element);
      const letters = /^[A-Za-z]+/.exec(label)?.[0] ?? '';
      if (element === '')
        this.say('dummy-atom', `"${label}" atoms (first in line ${this.line}) are dummies without an element and are left out`);
      else if (letters.length > element.length && letters.toUpperCase() !== 'D')
        this.say('element-guessed', `"${label}" (first in line ${this.line}) is read as ${element}`);
    }
    return element;
  }

  private say(code: string, message: string): void {
    if (this.said.has(message)) return;
    this.said.add(message);
    this.diagnostics.push({ code, message, line: this.line });
  }

  private readHeader(comment: string): Header {
    const values = new Map<string, string>();
    for (const [, key, quoted, braced, bare] of comment.matchAll(/(?<![\w-])([A-Za-z_][\w-]*)\s*=\s*(?:"([^"]*)"|\{([^}]*)\}|(\S+))/g)) {
      values.set(key!.toLowerCase(), quoted ?? braced ?? bare ?? '');
    }
    const scale = this.scaleOf(values);
    const repeats = this.repeatsOf(values.get('pbc'));
    const cell = repeats.includes(true) ? this.latticeOf(values.get('lattice'), scale) : undefined;
    return {
      comment: comment.trim(),
      scale,
      ...this.columnsOf(values.get('properties')),
      ...(cell ? { cell } : {}),
      ...(cell && repeats.includes(false) ? { repeats } : {}),
    };
  }

  private scaleOf(values: ReadonlyMap<string, string>): number {
    const unit = (values.get('units') ?? values.get('unit') ?? '').toLowerCase();
    if (/^(bohr|au|a\.u\.|atomic)/.test(unit)) {
      this.say('units-bohr', 'coordinates are stated in bohr and are converted to Å');
      return BOHR_ANGSTROM;
    }
    return 1;
  }

  private latticeOf(text: string | undefined, scale: number): Cell | undefined {
    if (text === undefined) return undefined;
    const v = text
      .trim()
      .split(/[\s,]+/)
      .map((part) => decimalAt(part, 0, part.length) * scale);
    if (v.length !== 9 || !v.every(Number.isFinite)) {
      throw new ReadError(`line ${this.line}: Lattice should hold nine numbers, found "${shorten(text)}"`, { line: this.line, text });
    }
    const cell = cellOfVectors([v[0]!, v[1]!, v[2]!], [v[3]!, v[4]!, v[5]!], [v[6]!, v[7]!, v[8]!]);
    try {
      cellGeometry(cell);
    } catch (error) {
      throw new ReadError(`line ${this.line}: ${(error as Error).message}`, { line: this.line, text });
    }
    return cell;
  }

  private repeatsOf(text: string | undefined): readonly [boolean, boolean, boolean] {
    if (text === undefined) return [true, true, true];
    const flags = text
      .trim()
      .split(/[\s,]+/)
      .map((part) => /^(t|true|1|\.true\.)$/i.test(part));
    if (flags.length !== 3)
      throw new ReadError(`line ${this.line}: pbc should hold three of T and F, found "${shorten(text)}"`, { line: this.line, text });
    return [flags[0]!, flags[1]!, flags[2]!];
  }

  private columnsOf(properties: string | undefined): { speciesColumn: number; positionColumn: number } {
    if (properties === undefined) return { speciesColumn: 0, positionColumn: 1 };
    const parts = properties.split(':');
    let column = 0;
    let speciesColumn = -1;
    let positionColumn = -1;
    for (let i = 0; i + 2 < parts.length; i += 3) {
      const width = Number(parts[i + 2]);
      if (!Number.isInteger(width) || width < 1) break;
      const name = parts[i]!.toLowerCase();
      if (name === 'species' || (name === 'z' && speciesColumn < 0)) speciesColumn = column;
      if (name === 'pos' && width === 3) positionColumn = column;
      column += width;
    }
    if (speciesColumn < 0 || positionColumn < 0 || column > 64) {
      throw new ReadError(`line ${this.line}: Properties should name species:S:1 and pos:R:3, found "${shorten(properties)}"`, {
        line: this.line,
        text: properties,
      });
    }
    return { speciesColumn, positionColumn };
  }
}

/**
 * A whole XYZ text, all frames held.
 * @throws {ReadError} as XyzFrames
 */
export function readXyz(text: string): Structure {
  const reader = new XyzFrames();
  const frames = reader.push(text);
  frames.push(...reader.end());
  const first = frames[0];
  if (!first) throw new ReadError('the file holds no atoms; an XYZ file starts with the number of atoms');
  if (first.atoms.length === 0)
    throw new ReadError(`line ${first.line}: all atoms of the first frame are dummies without an element; write symbols like Fe`, {
      line: first.line,
    });
  const cellText = ({ cell }: XyzFrame) => cell?.vectors?.join(';');
  const other = frames.find((frame) => cellText(frame) !== cellText(first));
  if (other) {
    reader.diagnostics.push({
      code: 'cell-changes',
      message: `line ${other.line}: the cell of this frame differs from the first one's, which is used for all; read frames one by one where that matters`,
      line: other.line,
    });
  }
  return { ...structureOfFrame(first, reader.diagnostics), moreFrames: frames.slice(1).map((frame) => frame.atoms) };
}

/** One frame as a structure of its own. */
export function structureOfFrame({ atoms, comment, cell, repeats }: XyzFrame, diagnostics: readonly Diagnostic[]): Structure {
  return {
    format: 'xyz',
    title: comment,
    atoms,
    moreFrames: [],
    ...(cell ? { cell } : {}),
    ...(repeats ? { repeats } : {}),
    operators: [IDENTITY],
    diagnostics,
  };
}

const shorten = (text: string): string => (text.length > 40 ? `${text.slice(0, 39)}…` : text);
