/**
 * Numbers in columns without a format: comment marks # % ; !, any of blank, tab, comma, semicolon between the cells, a header in words
 * or none. A row that cannot be read is dropped and listed with its line; when they are more than one in twenty the file is refused.
 */

import { type Diagnostic, ReadError } from '../errors.js';
import { isNumber, parseNumber } from './numbers.js';
import type { DataTable } from './types.js';

export interface ColumnText {
  readonly table: DataTable;
  /** Lines before the numbers, comment marks taken off. */
  readonly header: readonly string[];
  readonly delimiter: 'blank' | 'tab' | 'comma' | 'semicolon';
  readonly diagnostics: readonly Diagnostic[];
}

const COMMENT = /^\s*[#%;!]+/;
const SPLIT = { blank: /\s+/, tab: '\t', comma: ',', semicolon: ';' } as const; // cells are trimmed after, each blank met once
/** A table wider than this is none of a scan: some tens of detector elements are common. */
const MOST_COLUMNS = 1000;
const NO_NUMBER = /^(nan|[+-]?inf(inity)?|-+|\*+|null|none|n\/?a|overflow|)$/i;

function split(line: string, delimiter: ColumnText['delimiter']): string[] {
  const cells = line
    .trim()
    .split(SPLIT[delimiter])
    .map((cell) => cell.trim());
  // A delimiter at the end of a line closes the last cell, it opens none
  if (cells.length > 1 && cells.at(-1) === '') cells.pop();
  return cells;
}

/** The delimiter under which the line is at least two numbers; blanks last, since "1, 2" is commas. */
function delimiterOf(line: string): ColumnText['delimiter'] | undefined {
  for (const delimiter of ['semicolon', 'comma', 'tab', 'blank'] as const) {
    const cells = split(line, delimiter);
    if (cells.length >= 2 && cells.every(isNumber)) return delimiter;
  }
  return undefined;
}

/**
 * Reads columns of numbers.
 *
 * @param text  whole file
 * @throws {ReadError} no two columns of numbers, words among the numbers, or too many unreadable rows; the line is named
 */
export function readColumns(text: string): ColumnText {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/);
  // Two numbers in a header ("10 5") are not yet data: the next line has to look the same
  const start = lines.findIndex((line, i) => {
    if (COMMENT.test(line) || !delimiterOf(line)) return false;
    const next = lines.slice(i + 1, i + 20).find((other) => other.trim() !== '' && !COMMENT.test(other));
    return next === undefined || split(next, delimiterOf(line)!).length === split(line, delimiterOf(line)!).length;
  });
  if (start < 0) {
    const at = lines.findIndex((line) => !COMMENT.test(line) && line.trim() !== '');
    const found = at < 0 ? 'nothing but comments and blank lines' : `line ${at + 1} "${lines[at]!.trim().slice(0, 40)}"`;
    const advice = at >= 0 && /\d,\d/.test(lines[at]!) ? '; the decimal mark must be a dot' : '';
    throw new ReadError(`readColumns: two or more columns of numbers are needed, found ${found}${advice}`, at < 0 ? {} : { line: at + 1 });
  }
  const delimiter = delimiterOf(lines[start]!)!;
  const count = split(lines[start]!, delimiter).length;
  if (count > MOST_COLUMNS)
    throw new ReadError(`readColumns: line ${start + 1}: ${count} columns are more than the ${MOST_COLUMNS} that are read`, {
      line: start + 1,
    });
  const header = lines.slice(0, start).map((line) => line.replace(COMMENT, '').trim());
  const diagnostics: Diagnostic[] = [];
  const rows: number[][] = [];
  const rowLines: number[] = [];
  const dropped: string[] = [];
  for (let i = start; i < lines.length; i++) {
    const line = lines[i]!;
    if (line.trim() === '') continue;
    const where = `readColumns: line ${i + 1}`;
    if (COMMENT.test(line)) {
      diagnostics.push({ code: 'comment-in-data', message: `a comment stands among the data: "${line.trim().slice(0, 40)}"`, line: i + 1 });
      continue;
    }
    const cells = split(line, delimiter);
    const broken = cells.find((cell) => !isNumber(cell));
    const drop = (reason: string) => {
      dropped.push(`${where}: ${reason}`);
      diagnostics.push({ code: 'row-dropped', message: `the row is left out: ${reason}`, line: i + 1 });
    };
    if (broken !== undefined && !NO_NUMBER.test(broken)) parseNumber(broken, `${where}, column ${cells.indexOf(broken) + 1}`, i + 1);
    if (cells.length !== count) drop(`${count} numbers like the first row are needed, found ${cells.length}`);
    else if (broken !== undefined) drop(`a finite number is needed, found "${broken}"`);
    else {
      rows.push(cells.map((cell) => parseNumber(cell, where, i + 1)));
      rowLines.push(i + 1);
    }
  }
  if (dropped.length * 20 > rows.length + dropped.length) {
    const more = dropped.length > 1 ? ` (and ${dropped.length - 1} more rows of ${rows.length + dropped.length} unreadable)` : '';
    throw new ReadError(`${dropped[0]}${more}`);
  }
  const { names, units } = namesFrom(header, count, delimiter);
  const columns = Array.from({ length: count }, (_, j) => Float64Array.from(rows, (row) => row[j]!));
  return { table: { names, units, columns, lines: Int32Array.from(rowLines) }, header, delimiter, diagnostics };
}

/** Names from the last header line with one word a column; a unit may follow in brackets or after an underscore. */
function namesFrom(header: readonly string[], count: number, delimiter: ColumnText['delimiter']): { names: string[]; units: string[] } {
  for (const line of [...header].reverse()) {
    const joined = line.replace(/\s{0,9}[([]\s{0,9}([A-Za-zÅ^⁻¹\-1/]{1,20})\s{0,9}[)\]]/g, '_$1');
    for (const words of [split(joined, delimiter), joined.trim().split(/[\s,;]+/)]) {
      if (words.length !== count || words.some((word) => word === '' || isNumber(word))) continue;
      const units = words.map((word) => /[_\s](eV|keV|deg(?:rees)?|rad(?:ians)?)$/i.exec(word)?.[1] ?? '');
      return { names: words.map((word) => word.replace(/[_\s](eV|keV|deg(rees)?|rad(ians)?)$/i, '')), units };
    }
  }
  return { names: Array(count).fill(''), units: Array(count).fill('') };
}
