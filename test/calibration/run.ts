/**
 * The full calibration: every system, k_max, noise and coordinate error, to results.json beside this file.
 *
 *   npm run calibrate [-- --scale 0.2]      scale: part of the trials, for a quick look
 *   npm run calibrate -- --table            only the page of the documentation, from the results that stand
 */
import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { MODEL_ERROR } from '../../packages/core/src/judgement/model-error.js';
import { calibrationSystem } from './systems.js';
import { writeCalibrationPage } from './table.js';
import { type CellResult, runCell } from './trials.js';

const FILE = fileURLToPath(new URL('results.json', import.meta.url));
const TRIALS = { monomer: 60, dimer: 24, crystal: 30 } as const;
const GRID = [10, 12, 14].flatMap((kMax) =>
  [0.01, 0.03, 0.1].flatMap((noise) => [0.01, 0.03, 0.1].map((coordinateSd) => ({ kMax, noise, coordinateSd }))),
);
/** The case the aims are stated for. */
const HEADLINE = { kMax: 12, noise: 0.02, coordinateSd: 0.02 };
const HEADLINE_FACTOR = 3;

if (process.argv.includes('--table')) {
  writeCalibrationPage();
  process.exit();
}
const at = process.argv.indexOf('--scale');
const scale = at < 0 ? 1 : Number(process.argv[at + 1]);
const cells: CellResult[] = [];
const began = Date.now();
for (const [s, name] of (['monomer', 'dimer', 'crystal'] as const).entries()) {
  const system = calibrationSystem(name);
  for (const [i, setting] of [HEADLINE, ...GRID].entries()) {
    const trials = Math.max(4, Math.round(TRIALS[name] * scale * (i === 0 ? HEADLINE_FACTOR : 1)));
    const cell = runCell(system, { ...setting, system: name, modelError: MODEL_ERROR }, trials, 1000 * (s + 1) + i);
    cells.push(cell);
    process.stderr.write(`${name} ${i + 1}/${GRID.length + 1} ${JSON.stringify(cell)} ${((Date.now() - began) / 1000).toFixed(0)} s\n`);
    writeFileSync(FILE, `${JSON.stringify({ command: 'npm run calibrate', scale, modelError: MODEL_ERROR, cells }, null, 1)}\n`);
  }
}
writeCalibrationPage();
process.stdout.write(`${cells.length} cells written\n`);
