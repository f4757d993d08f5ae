/** Pages and parts of pages that are made from the program and its measurements: `npm run docs` writes them, a test compares. */
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { commandPage } from './command-pages.js';
import { libraryPage } from './library-page.js';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
export const DOCS = `${ROOT}packages/cli/docs/`;
const CORE_DOCS = 'packages/core/docs/';

interface Cell {
  readonly system: string;
  readonly kMax: number;
  readonly noise: number;
  readonly coordinateSd: number;
  readonly trials: number;
  readonly falseAlarm: number;
  readonly covered68: number;
  readonly covered95: number;
  readonly overlongFound: number;
  readonly wrongPreferred: number;
}

/** Links to the pages beside the core, by their own titles. */
function accuracyList(): string {
  if (!existsSync(ROOT + CORE_DOCS)) return 'Not yet written.';
  return readdirSync(ROOT + CORE_DOCS)
    .filter((name) => name.endsWith('.md'))
    .sort()
    .map((name) => `- [${/^# (.*)$/m.exec(readFileSync(ROOT + CORE_DOCS + name, 'utf8'))?.[1] ?? name}](../../core/docs/${name})`)
    .join('\n');
}

function calibrationTable(): string {
  const file = `${ROOT}test/calibration/results.json`;
  if (!existsSync(file)) return 'Not yet run: `npm run calibrate`.';
  const { command, scale, modelError, cells } = JSON.parse(readFileSync(file, 'utf8')) as {
    command: string;
    scale: number;
    modelError: number;
    cells: readonly Cell[];
  };
  const percent = (value: number): string => `${(100 * value).toFixed(0)} %`;
  const columns = [
    'system',
    'k max',
    'noise',
    'sd of coordinates (Å)',
    'trials',
    'right one rejected',
    '68 % covers',
    '95 % covers',
    '0.05 Å found',
    'wrong one preferred',
  ];
  const rows = cells.map((c) => [
    c.system,
    c.kMax,
    percent(c.noise),
    c.coordinateSd,
    c.trials,
    percent(c.falseAlarm),
    percent(c.covered68),
    percent(c.covered95),
    percent(c.overlongFound),
    percent(c.wrongPreferred),
  ]);
  const line = (cell: readonly (string | number)[]): string => `| ${cell.join(' | ')} |`;
  return [
    `\`${command}\`${scale === 1 ? '' : ` at ${scale} of the full number of trials`}, error of the theory ${percent(modelError)}. ${cells.length} cells.`,
    '',
    line(columns),
    `|${columns.map(() => ' --- |').join('')}`,
    ...rows.map(line),
  ].join('\n');
}

const PARTS: Readonly<Record<string, () => string>> = { accuracy: accuracyList, calibration: calibrationTable };

/** Every page that has something made in it, as it should be. */
export function madePages(): Map<string, string> {
  const pages = new Map([
    ['commands.md', commandPage()],
    ['library.md', libraryPage()],
  ]);
  for (const name of readdirSync(DOCS).filter((file) => file.endsWith('.md') && !pages.has(file))) {
    const text = readFileSync(DOCS + name, 'utf8');
    const made = text.replace(/(<!-- generated: (\w+) -->\n)[\s\S]*?(<!-- end -->)/g, (_, begin: string, part: string, end: string) => {
      const make = PARTS[part];
      if (!make) throw new Error(`${name}: nothing is known that makes "${part}"`);
      return `${begin}\n${make()}\n\n${end}`;
    });
    if (text.includes('<!-- generated:')) pages.set(name, made);
  }
  return pages;
}

if (process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href)
  for (const [name, text] of madePages()) writeFileSync(DOCS + name, text);
