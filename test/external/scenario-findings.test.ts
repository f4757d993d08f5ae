/**
 * The invented scenario judged as its README says it is right to find. The spectra come from hidden ensembles averaged frame by frame,
 * through absorption, background and noise: nothing of the judge's disorder went into them.
 */
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { type CandidateJudgement, type Evidence, judge, readScan, readStructure, reduce } from '../../packages/core/src/index.js';

const text = (name: string): string => readFileSync(fileURLToPath(new URL(`../../demo-structures/${name}`, import.meta.url)), 'utf8');
const evidence = (absorber: string, ...files: string[]): Evidence => ({
  file: files.join(', '),
  reduction: reduce(
    files.map((file) => readScan(text(file))),
    { element: absorber },
  ),
  absorber,
  temperature: 15,
});
const judgeAll = (names: readonly string[], data: Evidence): Map<string, CandidateJudgement> => {
  const candidates = names.map((file) => ({ file, structure: readStructure(text(file), { fileName: file }) }));
  const { candidates: judged } = judge(candidates, [data], { bands: false }, { version: 'test' });
  return new Map(judged.map((candidate) => [candidate.file, candidate]));
};

describe('lanternweed oxidase', () => {
  const names = ['room-temperature.pdb', 'low-dose.cif', 'model-one.xyz', 'model-two.xyz', 'model-three.xyz'].map(
    (name) => `oxidase-${name}`,
  );
  const found = judgeAll(names, evidence('Mn', 'oxidase-scan-1.xdi', 'oxidase-scan-2.xdi', 'oxidase-scan-3.xdi'));

  test('the crystal reduced by its beam is rejected, and its distances are called too long by what they are', () => {
    const { finding, overlength } = found.get('oxidase-room-temperature.pdb')!;
    expect(['in-tension', 'inconsistent']).toContain(finding);
    expect(overlength.verdict).toBe('overlong');
    expect(overlength.stretch.value).toBeLessThan(-0.015);
    const first = overlength.shells.find(({ label }) => label.includes('first shell'))!;
    const metal = overlength.shells.find(({ label }) => label === 'Mn–Mn')!;
    // truth (README): bonds 0.08 to 0.15 Å, Mn–Mn 0.12 Å longer than true
    expect(first.deltaR + 2 * first.sd).toBeGreaterThan(-0.15);
    expect(first.deltaR - 2 * first.sd).toBeLessThan(-0.08);
    expect(Math.abs(metal.deltaR + 0.12)).toBeLessThan(2 * metal.sd);
  });

  test.each(['oxidase-low-dose.cif', 'oxidase-model-one.xyz'])('%s is consistent, and no lengthening is claimed', (name) => {
    const { finding, overlength } = found.get(name)!;
    expect(['consistent', 'consistent-under-strain']).toContain(finding);
    expect(overlength.verdict).toBe('none');
  });

  test('the rival with its histidines on one metal is not excluded', () => {
    expect(found.get('oxidase-model-two.xyz')!.finding).toMatch(/^consistent/);
  });

  test('the wrong site is inconsistent', () => {
    expect(found.get('oxidase-model-three.xyz')!.finding).toBe('inconsistent');
  });
});

test('lanternweed redoxin is consistent with its crystal structure', () => {
  const found = judgeAll(['redoxin.pdb'], evidence('Fe', 'redoxin-scan-1.dat', 'redoxin-scan-2.dat', 'redoxin-scan-3.dat'));
  expect(found.get('redoxin.pdb')!.finding).toMatch(/^consistent/);
});

test('tideglass is consistent with its crystal structure', () => {
  const found = judgeAll(['tideglass.cif'], evidence('Mn', 'tideglass-scan-1.xdi', 'tideglass-scan-2.xdi', 'tideglass-scan-3.xdi'));
  expect(found.get('tideglass.cif')!.finding).toMatch(/^consistent/);
});
