import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { ringtrue } from '../support/ringtrue.js';

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'ringtrue-sites-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

const STRUCTURES = 'test/external/structures';

test('a readable table with coordination, symmetry and valence', () => {
  const { code, out, err } = ringtrue('sites', 'demo-structures/tideglass.cif', '--radius', '2.5');
  expect(err).toBe('');
  expect(code).toBe(0);
  expect(out).toContain('Mn1: 100 % of the Mn signal, 6 bonded neighbours');
  expect(out).toContain('bond valence for Mn(4): ');
});

test('--json is the document of the contract', () => {
  const { code, out } = ringtrue('sites', `${STRUCTURES}/p01_plain.pdb`, '--absorber', 'Zn', '--json');
  expect(code).toBe(0);
  const result = JSON.parse(out);
  expect(result.structure).toMatchObject({ file: 'p01_plain.pdb', format: 'pdb', atoms: 4, frames: 1, spaceGroup: 'P 1 21 1' });
  expect(result.sites).toHaveLength(1);
  expect(result.sites[0]).toMatchObject({ element: 'Zn', weight: 1 });
  expect(result.sites[0].neighbours[0]).toMatchObject({ label: 'SG CYS A10', element: 'S', occupancy: 1, symmetry: 'x,y,z' });
  expect(result.warnings.map(({ code: warning }: { code: string }) => warning)).toContain('truncated-coordination');
});

test.each([
  [['nosuch.cif'], /nosuch\.cif: no such file/],
  [[`${STRUCTURES}/p30_empty.pdb`], /p30_empty\.pdb: the file is empty/],
  [[`${STRUCTURES}/p20_nan.pdb`], /p20_nan\.pdb: line 2, columns 31–38/],
  [[`${STRUCTURES}/p01_plain.pdb`, '--absorber', 'Cu'], /there is no Cu in the structure/],
  [[`${STRUCTURES}/p18_occupancy_sums.pdb`, '--strict'], /occupancy 0/],
  [['demo-structures/tideglass.cif', '--radius', '0'], /a distance above 0/],
])('%j: one line, exit code 2', (args, message) => {
  const { code, out, err } = ringtrue('sites', ...args);
  expect(code).toBe(2);
  expect(out).toBe('');
  expect(err).toMatch(message);
  expect(err).not.toMatch(/\n\s+at /);
});

test('control characters of a file do not reach the terminal', () => {
  const path = join(folder, 'escape.xyz');
  writeFileSync(path, '2\n\u001b[2J\u001b]0;owned\u0007 title\nFe 0 0 0\nO 2 0 0\n');
  const { code, out } = ringtrue('sites', path);
  expect(code).toBe(0);
  expect(out).not.toContain('\u001b');
  expect(out).toContain('title');
});
