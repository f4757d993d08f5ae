/** The calibration in its short form; `npm run calibrate` makes the full table. */
import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { MODEL_ERROR } from '../../packages/core/src/judgement/model-error.js';
import { calibrationSystem } from './systems.js';
import { calibrationPage } from './table.js';
import { runCell } from './trials.js';

test('monomer, k to 12 Å⁻¹, 2 % noise, distances known to 0.02 Å: 40 truths and 40 overlong candidates', () => {
  const system = calibrationSystem('monomer');
  const cell = { system: 'monomer', kMax: 12, noise: 0.02, coordinateSd: 0.02, modelError: MODEL_ERROR } as const;
  const found = runCell(system, cell, 40, 3);
  // Bounds are the aims with three binomial standard deviations of 40 trials
  expect(found.xPerPoint).toBeGreaterThan(0.8);
  expect(found.xPerPoint).toBeLessThan(1.2);
  expect(found.falseAlarm).toBeLessThanOrEqual(0.05 + 3 * 0.0345);
  expect(found.covered68).toBeGreaterThan(0.68 - 3 * 0.074);
  expect(found.covered95).toBeGreaterThan(0.95 - 3 * 0.0345);
  expect(found.overlongFound).toBeGreaterThanOrEqual(0.8);
  expect(found.wrongPreferred).toBeLessThanOrEqual(0.05 + 3 * 0.0345);
});

test('the page of the documentation is the one the results make', () => {
  expect(readFileSync('packages/core/docs/judgement-calibration.md', 'utf8')).toBe(calibrationPage());
});
