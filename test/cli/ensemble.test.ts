// `ringtrue predict --ensemble` as a user runs it: frames from harmonic springs of the invented redoxin site.
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { harmonicFrame, springNetwork } from '../../packages/core/src/disorder/index.js';
import { elementBySymbol } from '../../packages/core/src/elements/index.js';
import { readStructure } from '../../packages/core/src/structure/index.js';
import { seededRandom } from '../support/random.js';
import { ringtrue } from '../support/ringtrue.js';

let folder = '';
let frames: string[] = [];
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'ringtrue-ensemble-'));
  const { atoms } = readStructure(readFileSync('demo-structures/redoxin-site.xyz', 'utf8'));
  const body = { atoms: atoms.map(({ element, position }) => ({ element, position, mass: elementBySymbol(element).mass })) };
  const model = springNetwork(body, { temperature: 20 });
  const random = seededRandom(31);
  frames = Array.from(
    { length: 150 },
    (_, f) =>
      `${atoms.length}\nframe ${f + 1}\n${harmonicFrame(model, random)
        .map(({ element, position }) => `${element} ${position.map((x) => x.toFixed(5)).join(' ')}`)
        .join('\n')}\n`,
  );
});
afterAll(() => rmSync(folder, { recursive: true }));
const file = (name: string, content: string): string => {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
};
const average = (path: string, ...more: string[]) => ringtrue('predict', path, '--absorber', 'Fe', '--k-max', '10', '--ensemble', ...more);

test('the same result to the last bit for any number of workers', () => {
  const path = file('all.xyz', frames.join(''));
  const [one, three] = ['1', '3'].map((jobs) => JSON.parse(average(path, '--jobs', jobs, '--json').out));
  expect(three.chi).toEqual(one.chi);
  expect(three.paths).toEqual(one.paths);
  expect(three.ensemble).toEqual(one.ensemble);
  expect(one.ensemble).toMatchObject({ frames: 150, multipleScattering: 'expanded' });
  expect(one.absorbers[0].thermal.model).toBe('ensemble');
});

test('the table names frames, the error of the expansion and the change by renewed phase shifts', () => {
  const { code, out } = average(file('some.xyz', frames.slice(0, 60).join('')), '--renew', '30');
  expect(code).toBe(0);
  expect(out).toMatch(/60 frames averaged, error of χ from 2 parts/);
  expect(out).toMatch(/renewed every 30 frames: k²χ changes by \d+\.\d\d % rms/);
  expect(out).toMatch(/C4 \(10⁻⁶ Å⁴\)/);
  expect(out).toContain('never proof');
});

test('models of a PDB entry are frames', () => {
  const model = (n: number, x: number) =>
    `MODEL ${String(n).padStart(8)}\nHETATM    1 FE    FE A   1       0.000   0.000   0.000  1.00 10.00          FE\nHETATM    2  S   SUL A   2    ${x.toFixed(3).padStart(8)}   0.000   0.000  1.00 10.00           S\nENDMDL\n`;
  const { code, out } = average(file('models.pdb', `${model(1, 2.2)}${model(2, 2.3)}${model(3, 2.4)}END\n`), '--json');
  expect(code).toBe(0);
  const [path] = JSON.parse(out).paths;
  expect(path.cumulants.mean).toBeCloseTo(2.3, 6);
  expect(path.cumulants.variance).toBeCloseTo(0.01, 6);
});

test('what cannot be averaged is said in one line with file, frame and atom', () => {
  const other = frames[2]!.replace('\nS ', '\nSe ');
  for (const [name, content, words, more] of [
    ['other.xyz', frames[0]! + frames[1]! + other, /other\.xyz: frame 3 \(line 47\): atom 2 is Se, in frame 1 it is S/, []],
    ['one.xyz', frames[0]!, /one\.xyz: an ensemble needs at least 2 frames, got 1/, []],
    ['cut.xyz', `${frames[0]}${frames[1]!.split('\n').slice(0, 9).join('\n')}\n`, /cut\.xyz: line 24: 21 atoms are announced/, []],
    ['good.xyz', frames.slice(0, 3).join(''), /--jobs should be a whole number from 1 to 256, got 0/, ['--jobs', '0']],
    ['good.xyz', frames.slice(0, 3).join(''), /leave --thermal out/, ['--thermal', 'debye']],
  ] as const) {
    const { code, err, out } = average(file(name, content), ...more);
    expect(err).toMatch(words);
    expect(err.trim().split('\n')).toHaveLength(1);
    expect([code, out]).toEqual([2, '']);
  }
  const { code, err } = ringtrue('predict', file('good.xyz', frames[0]!), '--absorber', 'Fe', '--jobs', '2');
  expect([code, err.trim()]).toEqual([2, 'ringtrue: --jobs goes with --ensemble']);
});
