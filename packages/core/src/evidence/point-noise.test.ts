import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { asColumns, seededNormal, syntheticScan } from '../../../../test/support/synthetic-scan.js';
import { pointNoise } from './point-noise.js';
import { readScan } from './read-scan.js';
import { reduce } from './reduce.js';

const SHELLS = [{ n: 6, R: 2.0, sigma2: 0.005 }];

test('white noise on a smooth course: its size is found, whatever the spacing', () => {
  const normal = seededNormal(9);
  const x = Float64Array.from({ length: 2000 }, (_, i) => 0.02 * i + 0.005 * Math.sin(i));
  const { sigma, deviation } = pointNoise(
    x,
    x.map((q) => Math.sin(q) + 0.01 * normal()),
  );
  const mean = sigma.reduce((sum, s) => sum + s, 0) / sigma.length;
  expectNear(mean, 0.01, { rel: 0.06, label: 'sigma' }); // four standard errors of 2000/31 medians of 31
  expectNear(Math.sqrt(deviation.reduce((sum, d) => sum + d * d, 0) / deviation.length), 1, { abs: 0.15, label: 'rms deviation' });
});

test('a glitch is flagged with its line and kept; a clean scan has none', () => {
  const scan = syntheticScan('Fe', { shells: SHELLS, noise: 0.0005 });
  const head = { element: 'Fe', edge: 'K' } as const;
  const clean = reduce([readScan(asColumns(scan), head)]);
  expect(clean.flagged).toEqual([]);
  const at = 250;
  scan.mu[at]! += 0.01; // 20 standard deviations of the noise
  const hit = reduce([readScan(asColumns(scan), head)]);
  expect(hit.flagged.map(({ line, code }) => [line, code])).toEqual([[at + 2, 'glitch']]);
  const [glitch] = hit.flagged;
  expectNear((glitch as { deviation: number }).deviation, 14.3, { rel: 0.4, label: 'deviation' }); // 20/√(1 + Σc²); twice the error of a median of 31
  // Merged with a scan that begins 7 points later, the line is still the first file's
  const late = syntheticScan('Fe', { shells: SHELLS, noise: 0.0005, seed: 2 });
  const shorter = { energyEv: late.energyEv.slice(7), mu: late.mu.slice(7) };
  const merged = reduce([readScan(asColumns(scan), head), readScan(asColumns(shorter), head)]);
  expect(merged.flagged.map(({ line }) => line)).toEqual([at + 2]);
  expect(hit.mu[at]).toBeCloseTo(scan.mu[at]!, 10);
  expect(hit.energyEv.length).toBe(clean.energyEv.length);
});
