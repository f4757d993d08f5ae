/** Writes XDI 1.0 (see xdi.ts): everything the format asks for, field-end and label lines always. */

import { InputError } from '../errors.js';
import type { DataTable } from './types.js';

export interface XdiContent {
  /** Words after the version, ours last: "Beamline/2.1", "Ringtrue/0.1.0". */
  readonly applications: readonly string[];
  /** [Family.tag, value], without Column.N, which come from the table. */
  readonly fields: readonly (readonly [name: string, value: string])[];
  readonly comments: readonly string[];
  readonly table: Pick<DataTable, 'names' | 'units' | 'columns'>;
}

const oneLine = (text: string): string => text.replace(/[\r\n]+/g, ' ');

/** Shortest of 12 significant digits: more than any detector gives, and the same on every machine. */
const cell = (x: number): string => Number(x.toPrecision(12)).toString();

/**
 * The text of an XDI file.
 *
 * @throws {InputError} a value is not finite, the first column has no unit, or a name would break the grammar
 */
export function writeXdi({ applications, fields, comments, table }: XdiContent): string {
  const { names, units, columns } = table;
  if (!units[0]) throw new InputError('writeXdi: the first column needs a unit');
  const lines = [`# XDI/1.0 ${applications.join(' ')}`.trimEnd()];
  names.forEach((name, i) => {
    if (!/^[^\s#]+$/.test(name)) throw new InputError(`writeXdi: column ${i + 1} needs one word as its name, got "${name}"`);
    lines.push(`# Column.${i + 1}: ${name} ${units[i] ?? ''}`.trimEnd());
  });
  for (const [name, value] of fields) {
    if (!/^[A-Za-z][\w-]*\.[\w-]+$/.test(name)) throw new InputError(`writeXdi: "${name}" is no Family.tag`);
    lines.push(`# ${name}: ${oneLine(value)}`.trimEnd());
  }
  lines.push('# ///', ...comments.map((comment) => `# ${oneLine(comment)}`.trimEnd()), '# ---', `# ${names.join(' ')}`);
  for (let i = 0; i < columns[0]!.length; i++) {
    const row = columns.map((column, j) => {
      const x = column[i]!;
      if (!Number.isFinite(x)) throw new InputError(`writeXdi: row ${i + 1}, column ${j + 1} is not finite`);
      return cell(x);
    });
    lines.push(`  ${row.join('  ')}`);
  }
  return `${lines.join('\n')}\n`;
}
