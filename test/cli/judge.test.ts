import { mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { chiSquaredAbove } from '../../packages/core/src/numerics/chi-squared.js';
import { normalDeviates } from '../../packages/core/src/numerics/random.js';
import { ringtrue } from '../support/ringtrue.js';

const SITE = 'demo-structures/redoxin-site.xyz';
const folder = mkdtempSync(join(tmpdir(), 'judge-'));
const data = join(folder, 'invented.chi');

/** Invented data: our own prediction with noise, so that the right finding is known. */
beforeAll(() => {
  const { k, chi } = JSON.parse(
    ringtrue('predict', SITE, '--absorber', 'Fe', '--temperature', '10', '--thermal', 'springs', '--e0', '2', '--json').out,
  );
  const normal = normalDeviates(4);
  const rows = (k as number[]).flatMap((value, i) =>
    value >= 0.5 && value <= 13 ? [`${value.toFixed(2)} ${chi[i] + 0.0005 * normal()}`] : [],
  );
  writeFileSync(data, `# invented\n# k chi\n${rows.join('\n')}\n`);
});

const judge = (...more: string[]) =>
  ringtrue('judge', SITE, '--data', data, '--absorber', 'Fe', '--temperature', '10', '--k-range', '3,12', ...more);

test('one JSON document with the stable names', () => {
  const { out: stdout, code: status } = judge('--json', '--rivals');
  expect(status).toBe(0);
  const { evidence, candidates, groups } = JSON.parse(stdout);
  expect(Object.keys(candidates[0])).toEqual(
    expect.arrayContaining([
      'file',
      'finding',
      'sentence',
      'x',
      'independentPoints',
      'p',
      'rFactor',
      'parameters',
      'overlength',
      'valence',
      'notExcluded',
      'logEvidence',
    ]),
  );
  const [candidate] = candidates;
  expect(candidate.finding).toBe('consistent');
  expect(candidate.p).toBeCloseTo(chiSquaredAbove(candidate.x, candidate.independentPoints), 9);
  expect(evidence[0].independentPoints).toBeCloseTo((2 * 9 * 3) / Math.PI, 9);
  for (const { prior, value, strain, name } of candidate.parameters) {
    if (name === 'energy-origin') expect(strain).toBeCloseTo((value - prior.mean) / prior.sd, 9);
  }
  expect(candidate.overlength).toMatchObject({ verdict: 'none' });
  expect(candidate.overlength.shells[0]).toHaveProperty('deltaR');
  expect(groups[0].files).toEqual(['redoxin-site.xyz']);
});

test('in words: the finding, the distances, the rivals, the caution', () => {
  const { out: stdout } = judge('--rivals');
  expect(stdout).toContain('redoxin-site.xyz is consistent with the data');
  expect(stdout).toContain('Not excluded by these data');
  expect(stdout).toContain('Consistency is not proof');
  expect(stdout).not.toMatch(/prove[sd]/);
});

test('--out writes the result and its tables, and the same again from the same input', () => {
  const out = join(folder, 'finding');
  expect(judge('--out', out).code).toBe(0);
  expect(readdirSync(join(out, 'tables')).sort()).toEqual([
    '1-paths.csv',
    'candidates.csv',
    'disorder.csv',
    'distances.csv',
    'rivals.csv',
    'unknowns.csv',
    'valence.csv',
  ]);
  const first = JSON.parse(readFileSync(join(out, 'result.json'), 'utf8'));
  judge('--out', out);
  const second = JSON.parse(readFileSync(join(out, 'result.json'), 'utf8'));
  expect(second.candidates).toEqual(first.candidates);
});

describe('refused in one line, exit code 2', () => {
  const cases: [string, string[], RegExp][] = [
    ['no such data', [SITE, '--data', 'absent.xdi', '--absorber', 'Fe'], /absent\.xdi: no such file/],
    [
      'candidate without the absorber',
      ['demo-structures/tideglass.cif', '--data', data, '--absorber', 'Fe'],
      /tideglass\.cif: there is no Fe/,
    ],
    [
      'window beyond the data',
      [SITE, '--data', data, '--absorber', 'Fe', '--k-range', '3,16'],
      /must lie inside the data, which run from 0\.50 to 13\.00/,
    ],
    [
      'too few independent points',
      [SITE, '--data', data, '--absorber', 'Fe', '--k-range', '3,5', '--r-range', '1,2'],
      /at least 4 are needed/,
    ],
    ['falling range', [SITE, '--data', data, '--absorber', 'Fe', '--k-range', '9,3'], /two rising numbers/],
    [
      'options that do not pair',
      [SITE, '--data', data, '--data', data, '--data', data, '--absorber', 'Fe', '--absorber', 'Fe'],
      /once for each of the 3 --data; got 2/,
    ],
    ['structure given as data', [SITE, '--data', SITE, '--absorber', 'Fe'], /redoxin-site\.xyz/],
  ];
  test.each(cases)('%s', (_, args, message) => {
    const { out: stdout, err: stderr, code: status } = ringtrue('judge', ...args);
    expect(status).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toMatch(message);
    expect(stderr.trim().split('\n').length).toBeLessThanOrEqual(2);
  });
});
