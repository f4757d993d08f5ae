import { bench, describe } from 'vitest';
import { dose, readScan, reduce } from '../../packages/core/src/evidence/index.js';
import { asColumns, syntheticScan } from '../support/synthetic-scan.js';

// 500 points a scan: 34 before the edge, 110 across it, the rest in k. Wanted: one scan in 30 ms, a series of 20 in 300 ms.
const shells = [{ n: 6, R: 2.0, sigma2: 0.005 }];
const texts = Array.from({ length: 20 }, (_, seed) => asColumns(syntheticScan('Fe', { shells, noise: 0.001, seed, dk: 0.0363 })));
const head = { element: 'Fe', edge: 'K' } as const;
const scans = texts.map((text) => readScan(text, head));
const names = scans.map((_, s) => `scan ${s + 1}`);
const points = scans[0]!.lines.length;

describe(`${points} points`, () => {
  bench('reduce one scan', () => void reduce(scans.slice(0, 1)));
  bench('reduce 20 scans', () => void reduce(scans));
  bench('read and reduce 20 scans', () => void reduce(texts.map((text) => readScan(text, head))));
  bench('dose drift of 20 scans', () => void dose(scans, names));
});
