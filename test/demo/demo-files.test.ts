// The invented demo files: they are what their generator writes, and they are read as their README says.
import { readdirSync, readFileSync, statSync } from 'node:fs';
import { predict, readScan, readStructure, reduce } from '@ringtrue/core';
import { describe, expect, test } from 'vitest';
import { demoFiles, readTruth } from '../../demo-structures/make/demo-files.js';
import { truth } from '../../demo-structures/make/truth.js';
import { dose } from '../../packages/core/src/evidence/index.js';
import { compareInR } from '../../packages/core/src/spectrum/index.js';
import { findSites } from '../../packages/core/src/structure/index.js';
import { expectNear } from '../support/expect-near.js';

const FOLDER = new URL('../../demo-structures/', import.meta.url);
const read = (name: string): string => readFileSync(new URL(name, FOLDER), 'utf8');
const scans = (name: string, count: number, ending: string, element: string) =>
  Array.from({ length: count }, (_, i) => readScan(read(`${name}-${i + 1}.${ending}`), { element, edge: 'K' }));

test('every file is what the generator writes, says that it is invented, and is small', () => {
  const files = demoFiles();
  for (const [name, text] of files) {
    expect(read(name), name).toBe(text);
    expect(text.slice(0, 600), name).toMatch(/invented/i);
  }
  const there = readdirSync(FOLDER).filter((name) => name !== 'make' && name !== 'README.md');
  expect(there.sort()).toEqual([...files.keys(), 'redoxin-site.xyz', 'tideglass.cif'].sort());
  const sizes = there.map((name) => statSync(new URL(name, FOLDER)).size);
  expect(Math.max(...sizes)).toBeLessThan(300_000);
  expect(sizes.reduce((a, b) => a + b)).toBeLessThan(3_000_000);
});

// First frames only. 3 %: the engine may grow better; whoever changes it by more makes the truths anew or says why not.
test.each(['redoxin', 'tideglass', 'oxidase'] as const)('the kept truth of %s is the ensemble that is described', (name) => {
  const [k, , short] = readTruth(name);
  const again = truth(name, 6).chi;
  let [difference, size] = [0, 0];
  k!.forEach((q, i) => {
    if (q < 3) return;
    difference += (q * q * (again[i]! - short![i]!)) ** 2;
    size += (q * q * short![i]!) ** 2;
  });
  expect(Math.sqrt(difference / size)).toBeLessThan(0.03);
});

describe('structures', () => {
  // Bonds to each metal, Å, as README.md states them; PDB and XYZ round, crystals are moved by their precision.
  const TRUE = [
    [1.84, 1.86, 1.95, 2.02, 2.1, 2.18],
    [1.8, 1.82, 1.92, 1.98, 2.06, 2.1],
  ];
  const LONGER = [
    [1.96, 1.97, 2.05, 2.13, 2.2, 2.33],
    [1.91, 1.92, 2.02, 2.09, 2.15, 2.25],
  ];
  test.each([
    ['oxidase-room-temperature.pdb', 'Mn', LONGER, 0.01],
    ['oxidase-low-dose.cif', 'Mn', TRUE, 0.1], // 4 × 0.023 Å
    ['oxidase-model-one.xyz', 'Mn', TRUE, 0.02],
    ['oxidase-model-three.xyz', 'Mn', [[1.98, 2.05, 2.1, 2.12, 2.18, 2.36]], 0.01],
    ['redoxin.pdb', 'Fe', [[2.29, 2.305, 2.315, 2.33]], 0.08], // 4 × 0.019 Å
    ['redoxin.cif', 'Fe', [[2.29, 2.305, 2.315, 2.33]], 0.08],
    ['redoxin-site.xyz', 'Fe', [[2.31, 2.31, 2.31, 2.31]], 0.001],
    ['tideglass.cif', 'Mn', [[1.884, 1.884, 1.884, 1.884, 1.894, 1.894]], 0.001],
    ['tideglass.xyz', 'Mn', [[1.884, 1.884, 1.884, 1.884, 1.894, 1.894]], 0.001],
  ] as const)('%s', (name, absorber, bonds, abs) => {
    const sites = findSites(readStructure(read(name)), { absorber, radius: 6 });
    expect(sites.length).toBe(bonds.length);
    sites.forEach((site, s) => {
      expectNear(site.weight, 1 / bonds.length, { abs: 1e-12, label: 'weight' });
      bonds[s]!.forEach((wanted, i) => {
        expectNear(site.atoms[i + 1]!.distance, wanted, { abs, label: `${site.label}, neighbour ${i + 1}` });
      });
    });
  });

  test('the rival has the same first shells on average, and not atom by atom', () => {
    const shells = (name: string) =>
      findSites(readStructure(read(name)), { absorber: 'Mn', radius: 6 }).map((site) => site.atoms.slice(1, 7));
    const [one, two] = [shells('oxidase-model-one.xyz'), shells('oxidase-model-two.xyz')];
    const of = (list: ReturnType<typeof shells>, element: string) =>
      list
        .flat()
        .filter((atom) => atom.element === element)
        .map(({ distance }) => distance)
        .sort((a, b) => a - b);
    for (const element of ['O', 'N']) {
      expect(of(one, element).length).toBe(of(two, element).length);
      of(one, element).forEach((distance, i) => {
        expectNear(of(two, element)[i]!, distance, { abs: 0.02, label: `${element} ${i + 1}` });
      });
    }
    const nitrogens = (list: ReturnType<typeof shells>) => list.map((shell) => shell.filter(({ element }) => element === 'N').length);
    expect(nitrogens(one)).toEqual([1, 1]);
    expect(nitrogens(two)).toEqual([2, 0]);
  });
});

describe('spectra', () => {
  const RAW = [
    ['oxidase', 'Mn', 'xdi', 6550.6],
    ['redoxin', 'Fe', 'dat', 7119.2],
    ['tideglass', 'Mn', 'xdi', 6552.2],
  ] as const;
  test.each(RAW)('%s reduces to its truth', (name, element, ending, edgeEv) => {
    const merged = reduce(scans(`${name}-scan`, 3, ending, element));
    expectNear(merged.e0, edgeEv, { abs: 2, label: 'steepest rise' }); // the peak above the edge pulls it up a little
    expect(merged.noise.kMaxUseful).toBeGreaterThan(11);
    const { k, chi } = merged;
    const [, whole] = readTruth(name);
    const data = Float64Array.from(k, (_, i) => whole![i]! * 0.85);
    let best = 1;
    for (let e0 = -4; e0 <= 6; e0 += 0.5) {
      const model = shifted(k, data, e0);
      best = Math.min(best, compareInR({ k, data: chi, model, kWeight: 2, kMin: 3, kMax: 12, rMin: 1, rMax: 4 }).rFactor);
    }
    // Of the noise, 3 of 31.4 Å lie in the range compared; the rest is an edge step good to 1 or 2 %, e0 by 0.5 eV, the background.
    const power = (values: Float64Array) => values.reduce((sum, v, i) => sum + (k[i]! < 3 || k[i]! > 12 ? 0 : (k[i]! ** 2 * v) ** 2), 0);
    expect(best).toBeLessThan(0.01 + (2 * 3 * power(merged.sigmaChi)) / 31.4 / power(data));
  });

  test.each(['oxidase', 'redoxin', 'tideglass'])('%s-chi.dat is ready chi', (name) => {
    const ready = readScan(read(`${name}-chi.dat`), {});
    expect(ready.kind).toBe('chi');
    expect(reduce([ready]).k.at(-1)).toBeCloseTo(13.5, 6);
  });

  test('the dose series drifts, the three scans do not', () => {
    const series = dose(scans('oxidase-dose', 8, 'dat', 'Mn'), []);
    expect(series.drift).toBe(true);
    // 44 % reduced over seven steps, an edge 3.2 eV lower: −0.2 eV a scan; alignment of a mixture is no exact mean, hence 30 %.
    expectNear(series.driftPerScan.value, -0.2, { abs: 0.06, label: 'drift, eV a scan' });
    expect(series.keep.length).toBeLessThan(5);
    expect(dose(scans('oxidase-scan', 3, 'xdi', 'Mn'), []).drift).toBe(false);
  });
});

test('nothing but energy origin and S0² free, the right structures lie nearer than the wrong ones', { timeout: 120_000 }, () => {
  const { k, chi } = reduce(scans('oxidase-scan', 3, 'xdi', 'Mn'));
  const distance = (name: string): number => {
    const { chi: model } = predict(
      readStructure(read(name)),
      { absorber: 'Mn', temperature: 15, thermal: 'springs', kMax: 14, s02: 1 },
      { file: name, version: '' },
    );
    let best = 9;
    for (let e0 = -10; e0 <= 6; e0 += 1)
      for (let s02 = 0.5; s02 <= 1.1; s02 += 0.05) {
        const moved = shifted(
          k,
          model.map((value) => s02 * value),
          e0,
        );
        best = Math.min(best, compareInR({ k, data: chi, model: moved, kWeight: 3, kMin: 3, kMax: 12, rMin: 1, rMax: 4 }).rFactor);
      }
    return best;
  };
  const [lowDose, one, two, room, three] = [
    'oxidase-low-dose.cif',
    'oxidase-model-one.xyz',
    'oxidase-model-two.xyz',
    'oxidase-room-temperature.pdb',
    'oxidase-model-three.xyz',
  ].map(distance);
  // Measured: 0.09, 0.05, 0.06 against 0.66, 1.34.
  for (const right of [lowDose!, one!, two!]) for (const wrong of [room!, three!]) expect(wrong).toBeGreaterThan(3 * right);
});

/** χ on a grid of 0.05 Å⁻¹ seen from an origin e0 eV lower, linearly between points. */
function shifted(k: Float64Array, chi: Float64Array, e0: number): Float64Array {
  return k.map((q) => {
    const x = Math.sqrt(Math.max(0, q * q - e0 / 3.81)) / 0.05;
    const j = Math.min(chi.length - 2, Math.floor(x));
    return chi[j]! + (x - j) * (chi[j + 1]! - chi[j]!);
  });
}
