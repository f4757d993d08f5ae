/** README and guide: what is made is up to date, every link leads somewhere, the caution is said. */
import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { DOCS, madePages } from '../support/make-docs.js';

const PAGES = [
  'README.md',
  'DEVELOPERS.md',
  'demo-structures/README.md',
  ...readdirSync(DOCS)
    .filter((f) => f.endsWith('.md'))
    .map((f) => `packages/cli/docs/${f}`),
];
const ROOT = join(DOCS, '../../..');

test.each([...madePages()])('%s is as the program makes it (else: npm run docs)', (name, text) => {
  expect(readFileSync(DOCS + name, 'utf8')).toBe(text);
});

test('every export of the library is described, with its declaration', () => {
  const text = madePages().get('library.md')!;
  for (const name of ['predict', 'judge', 'reduce', 'readStructure', 'findSites', 'siteDrawing', 'judgementReport'])
    expect(text).toContain(`### ${name}\n`);
  expect(text).not.toMatch(/```typescript\n\s*```/);
});

/** Anchors as the usual Markdown viewers make them: lower case, spaces to hyphens, other signs left out. */
const anchors = (text: string): Set<string> =>
  new Set(
    [...text.matchAll(/^#+ (.*)$/gm)].map(([, title]) =>
      title!
        .toLowerCase()
        .replace(/[^\p{L}\p{N} -]/gu, '')
        .replaceAll(' ', '-'),
    ),
  );

describe.each(PAGES)('%s', (page) => {
  const text = readFileSync(join(ROOT, page), 'utf8').replace(/^```[\s\S]*?^```/gm, '');
  test('links lead to files and headings that are there', () => {
    for (const [, link] of text.matchAll(/\]\(([^)\s]+)\)/g)) {
      if (/^https?:/.test(link!)) continue;
      const [path, anchor] = link!.split('#') as [string, string?];
      const target = path === '' ? join(ROOT, page) : join(ROOT, dirname(page), path);
      expect(existsSync(target), `${page}: ${link}`).toBe(true);
      if (anchor) expect([...anchors(readFileSync(target, 'utf8'))], `${page}: ${link}`).toContain(anchor);
    }
  });
});

test('README has the two commands of a fresh machine, the caution and the licence', () => {
  const text = readFileSync(join(ROOT, 'README.md'), 'utf8');
  for (const words of ['npm ci && npm run demo', 'npm ci && npm test', 'never proof', 'radiation-safety', 'MIT licence'])
    expect(text).toContain(words);
});
