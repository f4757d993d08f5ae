/** The report of a judgement in real Chromium: alone, without network, readable by all, and on paper. */
import { existsSync, mkdtempSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import axe from 'axe-core';
import { type Browser, chromium, type Page } from 'playwright-core';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { ringtrue } from '../support/ringtrue.js';

const folder = join(mkdtempSync(join(tmpdir(), 'report-')), 'finding');
const foreign: string[] = [];
let browser: Browser;
let page: Page;

beforeAll(async () => {
  const data = [1, 2, 3].map((n) => `demo-structures/redoxin-scan-${n}.dat`).join(',');
  const judged = ringtrue(
    'judge',
    'demo-structures/redoxin-site.xyz',
    '--data',
    data,
    '--absorber',
    'Fe',
    '--temperature',
    '15',
    '--rivals',
    '--out',
    folder,
    '--png',
    '300',
  );
  expect(judged.code, judged.err).toBe(0);
  browser = await chromium.launch({
    executablePath: process.env['CHROMIUM'] ?? '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu'],
  });
  page = await browser.newPage({ viewport: { width: 900, height: 900 } });
  page.on('request', (request) => {
    if (!request.url().startsWith('file://')) foreign.push(request.url());
  });
  page.on('pageerror', (error) => foreign.push(error.message));
  await page.context().setOffline(true);
  await page.goto(pathToFileURL(join(folder, 'report.html')).href);
});
afterAll(() => browser?.close());

test('it asks for nothing outside itself', async () => {
  await page.waitForLoadState('networkidle');
  expect(foreign).toEqual([]);
  expect(await page.locator('script, link, img, iframe').count()).toBe(0);
});

test('all sections a referee looks for are there', async () => {
  const headings = await page.getByRole('heading').allTextContents();
  for (const wanted of [
    'Finding',
    'What was assumed',
    'What moved',
    'Figures',
    'Disorder',
    'Paths',
    'What is not excluded',
    'Reduction',
    'Reproducibility',
    'Methods',
    'References',
  ])
    expect(
      headings.some((text) => text.startsWith(wanted)),
      `${wanted} in ${headings.join('; ')}`,
    ).toBe(true);
  const words = (await page.locator('main').textContent())!;
  expect(words).toContain('Consistency is not proof');
  expect(words).toMatch(/SHA-256 [0-9a-f]{64}/);
  expect(words).not.toMatch(/undefined|NaN|\[object/);
});

test('no plot is wider than its column, on a screen or a small one', async () => {
  for (const width of [900, 400]) {
    await page.setViewportSize({ width, height: 900 });
    const overflow = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
    expect(overflow, `at ${width} px`).toBeLessThanOrEqual(0);
  }
  await page.setViewportSize({ width: 900, height: 900 });
});

test('axe finds nothing to object to (WCAG 2.2 A and AA)', async () => {
  await page.evaluate(axe.source);
  const violations = await page.evaluate(async () => {
    const { axe: inPage } = window as unknown as {
      axe: { run(options: object): Promise<{ violations: { id: string; nodes: { html: string }[] }[] }> };
    };
    const result = await inPage.run({ runOnly: ['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa', 'best-practice'] });
    return result.violations.map(({ id, nodes }) => `${id}: ${nodes[0]!.html.slice(0, 160)}`);
  });
  expect(violations).toEqual([]);
});

test.each(['A4', 'Letter'] as const)('it prints to %s: no figure cut by a page, none too wide', async (format) => {
  // Width between the margins (16 mm each): A4 210 mm, Letter 8.5 inches; 96 px an inch.
  const inner = ((format === 'A4' ? 210 : 215.9) - 32) * (96 / 25.4);
  await page.emulateMedia({ media: 'print' });
  await page.setViewportSize({ width: Math.floor(inner), height: 900 });
  const wide = await page.evaluate(() =>
    [...document.querySelectorAll('svg, table')]
      .filter((e) => e.getBoundingClientRect().right > window.innerWidth + 1)
      .map((e) => e.outerHTML.slice(0, 120)),
  );
  expect(wide).toEqual([]);
  // A figure as high as a page could not be kept whole.
  const tallest = await page.evaluate(() =>
    Math.max(...[...document.querySelectorAll('figure')].map((e) => e.getBoundingClientRect().height)),
  );
  expect(tallest).toBeLessThan((279.4 - 36) * (96 / 25.4));
  const pdf = (await page.pdf({ format, preferCSSPageSize: false })).toString('latin1');
  const pages = pdf.match(/\/Type\s*\/Page\b(?!s)/g)!.length;
  expect(pages).toBeGreaterThanOrEqual(5);
  expect(pages).toBeLessThanOrEqual(16);
  await page.emulateMedia({ media: null });
  await page.setViewportSize({ width: 900, height: 900 });
});

test('figures are files of their own, as SVG without custom properties and as PNG of 8 cm at 300 dpi', () => {
  const names = readdirSync(join(folder, 'figures'));
  const drawings = names.filter((name) => name.endsWith('.svg'));
  expect(drawings.length).toBeGreaterThanOrEqual(10);
  for (const name of drawings) {
    expect(readFileSync(join(folder, 'figures', name), 'utf8')).not.toContain('var(');
    const png = readFileSync(join(folder, 'figures', name.replace('.svg', '.png')));
    expect(png.subarray(1, 4).toString()).toBe('PNG');
    expect(png.readUInt32BE(16)).toBe(Math.round((8 / 2.54) * 300)); // IHDR width
    expect(png.subarray(37, 41).toString()).toBe('pHYs'); // PNG third edition, 11.3.4.3: pixels per metre
    expect(png.readUInt32BE(41)).toBe(11811);
  }
});

test('Markdown names only figures that are there, and BibTeX has what is cited', () => {
  const markdown = readFileSync(join(folder, 'report.md'), 'utf8');
  const links = [...markdown.matchAll(/!\[[^\]]*\]\(([^)]+)\)/g)].map(([, link]) => link!);
  expect(links.length).toBeGreaterThan(5);
  for (const link of links) expect(existsSync(join(folder, link)), link).toBe(true);
  const entries = readFileSync(join(folder, 'references.bib'), 'utf8').match(/^@article\{\w+,$/gm)!;
  const cited = new Set([...markdown.matchAll(/\\\[(\d+(?:, \d+)*)\\\]/g)].flatMap(([, list]) => list!.split(', ')));
  expect(entries.length).toBe(cited.size);
});

test('a second run keeps what else lies in the folder and leaves nothing half-written', () => {
  writeFileSync(join(folder, 'my-notes.txt'), 'mine');
  const again = ringtrue('predict', 'demo-structures/redoxin-site.xyz', '--absorber', 'Fe', '--out', folder);
  expect(again.code, again.err).toBe(0);
  expect(readFileSync(join(folder, 'my-notes.txt'), 'utf8')).toBe('mine');
  expect(JSON.parse(readFileSync(join(folder, 'result.json'), 'utf8'))).toHaveProperty('paths');
  expect(statSync(join(folder, 'report.html')).size).toBeGreaterThan(10_000);
  expect(readdirSync(join(folder, '..'))).toEqual(['finding']);
});
