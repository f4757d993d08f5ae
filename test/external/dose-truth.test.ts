// Dose drift against simulated series: absorption of real atoms times an invented chi, moved or mixed from scan to scan.
import { expect, test } from 'vitest';
import { dose, readScan } from '../../packages/core/src/evidence/index.js';
import { expectNear } from '../support/expect-near.js';
import { asColumns, seededNormal, syntheticScan } from '../support/synthetic-scan.js';

const SHELLS = [{ n: 6, R: 2.0, sigma2: 0.005 }];
const NOISE = 0.002;
const SCANS = 8;
/** eV, wandering of the monochromator from scan to scan */
const JITTER = 0.02;

function series(drift: number, seed: number, noise = NOISE) {
  const normal = seededNormal(1000 + seed);
  return Array.from({ length: SCANS }, (_, s) => {
    const scan = syntheticScan('Fe', { shells: SHELLS, noise, seed: 100 * seed + s, shift: drift * s + JITTER * normal(), kMax: 11 });
    return readScan(asColumns(scan), { element: 'Fe', edge: 'K' });
  });
}
const names = Array.from({ length: SCANS }, (_, s) => `scan ${s + 1}`);

test('no drift: no alarm in 95 % of series, all scans kept', () => {
  const reports = Array.from({ length: 40 }, (_, seed) => dose(series(0, seed), names));
  expect(reports.filter((report) => report.drift).length).toBeLessThanOrEqual(2);
  const quiet = reports.find((report) => !report.drift)!;
  expect(quiet.keep).toEqual([1, 2, 3, 4, 5, 6, 7, 8]);
  expect(quiet.sentence).toMatch(/^No drift seen over 8 scans; a drift of 0\.0\d+ eV per scan would have been seen/);
});

test.each([0.1, 0.5, -0.1])('a drift of %d eV per scan is found with its error', (drift) => {
  let inside = 0;
  for (let seed = 0; seed < 12; seed++) {
    const report = dose(series(drift, seed), names);
    expect(report.drift).toBe(true);
    const error = (report.driftPerScan.value - drift) / report.driftPerScan.sd;
    if (Math.abs(error) < 2.45) inside++; // 95 % point of Student's t with 6 degrees of freedom
    expectNear(report.driftPerScan.value, drift, { abs: 0.02, label: 'drift, eV per scan' });
    expect(report.keep.length).toBeLessThan(SCANS);
    expect(report.keep[0]).toBe(1);
  }
  expect(inside).toBeGreaterThanOrEqual(10); // of 12 at 95 %: 10 or more in 98 % of such trials
});

test('the drift called detectable is detected in most series', () => {
  const { detectableDrift } = dose(series(0, 3), names);
  let seen = 0;
  for (let seed = 0; seed < 20; seed++) if (dose(series(2 * detectableDrift, 50 + seed), names).drift) seen++;
  expect(seen).toBeGreaterThanOrEqual(16);
});

test('two spectra mixed are counted as two, one as one', () => {
  const make = (shift: number, seed: number, R: number) =>
    syntheticScan('Fe', { shells: [{ n: 6, R, sigma2: 0.005 }], noise: 0, seed, shift, kMax: 11 });
  const [before, after] = [make(0, 1, 2.0), make(-2, 1, 2.12)];
  for (const most of [0, 0.2, 0.6]) {
    const scans = Array.from({ length: SCANS }, (_, s) => {
      const normal = seededNormal(40 + s);
      const part = (most * s) / (SCANS - 1);
      const mu = before.mu.map((y, i) => (1 - part) * y + part * after.mu[i]! + NOISE * normal());
      return readScan(asColumns({ energyEv: before.energyEv, mu }), { element: 'Fe', edge: 'K' });
    });
    expect(dose(scans, names).components).toBe(most === 0 ? 1 : 2);
  }
});

test('what makes no series is refused', () => {
  expect(() => dose(series(0, 1).slice(0, 1), names)).toThrow(/two scans or more/);
  const chi = readScan(`# k chi\n${Array.from({ length: 200 }, (_, i) => `${0.05 * i} 0`).join('\n')}`);
  expect(() => dose([chi, chi], names)).toThrow(/chi\(k\) carries no edge/);
});
