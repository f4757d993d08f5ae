import { readFileSync } from 'node:fs';

/**
 * Rows of a table beside the external tests, by column name; lines starting with # say where it is from. Columns are parted
 * by `;` where the head line has one, else by commas.
 */
export function readTable(source: string | URL): Record<string, string>[] {
  const url = typeof source === 'string' ? new URL(`../external/data/${source}`, import.meta.url) : source;
  const [head, ...rows] = readFileSync(url, 'utf8')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'));
  const separator = head!.includes(';') ? ';' : ',';
  const names = head!.split(separator);
  return rows.map((row) => {
    const cells = row.split(separator);
    if (cells.length !== names.length) throw new Error(`${url}: ${names.length} columns wanted, row "${row}" has ${cells.length}`);
    return Object.fromEntries(names.map((name, i) => [name, cells[i]!]));
  });
}
