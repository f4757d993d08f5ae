/** The measured standards, which are not part of the project: tests that need them run where the folder stands beside it. */
import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const FOLDER = process.env['RINGTRUE_MEASURED'] ?? fileURLToPath(new URL('../../../shared/measured', import.meta.url));

/** χ(k) as reduced elsewhere, or undefined where the folder is absent. */
export function measuredChi(name: string): { k: Float64Array; chi: Float64Array } | undefined {
  const path = `${FOLDER}/${name}.chi.csv`;
  if (!existsSync(path)) return undefined;
  const rows = readFileSync(path, 'utf8')
    .split('\n')
    .filter((line) => /^\d/.test(line))
    .map((line) => line.split(',').map(Number));
  return { k: Float64Array.from(rows, ([k]) => k!), chi: Float64Array.from(rows, ([, chi]) => chi!) };
}
