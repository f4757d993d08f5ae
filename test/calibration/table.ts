/** The calibration as a page of the documentation, from its results: `npm run calibrate` ends with it, `-- --table` makes it alone. */
import { readFileSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import type { CellResult } from './trials.js';

const RESULTS = fileURLToPath(new URL('results.json', import.meta.url));
const PAGE = fileURLToPath(new URL('../../packages/core/docs/judgement-calibration.md', import.meta.url));

interface Results {
  readonly command: string;
  readonly scale: number;
  readonly modelError: number;
  readonly cells: readonly CellResult[];
}

/** The page as it should stand, so that a test can say when it is out of date. */
export function calibrationPage(): string {
  const { command, scale, modelError, cells } = JSON.parse(readFileSync(RESULTS, 'utf8')) as Results;
  const percent = (part: number): string => `${(100 * part).toFixed(0)}`;
  const columns = [
    'site',
    'k to (Å⁻¹)',
    'noise (%)',
    'coordinates (Å)',
    'trials',
    'X/N',
    'false alarm (%)',
    'undecided (%)',
    'within 1 sd (%)',
    'within 2 sd (%)',
    'sd of ΔR (Å)',
    '0.05 Å too long: called overlong (%)',
    'rejected (%)',
    'overlong wrongly (%)',
    'neighbour missing preferred (%)',
  ];
  const rows = cells.map((c) => [
    c.system,
    c.kMax,
    percent(c.noise),
    c.coordinateSd,
    c.trials,
    c.xPerPoint.toFixed(2),
    percent(c.falseAlarm),
    percent(c.undecided),
    percent(c.covered68),
    percent(c.covered95),
    c.meanSd.toFixed(3),
    percent(c.overlongFound),
    percent(c.overlongRejected),
    percent(c.overlongFalse),
    percent(c.wrongPreferred),
  ]);
  const all = cells.reduce((sum, { trials }) => sum + trials, 0);
  const pooled = (of: (c: CellResult) => number, from = cells): string => {
    const n = from.reduce((sum, { trials }) => sum + trials, 0);
    const part = from.reduce((sum, c) => sum + of(c) * c.trials, 0) / n;
    return `${(100 * part).toFixed(1)} ± ${(100 * Math.sqrt((part * (1 - part)) / n)).toFixed(1)} %`;
  };
  const known = cells.filter(({ coordinateSd }) => coordinateSd < 0.1);
  const aimed = cells.filter(({ kMax, noise, coordinateSd }) => kMax === 12 && noise === 0.02 && coordinateSd === 0.02);
  return `# Calibration of the judgement

Made by \`${command}\` (${scale} of the full number of trials) from invented sites: nothing here was measured. Model error ${modelError} in the
truths and in the judge. Truths are explicit ensembles of 600 displaced copies each; what is unknown to the judge is drawn from what it
expects; displacements come from force constants of their own. k from 3 Å⁻¹, k³, R ${'1 to 3.5 Å'}; noise and model error are parts of the
rms of the transform in the window; coordinates: standard deviation of every distance. ${all} true candidates, as many overlong ones.

| wanted | reached |
| --- | --- |
| true structure wrongly in tension or inconsistent: 5 ± 2 % | ${pooled((c) => c.falseAlarm)}; coordinates known to 0.03 Å or better: ${pooled((c) => c.falseAlarm, known)} |
| first-shell shift within one posterior sd: 68 ± 4 % | ${pooled((c) => c.covered68)} |
| within 1.96 sd: 95 ± 4 % | ${pooled((c) => c.covered95)} |
| 0.05 Å too long called overlong at k 12 Å⁻¹, 2 % noise: at least 80 % | ${aimed.map((c) => `${c.system} ${percent(c.overlongFound)} %`).join(', ')} (coordinates 0.02 Å) |
| one neighbour missing preferred by more than ln 10: at most 5 % | ${pooled((c) => c.wrongPreferred)} |

Errors are binomial, one standard deviation. Cells of few trials scatter: with 10 trials one finding is 10 %.

| ${columns.join(' | ')} |
| ${columns.map(() => '---').join(' | ')} |
${rows.map((row) => `| ${row.join(' | ')} |`).join('\n')}
`;
}

export const writeCalibrationPage = (): void => writeFileSync(PAGE, calibrationPage());
