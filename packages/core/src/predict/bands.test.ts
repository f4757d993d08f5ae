import { expect, test } from 'vitest';
import { readStructure } from '../structure/index.js';
import { predict } from './predict.js';

/** An invented Fe–S tetrahedron; the format decides what precision is assumed of its coordinates. */
const XYZ = '5\ninvented\nFe 0 0 0\nS 1.33 1.33 1.33\nS -1.33 -1.33 1.33\nS -1.33 1.33 -1.33\nS 1.33 -1.33 -1.33\n';
const PDB = XYZ.trim()
  .split('\n')
  .slice(2)
  .map((line, i) => {
    const [element, ...xyz] = line.split(' ');
    const fields = xyz.map((value) => Number(value).toFixed(3).padStart(8)).join('');
    return `HETATM${String(i + 1).padStart(5)} ${element!.toUpperCase().padStart(2)}${String(i).padEnd(2)} FES A   1    ${fields}  1.00 10.00          ${element!.toUpperCase().padStart(2)}`;
  })
  .join('\n');

const run = (text: string) =>
  predict(
    readStructure(text),
    { absorber: 'Fe', bands: true, maxLegs: 2, temperature: 20, debyeTemperature: 350 },
    { file: 'x', version: '' },
  );
const width = ({ bands }: ReturnType<typeof run>, from: number, to: number): number => {
  let sum = 0;
  bands!.k.forEach((k, i) => {
    if (k >= from && k <= to) sum += bands!.high68[i]! - bands!.low68[i]!;
  });
  return sum;
};

test('the 95 % band holds the 68 % band, and the prediction lies in it nearly everywhere', () => {
  const prediction = run(XYZ);
  const { k, low95, low68, high68, high95 } = prediction.bands!;
  let inside = 0;
  let all = 0;
  for (let i = 0; i < k.length; i++) {
    expect(low95[i]!).toBeLessThanOrEqual(low68[i]!);
    expect(low68[i]!).toBeLessThanOrEqual(high68[i]!);
    expect(high68[i]!).toBeLessThanOrEqual(high95[i]!);
    if (k[i]! < 3) continue;
    all++;
    const chi = prediction.chi[2 * i]!;
    if (chi >= low95[i]! && chi <= high95[i]!) inside++;
  }
  // The prediction is the mode, not the median: extra static disorder only ever damps, so at high k crests may stand out.
  expect(inside / all).toBeGreaterThan(0.8);
});

test('the same input gives the same bands', () => {
  expect(run(XYZ).bands).toEqual(run(XYZ).bands);
});

test('coordinates known less well widen the band where k is large', () => {
  // 0.15 Å an axis for a PDB without statistics, 0.015 Å for a model: at k = 8 Å⁻¹ phases of ±3.4 against ±0.34 rad.
  expect(width(run(PDB), 6, 10)).toBeGreaterThan(1.15 * width(run(XYZ), 6, 10));
});
