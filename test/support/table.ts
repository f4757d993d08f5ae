import { readFileSync } from 'node:fs';

/** Rows of a `;`-separated table beside a test, by column name; lines starting with # say where it is from. */
export function readTable(url: URL): Record<string, string>[] {
  const [head, ...rows] = readFileSync(url, 'utf8')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'));
  const names = head!.split(';');
  return rows.map((row) => Object.fromEntries(row.split(';').map((cell, i) => [names[i]!, cell])));
}
