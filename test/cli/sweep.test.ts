import { spawn } from 'node:child_process';
import { appendFileSync, copyFileSync, existsSync, mkdirSync, mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { beforeAll, describe, expect, test } from 'vitest';
import { ringtrue } from '../support/ringtrue.js';

const folder = mkdtempSync(join(tmpdir(), 'sweep-'));
const models = join(folder, 'models');
const data = resolve('demo-structures/redoxin-chi.dat');
const OPTIONS = ['--data', data, '--absorber', 'Fe', '--temperature', '15', '--max-legs', '2', '--radius', '4'];
const NAMES = ['a.xyz', 'b.xyz', 'c.xyz', 'd.xyz'];

interface Line {
  readonly file: string;
  readonly error?: string;
  readonly finding?: string;
}

/** Four tetrahedra of different size, one of them wrong, and a file that is none. */
beforeAll(() => {
  mkdirSync(models);
  const site = readFileSync('demo-structures/redoxin-site.xyz', 'utf8').split('\n');
  NAMES.forEach((name, i) => {
    const scaled = site.map((line, l) =>
      l < 2 ? line : line.replace(/-?\d+\.\d+/g, (x) => (Number(x) * (1 + 0.02 * (i - 1))).toFixed(4)),
    );
    writeFileSync(join(models, name), scaled.join('\n'));
  });
  writeFileSync(join(models, 'junk.pdb'), 'junk\n');
});

const sweep = (out: string, ...more: string[]) => ringtrue('sweep', models, ...OPTIONS, '--out', join(folder, out), ...more);
const linesOf = (out: string): Line[] =>
  readFileSync(join(folder, out, 'results.jsonl'), 'utf8')
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as Line)
    .sort((a, b) => (a.file < b.file ? -1 : 1));

test('every candidate gets a line, the bad one its error, and the ranking lists them all', () => {
  const { code, out, err } = sweep('one', '--jobs', '1');
  expect(code, err).toBe(0);
  const lines = linesOf('one');
  expect(lines.map(({ file }) => file)).toEqual([...NAMES, 'junk.pdb']);
  expect(lines.at(-1)!.error).toMatch(/neither XYZ/);
  expect(lines.filter(({ finding }) => finding !== undefined)).toHaveLength(4);
  expect(out).toContain('Consistency is not proof');
  const ranking = readFileSync(join(folder, 'one', 'ranking.csv'), 'utf8');
  for (const { file } of lines) expect(ranking).toContain(file);
});

test('any number of workers and any parts give the same lines', () => {
  sweep('two', '--jobs', '2');
  expect(linesOf('two')).toEqual(linesOf('one'));
  sweep('parts', '--part', '1/2', '--jobs', '1');
  expect(linesOf('parts').length).toBeLessThan(5);
  sweep('parts', '--part', '2/2', '--jobs', '1', '--resume');
  expect(linesOf('parts')).toEqual(linesOf('one'));
});

test('a run killed at work goes on without loss or repetition', async () => {
  const out = join(folder, 'killed');
  const child = spawn(process.execPath, ['packages/cli/dist/ringtrue.js', 'sweep', models, ...OPTIONS, '--out', out, '--jobs', '1']);
  await new Promise<void>((done) => {
    child.stderr.on('data', (text: Buffer) => {
      if (String(text).includes('2/5')) child.kill('SIGKILL');
    });
    child.on('exit', () => done());
  });
  const before = linesOf('killed');
  expect(before.length).toBeGreaterThanOrEqual(2);
  expect(before.length).toBeLessThan(5);
  // and a line cut short, as a full disk or a pulled plug leaves it
  appendFileSync(join(out, 'results.jsonl'), '{"file":"c.xyz","options":[],"find');
  expect(sweep('killed').code).toBe(2);
  const again = sweep('killed', '--resume');
  expect(again.code).toBe(0);
  expect(again.err).toMatch(/damaged/);
  expect(again.err).toContain(`${before.length} of 5 candidates are done already`);
  expect(linesOf('killed')).toEqual(linesOf('one'));
});

test('a candidate beyond its time is stopped, and the rest go on', () => {
  const slow = join(folder, 'slow');
  mkdirSync(slow);
  copyFileSync('demo-structures/tideglass.cif', join(slow, 'slow.cif'));
  copyFileSync(join(models, 'b.xyz'), join(slow, 'tiny.xyz'));
  const manifest = join(folder, 'slow.jsonl');
  writeFileSync(
    manifest,
    [
      { file: 'slow/slow.cif', absorber: 'Mn', data: resolve('demo-structures/tideglass-chi.dat'), radius: 9, 'max-legs': 4 },
      { file: 'slow/tiny.xyz', absorber: 'Fe', data },
    ]
      .map((row) => JSON.stringify(row))
      .join('\n'),
  );
  const { code } = ringtrue('sweep', manifest, '--max-legs', '2', '--out', join(folder, 'slow-out'), '--time-limit', '20', '--jobs', '2');
  expect(code).toBe(0);
  const [first, second] = linesOf('slow-out');
  expect(first!.error).toMatch(/stopped after 20 s/);
  expect(second!.finding).toBeDefined();
});

describe('refused in one line, exit code 2', () => {
  const manifest = (name: string, text: string): string => {
    const path = join(folder, name);
    writeFileSync(path, text);
    return path;
  };
  const cases: [string, () => string[], RegExp][] = [
    ['no such source', () => ['absent'], /absent: no such folder or manifest/],
    ['a folder without structures', () => ['packages/cli/src'], /no coordinate files/],
    ['a manifest without the column', () => [manifest('m1.csv', 'structure,data\nx,y\n')], /m1\.csv: line 1: a column named "file"/],
    ['an unknown column', () => [manifest('m2.csv', 'file,colour\na.xyz,red\n')], /m2\.csv: line 2: "colour" is no column/],
    ['a short row', () => [manifest('m3.csv', 'file,absorber\na.xyz\n')], /m3\.csv: line 2: 2 cells are wanted/],
    ['a broken object', () => [manifest('m4.jsonl', '{"file":"a"}\n{"file":\n')], /m4\.jsonl: line 2: no JSON object/],
    ['a polluting name', () => [manifest('m5.jsonl', '{"file":"a","__proto__":"x"}\n')], /"__proto__" is no column|has no data/],
    ['no data', () => [manifest('m6.csv', 'file\na.xyz\n'), '--absorber', 'Fe'], /a\.xyz has no data/],
    ['a part that is none', () => [models, ...OPTIONS, '--part', '3/2'], /a part like 3\/16/],
    ['a twin', () => [manifest('m7.csv', 'file\na.xyz\na.xyz\n'), ...OPTIONS], /listed twice/],
  ];
  test.each(cases)('%s', (_, args, message) => {
    const out = join(folder, 'never');
    const { code, err } = ringtrue('sweep', ...args(), '--out', out);
    expect(err).toMatch(message);
    expect(code).toBe(2);
    expect(existsSync(join(out, 'results.jsonl'))).toBe(false);
  });
});
