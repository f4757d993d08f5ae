/**
 * The judgement on measured standards, reduced from their raw scans: the true crystal is consistent; stretched or compressed by 1.5 %,
 * with the wrong neighbour, or with a shell missing it is not. And where the model error comes from: the η at which X of the true crystal
 * equals its number of independent points.
 */
import { describe, expect, test } from 'vitest';
import { type Evidence, type JudgeOptions, judge, readScan, readStructure, reduce, type Structure } from '../../packages/core/src/index.js';
import { MODEL_ERROR } from '../../packages/core/src/judgement/model-error.js';
import { CHROMIA, COPPER, cifOf, measuredFile, SPHALERITE, type Standard, skipped } from '../support/measured.js';

const CASES: readonly {
  readonly standard: Standard;
  readonly scans: readonly string[];
  readonly wrong: readonly [from: string, to: string];
}[] = [
  { standard: COPPER, scans: ['cu-foil-10K.xdi'], wrong: ['Cu', 'Al'] },
  { standard: CHROMIA, scans: [1, 2, 3].map((n) => `cr2o3-100K-scan${n}.xdi`), wrong: ['O', 'S'] },
  { standard: SPHALERITE, scans: [1, 2, 3].map((n) => `zns-295K-scan${n}.xdi`), wrong: ['S', 'O'] },
];

const scaled = (standard: Standard, factor: number): Standard => ({
  ...standard,
  cell: standard.cell.map((x, i) => (i < 3 ? factor * x : x)),
});

/** Every neighbour of one element exchanged; of a metal all atoms but the one at the origin of the cell, which stays the absorber. */
function exchanged(structure: Structure, from: string, to: string, absorber: string): Structure {
  if (from !== absorber)
    return { ...structure, atoms: structure.atoms.map((atom) => (atom.element === from ? { ...atom, element: to } : atom)) };
  const places: [number, number, number][] = [
    [0, 0, 0],
    [0.5, 0.5, 0],
    [0.5, 0, 0.5],
    [0, 0.5, 0.5],
  ];
  const rows = places.map((place, i) => `${i === 0 ? absorber : to}${i} ${i === 0 ? absorber : to} ${place.join(' ')}`);
  return readStructure(cifOf({ ...COPPER, group: 'P 1', atoms: rows }));
}

/** Many judgements in one test, on machines with other things to do. */
const PATIENCE = 400_000;

describe.each(CASES)('$standard.file', { timeout: PATIENCE }, ({ standard, scans, wrong }) => {
  const texts = scans.map(measuredFile);
  const isHere = texts.every((text) => text !== undefined);
  if (!isHere) console.log(skipped(standard.file));
  const reduction = isHere ? reduce(texts.map((text) => readScan(text!))) : undefined;
  const evidence = (): Evidence => ({
    file: standard.file,
    reduction: reduction!,
    absorber: standard.absorber,
    temperature: standard.temperature,
  });
  const options: JudgeOptions = { debyeTemperature: standard.debye, bands: false };
  const judgeOne = (structure: Structure, more: JudgeOptions = {}) =>
    judge([{ file: 'crystal', structure }], [evidence()], { ...options, ...more }, { version: '' }).candidates[0]!;
  const crystal = readStructure(cifOf(standard));

  test.skipIf(!isHere)('the true crystal is consistent, its distances right within 0.5 %', () => {
    const found = judgeOne(crystal);
    console.log(
      `${standard.file}: ${found.sentence} stretch ${(100 * found.overlength.stretch.value).toFixed(2)} ± ${(100 * found.overlength.stretch.sd).toFixed(2)} %`,
    );
    expect(['consistent', 'consistent-under-strain']).toContain(found.finding);
    expect(Math.abs(found.overlength.stretch.value)).toBeLessThan(0.005);
  });

  test.skipIf(!isHere).each([1.015, 0.985])('scaled by %d it is not', (factor) => {
    const found = judgeOne(readStructure(cifOf(scaled(standard, factor))));
    expect(['in-tension', 'inconsistent']).toContain(found.finding);
    expect(found.overlength.verdict).toBe(factor > 1 ? 'overlong' : 'too-short');
  });

  test.skipIf(!isHere)('with the wrong neighbour it is not', () => {
    expect(['in-tension', 'inconsistent']).toContain(judgeOne(exchanged(crystal, ...wrong, standard.absorber)).finding);
  });

  test.skipIf(!isHere)('with the next shell of metals missing it is not', () => {
    const { rivals } = judgeOne(crystal, { rivals: true });
    const missing = rivals.find(({ kind }) => kind === 'metal-removed')!;
    expect(missing.p).toBeLessThan(0.05);
  });

  test.skipIf(!isHere)('the model error it asks for is within the one used', () => {
    const excess = (modelError: number): number => {
      const { x, independentPoints } = judgeOne(crystal, { modelError });
      return x - independentPoints;
    };
    let [low, high] = [0.005, 0.3];
    while (high - low > 0.004) {
      const middle = (low + high) / 2;
      if (excess(middle) > 0) low = middle;
      else high = middle;
    }
    console.log(`${standard.file}: X equals its independent points at a model error of ${high.toFixed(3)}`);
    expect(low).toBeLessThanOrEqual(MODEL_ERROR);
  });
});
