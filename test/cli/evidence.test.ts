import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { readXdi } from '../../packages/core/src/evidence/index.js';
import { expectNear } from '../support/expect-near.js';
import { ringtrue } from '../support/ringtrue.js';
import { asColumns, syntheticScan } from '../support/synthetic-scan.js';

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'ringtrue-test-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

function file(name: string, content: string): string {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
}
const SHELLS = [{ n: 6, R: 2.0, sigma2: 0.005 }];
const scan = (seed: number, shift = 0) => asColumns(syntheticScan('Fe', { shells: SHELLS, noise: 0.001, seed, shift }));

test('reduce prints what it chose and why', () => {
  const { code, out, err } = ringtrue('reduce', file('a.dat', scan(1)), '--element', 'Fe');
  expect(err).toBe('');
  expect(code).toBe(0);
  expect(out).toContain('steepest rise near the tabulated Fe K edge, 7112 eV');
  expect(out).toContain('guessed: energy = column 1 (energy), mu = column 2 (mu)');
  expect(out).toContain('background below');
});

test('reduce --json is the contract on standard output and nothing else', () => {
  const { code, out } = ringtrue('reduce', file('b.dat', scan(2)), '--element', 'Fe', '--pre', '-140,-35', '--post', '120,700', '--json');
  expect(code).toBe(0);
  const result = JSON.parse(out);
  expect(result.k).toHaveLength(result.chi.length);
  expect(result.sigmaChi).toHaveLength(result.chi.length);
  expectNear(result.e0, 7112, { abs: 0.5, label: 'E0, eV' });
  expectNear(result.edgeStep, 1, { abs: 0.015, label: 'edge step' });
  expect(result.noise.epsilonK).toBeGreaterThan(0);
  expect(result.noise.kMaxUseful).toBeGreaterThan(10);
  expect(result.preEdge.range).toEqual([-140, -35]);
  expect(result.postEdge.range).toEqual([120, 700]);
  expect(result.background.curve).toHaveLength(result.energyEv.length);
  expect(result.flagged).toEqual([]);
});

test('reduce --out writes XDI that reads again as the same chi', () => {
  const out = join(folder, 'reduced');
  const { code } = ringtrue('reduce', file('c.dat', scan(3)), file('d.dat', scan(4, 0.2)), '--element', 'Fe', '--out', out);
  expect(code).toBe(0);
  expect(readdirSync(out).sort()).toEqual(['absorption.xdi', 'chi.xdi', 'result.json', 'tables']);
  const result = JSON.parse(readFileSync(join(out, 'result.json'), 'utf8'));
  const written = readXdi(readFileSync(join(out, 'chi.xdi'), 'utf8'));
  expect(Array.from(written.table.columns[1]!)).toEqual(result.chi.map((x: number) => Number(x.toPrecision(12))));
  const again = JSON.parse(ringtrue('reduce', join(out, 'chi.xdi'), '--json').out);
  for (let i = 0; i < again.k.length; i++) expectNear(again.chi[i], result.chi[i], { abs: 1e-11, label: `chi at k ${again.k[i]}` });
  expect(ringtrue('reduce', join(out, 'absorption.xdi'), '--json').code).toBe(0);
});

test('reduce leaves a point out when asked for, and corrects a thick sample of stated composition', () => {
  const rows = scan(5).split('\n');
  const [energy, mu] = rows[250]!.split(' ').map(Number);
  rows[250] = `${energy} ${mu! + 0.3}`;
  const path = file('spike.dat', rows.join('\n'));
  expect(ringtrue('reduce', path, '--element', 'Fe').out).toMatch(/line 251: the point at .* it was kept/);
  const { code, out } = ringtrue('reduce', path, '--element', 'Fe', '--leave-out-flagged');
  expect(code).toBe(0);
  expect(out).toMatch(/line 251: the point at .* it was left out/);
  expect(out).toContain('1 left out, 0 kept');
  const fluorescence = rows.map((row, i) => (i === 0 ? '# energy_eV i0 ifluor' : row.replace(' ', ' 1 '))).join('\n');
  const thick = ringtrue('reduce', file('thick.dat', fluorescence), '--element', 'Fe', '--self-absorption', 'Fe:0.7,O:0.3,in=30,out=60');
  expect(thick.code).toBe(0);
  expect(thick.out).toMatch(/chi raised by 3\d\d % at the edge/);
});

test('dose finds a drift and says what to keep', () => {
  const names = Array.from({ length: 6 }, (_, s) => file(`dose${s}.dat`, scan(50 + s, 0.3 * s)));
  const { code, out } = ringtrue('dose', ...names, '--element', 'Fe', '--json');
  expect(code).toBe(0);
  const result = JSON.parse(out);
  expectNear(result.driftPerScan.value, 0.3, { abs: 0.02, label: 'drift, eV per scan' });
  expect(result.edgeEnergy).toHaveLength(6);
  expect(result.keep).toEqual([1]);
  expect(result.components).toBeGreaterThan(1);
  expect(ringtrue('dose', ...names, '--element', 'Fe').out).toMatch(/The edge drifts up by 0\.\d+/);
});

test.each([
  ['a missing file', () => ['reduce', join(folder, 'none.dat')], /none\.dat: no such file/],
  ['a wrong element', () => ['reduce', file('w.dat', scan(1)), '--element', 'Cu'], /Cu K edge lies at 8978.9 eV, the scan runs from/],
  ['a neighbour in the table', () => ['reduce', file('w.dat', scan(1)), '--element', 'Mn', '--edge', 'K'], /Mn K edge/],
  ['a broken row', () => ['reduce', file('x.dat', `${scan(1)}7500 abc\n`), '--element', 'Fe'], /x\.dat: .*line \d+, .*"abc"/s],
  ['three unnamed columns', () => ['reduce', file('y.dat', '7000 1 2\n7001 1 2\n7002 1 2\n')], /cannot be told apart.*state them/],
  [
    'too short a scan',
    () => ['reduce', file('z.dat', scan(1).split('\n').slice(0, 160).join('\n')), '--element', 'Fe'],
    /5 Å⁻¹ are needed|points between/,
  ],
  ['a range the wrong way round', () => ['reduce', file('w.dat', scan(1)), '--pre', '-30,-150'], /two rising numbers/],
  [
    'a composition without the absorber',
    () => ['reduce', file('w.dat', scan(1)), '--element', 'Fe', '--self-absorption', 'TiO2'],
    /"TiO2" holds no Fe/,
  ],
  ['a half sample', () => ['reduce', file('w.dat', scan(1)), '--element', 'Fe', '--self-absorption', 'total=3'], /a formula like Fe2O3/],
  ['one scan for dose', () => ['dose', file('w.dat', scan(1)), '--element', 'Fe'], /two scans or more/],
  ['a bad XDI', () => ['reduce', 'test/external/xdi/bad05_ragged_rows.xdi'], /line 25: every row needs 4 numbers/],
] as [string, () => string[], RegExp][])('%s: one line, exit code 2', (_, args, message) => {
  const { code, out, err } = ringtrue(...args());
  expect(out).toBe('');
  expect(err).toMatch(message);
  expect(err).not.toMatch(/at .*\.js:/);
  expect(code).toBe(2);
});
