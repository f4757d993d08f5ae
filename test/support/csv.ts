import { readFileSync } from 'node:fs';

/** Rows of a CSV file beside a test, by column name; lines that begin with # are comments. */
export function readCsv(url: URL): Record<string, string>[] {
  const lines = readFileSync(url, 'utf8')
    .split(/\r?\n/)
    .filter((line) => line !== '' && !line.startsWith('#'));
  const names = lines[0]!.split(',');
  return lines.slice(1).map((line) => Object.fromEntries(line.split(',').map((cell, i) => [names[i]!, cell])));
}
