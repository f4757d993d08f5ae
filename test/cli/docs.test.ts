/** Every command and every code sample of README and guide, run as a reader would run it, in a folder of its own. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, describe, expect, test } from 'vitest';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const DOCS = 'packages/cli/docs/';
const folder = mkdtempSync(join(tmpdir(), 'docs-'));
symlinkSync(join(ROOT, 'demo-structures'), join(folder, 'demo-structures'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Commands that a test inside `npm test` cannot run again: it would never end. What they start is tested elsewhere. */
const NOT_HERE = new Set(['npm ci && npm run demo', 'npm ci && npm test', 'npm ci && npm run build', 'npm run build', 'npm start']);

const blocks = (page: string, language: string): string[] =>
  [...readFileSync(join(ROOT, page), 'utf8').matchAll(/^```(\w+)\n([\s\S]*?)^```/gm)].flatMap(([, own, body]) =>
    own === language ? [body!] : [],
  );
const pages = [
  'README.md',
  ...readdirSync(join(ROOT, DOCS))
    .filter((name) => name.endsWith('.md'))
    .map((name) => DOCS + name),
];

const commands = pages.flatMap((page) =>
  blocks(page, 'sh')
    .flatMap((body) => body.trim().split('\n'))
    .filter((line) => !NOT_HERE.has(line))
    .map((line) => [page, line] as const),
);

test('there are commands to run, in the guide and in the README', () => {
  expect(commands.length).toBeGreaterThan(10);
});

test.each(commands)('%s: %s', (_page, line) => {
  const words = line.replace(/^npm run --silent ringtrue -- /, 'ringtrue ').split(' ');
  expect(words[0], 'a command of a page is one of Ringtrue').toBe('ringtrue');
  expect(line, 'words that a shell would change').not.toMatch(/[*$`"'\\|><;&]/);
  const { status, stdout, stderr } = spawnSync(process.execPath, [join(ROOT, 'packages/cli/dist/ringtrue.js'), ...words.slice(1)], {
    cwd: folder,
    encoding: 'utf8',
    maxBuffer: 64e6,
  });
  expect(status, stderr).toBe(0);
  expect(stdout.length).toBeGreaterThan(100);
});

describe('code samples', () => {
  const samples = pages.flatMap((page) => blocks(page, 'ts').map((body, i) => [page, i, body] as const));
  test.each(samples)('%s, sample %i', (_page, i, body) => {
    const file = join(ROOT, `docs-sample-${process.pid}-${i}.mts`);
    writeFileSync(file, body);
    try {
      const { status, stdout, stderr } = spawnSync(process.execPath, ['--import', 'tsx', '--conditions=source', file], {
        cwd: ROOT,
        encoding: 'utf8',
      });
      expect(status, stderr).toBe(0);
      expect(stdout).toMatch(/evidence|tell/);
    } finally {
      rmSync(file, { force: true });
    }
  });
});
