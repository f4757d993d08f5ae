/** The page in real Chromium, served as `ringtrue serve` serves it. Any page error, console error or foreign request fails a test. */
import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { type Browser, chromium, type Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, expect, test } from 'vitest';

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

test('one press on the example leads to curves and shells', async () => {
  await page.getByRole('button', { name: 'Show the invented example' }).click();
  await page.getByRole('heading', { name: 'tideglass.cif' }).waitFor();
  expect(await page.locator('svg').count()).toBe(2);
  expect(await page.getByRole('rowheader', { name: 'Mn–O 1.89 Å' }).count()).toBe(1);
  // The curve moves: it is no flat line.
  const path = await page.locator('svg path.curve').first().getAttribute('d');
  expect(new Set(path!.split(/[ML]/).map((point) => point.split(',')[1])).size).toBeGreaterThan(100);
});

test('markup in a file is shown as text', async () => {
  const evil = '3\n<img src=x onerror="document.title=1"><script>document.title=2</script>\nMn 0 0 0\nO 1.9 0 0\nO -1.9 0 0\n';
  await page.setInputFiles('input[type=file]', { name: '<b>evil</b>.xyz', mimeType: 'text/plain', buffer: Buffer.from(evil) });
  await page.getByLabel('Absorber').fill('Mn');
  await page.getByRole('button', { name: 'Predict' }).click();
  await page.getByRole('heading', { name: '<b>evil</b>.xyz' }).waitFor();
  expect(await page.getByText('<script>document.title=2</script>').count()).toBe(1);
  expect(await page.title()).toBe('Ringtrue');
});

test('a file that is no structure, and an absorber that is not there, are told plainly', async () => {
  await page.setInputFiles('input[type=file]', { name: 'letter.txt', mimeType: 'text/plain', buffer: Buffer.from('Dear colleague,\n') });
  await page.getByLabel('Absorber').fill('Mn');
  await page.getByRole('button', { name: 'Predict' }).click();
  await expect.poll(() => page.getByRole('alert').textContent()).toContain('letter.txt: the file is neither XYZ');
  await page.getByRole('button', { name: 'Show the invented example' }).click();
  await page.getByRole('heading', { name: 'tideglass.cif' }).waitFor();
  await page.getByLabel('Absorber').fill('Fe');
  await page.getByRole('button', { name: 'Predict' }).click();
  await expect.poll(() => page.getByRole('alert').textContent()).toContain('there is no Fe');
});

test('the keyboard alone reaches the example', async () => {
  for (let i = 0; i < 3; i++) {
    await page.keyboard.press('Tab');
    if (await page.getByRole('button', { name: 'Show the invented example' }).evaluate((button) => button.matches(':focus'))) break;
  }
  await page.keyboard.press('Enter');
  await page.getByRole('heading', { name: 'tideglass.cif' }).waitFor();
});

test('a run is cancelled by its button and by another file, and the next one works', async () => {
  await page.getByLabel('Radius').fill('9');
  await page.getByLabel('Radius').blur();
  await page.getByRole('button', { name: 'Show the invented example' }).click();
  await page.getByRole('button', { name: 'Cancel' }).click();
  await page.getByRole('button', { name: 'Predict' }).waitFor();
  expect(await page.locator('svg').count()).toBe(0);
  await page.getByRole('button', { name: 'Predict' }).click();
  const other = '3\nother\nMn 0 0 0\nO 1.9 0 0\nO -1.9 0 0\n';
  await page.setInputFiles('input[type=file]', { name: 'other.xyz', mimeType: 'text/plain', buffer: Buffer.from(other) });
  await page.getByRole('button', { name: 'Predict' }).click();
  await page.getByRole('heading', { name: 'other.xyz' }).waitFor();
});

test('a worker that cannot be loaded is told, not waited for', async () => {
  await page.route('**/worker*.js', (route) => route.abort());
  await page.getByRole('button', { name: 'Show the invented example' }).click();
  await expect.poll(() => page.getByRole('alert').textContent()).toContain('reload the page');
  faults.length = 0; // the failed request itself is logged by the browser
});
