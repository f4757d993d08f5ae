/** The finding in the page, in real Chromium, as `ringtrue serve` serves it. */
import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { type Browser, chromium, type Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, expect, test } from 'vitest';

/** ms: several judgements on a machine with other things to do. */
const PATIENCE = 180_000;

let server: ChildProcess;
let address = '';
let browser: Browser;
let page: Page;
const faults: string[] = [];

beforeAll(async () => {
  const executablePath = process.env['CHROMIUM'] ?? '/usr/bin/chromium';
  if (!existsSync(executablePath))
    throw new Error(`no Chromium at ${executablePath}: install Debian's package chromium, or name it in CHROMIUM`);
  server = spawn(process.execPath, ['packages/cli/dist/ringtrue.js', 'serve', '--port', '0'], { stdio: ['ignore', 'pipe', 'inherit'] });
  address = await new Promise((resolve) => {
    server.stdout!.on('data', (chunk: Buffer) => {
      const found = /http:\S+/.exec(chunk.toString());
      if (found) resolve(found[0]);
    });
  });
  browser = await chromium.launch({
    executablePath,
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      '--disable-dev-shm-usage',
    ],
  });
});
afterAll(async () => {
  await browser?.close();
  server?.kill();
});
beforeEach(async () => {
  faults.length = 0;
  page = await browser.newPage({ viewport: { width: 1280, height: 800 } });
  page.on('pageerror', (error) => faults.push(`page error: ${error.message}`));
  page.on('console', (message) => {
    if (message.type() === 'error') faults.push(`console: ${message.text()}`);
  });
  page.on('request', (request) => {
    if (!request.url().startsWith(address) && !/^(data|blob):/.test(request.url())) faults.push(`request to ${request.url()}`);
  });
  await page.goto(address);
});
afterEach(async () => {
  await page.close();
  expect(faults).toEqual([]);
});

test(
  'one press judges the invented oxidase: four findings, and the overlong one is shown with its distances',
  async () => {
    await page.getByRole('button', { name: 'Judge the invented oxidase' }).click();
    await page.getByRole('heading', { name: /oxidase-room-temperature\.pdb: inconsistent/ }).waitFor({ timeout: PATIENCE });
    await page.getByText('Distances of the structure are longer').first().waitFor();
    await page.getByText('Consistency is not proof').first().waitFor();
    expect(await page.locator('figure svg').count()).toBeGreaterThanOrEqual(5);
    const card = page.getByRole('button', { name: /oxidase-low-dose\.cif/ }).first();
    expect(await card.textContent()).toContain('consistent');
    await card.click();
    await page.getByRole('heading', { name: /oxidase-low-dose\.cif: consistent/ }).waitFor();
    expect(
      await page
        .getByRole('button', { name: /oxidase-model-three\.xyz/ })
        .first()
        .textContent(),
    ).toContain('inconsistent');
  },
  PATIENCE,
);

test(
  'own files: structure and χ(k) go in, a wrong window is told, the right one gives a finding',
  async () => {
    const [structures, scans] = [page.locator('input[type=file]').nth(0), page.locator('input[type=file]').nth(1)];
    await structures.setInputFiles('demo-structures/redoxin-site.xyz');
    await scans.setInputFiles('demo-structures/redoxin-chi.dat');
    await page.getByLabel('Absorber').fill('Fe');
    await page.getByLabel('Window in k').fill('3,19');
    await page.getByRole('button', { name: 'Judge', exact: true }).click();
    await expect.poll(() => page.getByRole('alert').textContent(), { timeout: PATIENCE }).toContain('must lie inside the data');
    await page.getByLabel('Window in k').fill('3,12');
    await page.getByRole('button', { name: 'Judge', exact: true }).click();
    await page.getByRole('heading', { name: /redoxin-site\.xyz: / }).waitFor({ timeout: PATIENCE });
  },
  PATIENCE,
);
