import { describe, expect, test } from 'vitest';
import { inventedReduction, redoxinLike } from '../../../../test/support/judging.js';
import { readStructure } from '../structure/index.js';
import type { Structure } from '../structure/types.js';
import { judge } from './judge.js';
import type { Evidence, JudgeOptions } from './types.js';

const truth = redoxinLike();
const reduction = inventedReduction(truth);
const evidence: Evidence = { file: 'invented.chi', reduction, absorber: 'Fe', temperature: 10, kRange: [3, 12], rRange: [1, 3.5] };
const options: JudgeOptions = { radius: 4.5, thermal: 'springs', bands: false };
const context = { version: 'test' };
const judgeOne = (structure: Structure, more: Partial<Evidence> = {}, changed: JudgeOptions = {}) =>
  judge([{ file: 'candidate.xyz', structure }], [{ ...evidence, ...more }], { ...options, ...changed }, context).candidates[0]!;

describe('findings', () => {
  const right = judgeOne(truth);

  test('the structure the data were made of is consistent, without strain, and its distances are right', () => {
    expect(right.finding).toBe('consistent');
    expect(right.overlength.verdict).toBe('none');
    expect(Math.abs(right.overlength.shells[0]!.deltaR)).toBeLessThan(0.005);
    expect(right.caution).toMatch(/not proof/);
    expect(right.sentence).not.toMatch(/proves/);
  });

  test('a first shell 0.08 Å too long is found, with sign and size', () => {
    const long = judgeOne(redoxinLike(0.08));
    expect(['in-tension', 'inconsistent']).toContain(long.finding);
    expect(long.overlength.verdict).toBe('overlong');
    const [first] = long.overlength.shells;
    expect(Math.abs(first!.deltaR + 0.08)).toBeLessThan(2 * first!.sd);
    expect(long.overlength.stretch.value).toBeLessThan(0);
    expect(long.overlength.sentence).toMatch(/in no order of likelihood/);
    expect(right.logEvidence - long.logEvidence).toBeGreaterThan(Math.log(10));
  });

  test('oxygen in the place of sulfur is inconsistent', () => {
    const wrong: Structure = { ...truth, atoms: truth.atoms.map((atom) => (atom.element === 'S' ? { ...atom, element: 'O' } : atom)) };
    expect(judgeOne(wrong).finding).toBe('inconsistent');
  });

  test('poor data decide nothing, whatever p says', () => {
    const poor = judgeOne(truth, { reduction: inventedReduction(truth, { noise: 0.3, kMax: 9 }), kRange: [3, 8] });
    expect(poor.p).toBeGreaterThan(0.05);
    expect(poor.finding).toBe('undecided');
    expect(poor.sentence).toMatch(/^Undecided/);
  });

  test('coordinates hardly known decide nothing either, and the posterior is then drawn', () => {
    const vague = judgeOne(truth, {}, { coordinateSd: 0.3 });
    expect(vague.finding).toBe('undecided');
    expect(vague.posterior.method).toBe('sampled');
  });
});

describe('what must not matter', () => {
  const reference = judgeOne(truth);
  const near = (found: typeof reference, tolerance: number, stretch = 1e-5): void => {
    expect(Math.abs(found.x - reference.x)).toBeLessThan(tolerance);
    expect(Math.abs(found.overlength.stretch.value - reference.overlength.stretch.value)).toBeLessThan(stretch);
    expect(found.finding).toBe(reference.finding);
  };

  test('the order of the atoms', () => {
    near(judgeOne({ ...truth, atoms: [...truth.atoms].reverse() }), 1e-3);
  });

  test('rotation and shift of the whole', () => {
    const moved = truth.atoms.map((atom) => {
      const [x, y, z] = atom.position;
      return { ...atom, position: [y + 3, z - 1, x + 7] as const };
    });
    near(judgeOne({ ...truth, atoms: moved }), 1e-3);
  });

  test('a longer k grid than the window needs', () => {
    const { chi, k, sigmaChi } = reduction;
    const n = k.findIndex((value) => value > 12.6);
    const shorter = { ...reduction, k: k.slice(0, n), chi: chi.slice(0, n), sigmaChi: sigmaChi.slice(0, n) };
    // the background removal sees its end: X moves a little
    near(judgeOne(truth, { reduction: shorter }), 0.5, 3e-4);
  });

  test('the same data set given twice is twice the evidence, not another best point', () => {
    const twice = judge([{ file: 'a', structure: truth }], [evidence, evidence], options, context).candidates[0]!;
    expect(twice.independentPoints).toBeCloseTo(2 * reference.independentPoints, 9);
    expect(twice.finding).toBe('consistent');
  });
});

describe('rivals and ranking', () => {
  const both = judge(
    [
      { file: 'long.xyz', structure: redoxinLike(0.08) },
      { file: 'right.xyz', structure: truth },
    ],
    [evidence],
    { ...options, rivals: true },
    context,
  );

  test('candidates are ranked by evidence', () => {
    expect(both.groups[0]!.files).toEqual(['right.xyz']);
    expect(both.groups.flatMap(({ files }) => files).sort()).toEqual(['long.xyz', 'right.xyz']);
  });

  test('every kind of rival the site allows is made, and excluded ones are not listed', () => {
    const { rivals, notExcluded } = both.candidates[1]!;
    const kinds = new Set(rivals.map(({ kind }) => kind));
    expect([...kinds].sort()).toEqual(['light-heavy-exchange', 'neighbour-added', 'neighbour-removed', 'stretch']);
    for (const { label, excluded, p } of rivals) {
      expect(excluded).toBe(p < 0.05);
      expect(notExcluded.includes(label)).toBe(!excluded);
    }
    expect(rivals.find(({ kind }) => kind === 'light-heavy-exchange')!.logEvidence).toBeLessThan(-Math.log(10));
  });

  test('two temperatures of one sample are judged together', () => {
    const warm = { ...evidence, file: 'warm.chi', reduction: inventedReduction(truth, { temperature: 150, seed: 3 }), temperature: 150 };
    const joint = judge([{ file: 'right.xyz', structure: truth }], [evidence, warm], options, context);
    expect(joint.evidence).toHaveLength(2);
    expect(joint.candidates[0]!.finding).toBe('consistent');
    expect(joint.candidates[0]!.comparisons).toHaveLength(2);
  });
});

test('two absorbers of one sample are judged together and share the distance between them', () => {
  // an invented pair of metals under oxygens
  const pair = readStructure(
    '9\ninvented\nFe 0 0 0\nMn 3.1 0 0\nO 1.55 1.05 0\nO 1.55 -1.05 0\nO -1.2 0 1.6\nO -1.2 0 -1.6\nO 4.3 0 1.7\nO 4.3 0 -1.7\nO 0 0.2 -2.3\n',
  );
  const of = (absorber: 'Fe' | 'Mn'): Evidence => ({
    ...evidence,
    file: absorber,
    absorber,
    reduction: inventedReduction(pair, { absorber }),
  });
  const joint = judge([{ file: 'pair.xyz', structure: pair }], [of('Fe'), of('Mn')], options, context).candidates[0]!;
  expect(joint.finding).toMatch(/^consistent/);
  expect(joint.parameters.filter(({ name }) => name === 'energy-origin')).toHaveLength(2);
  const between = joint.parameters.filter(({ name, shell }) => name === 'scatterer-shift' && / at 3\.10 Å/.test(shell));
  expect(between).toHaveLength(1);
  expect(joint.overlength.shells.filter(({ label }) => label.includes('first shell'))).toHaveLength(2);
});

describe('refused, with what would be right', () => {
  test('candidate without the absorber, by name', () => {
    expect(() => judgeOne(readStructure('2\nx\nMn 0 0 0\nO 0 0 1.9\n'))).toThrow(/candidate\.xyz: .*there is no Fe/);
  });
  test('data of another element or edge', () => {
    expect(() => judgeOne(truth, { reduction: { ...reduction, element: 'Mn' } })).toThrow(/says it is of Mn; the absorber asked for is Fe/);
    expect(() => judgeOne(truth, { reduction: { ...reduction, edge: 'L3' }, edge: 'K' })).toThrow(/L3 edge; K was asked for/);
  });
  test('nothing to judge', () => {
    expect(() => judge([], [evidence], options, context)).toThrow(/candidate structure/);
    expect(() => judge([{ file: 'a', structure: truth }], [], options, context)).toThrow(/measured spectrum/);
  });
  test('a window in R beyond the longest path', () => {
    expect(() => judgeOne(truth, { rRange: [1, 6] })).toThrow(/beyond the longest path of 4.5/);
  });
});
