import type { Table } from './prediction-tables.js';

/** RFC 4180: commas, CRLF, quotes doubled; numbers with a point and all their digits. */
export function csvTable({ columns, rows }: Table): string {
  const cell = (value: string | number): string =>
    typeof value === 'string' && /[",\r\n]/.test(value) ? `"${value.replaceAll('"', '""')}"` : String(value);
  return [columns, ...rows]
    .map((row) => row.map(cell).join(','))
    .join('\r\n')
    .concat('\r\n');
}
