import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { VERSION } from '../../packages/core/src/version.js';
import { expectNear } from '../support/expect-near.js';
import { ringtrue } from '../support/ringtrue.js';

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'ringtrue-test-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

const DEMO = 'demo-structures/tideglass.cif';

/** A file in the test's own folder. */
function file(name: string, content: string | Uint8Array): string {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
}

/** A simple cubic crystal of one element; the cell length is any text. */
const cubic = (element: string, a: string, angle = '90') =>
  `data_x\n_cell_length_a ${a}\n_cell_length_b ${a}\n_cell_length_c ${a}\n_cell_angle_alpha ${angle}\n_cell_angle_beta ${angle}\n_cell_angle_gamma ${angle}\nloop_\n_space_group_symop_operation_xyz\nx,y,z\nloop_\n_atom_site_label\n_atom_site_type_symbol\n_atom_site_fract_x\n_atom_site_fract_y\n_atom_site_fract_z\n${element}1 ${element} 0 0 0\n`;

test('the demo prints a table, the plot and the caution', () => {
  const { code, out, err } = ringtrue('predict', DEMO, '--absorber', 'Mn', '--temperature', '15', '--debye-temperature', '500');
  expect(err).toBe('');
  expect(code).toBe(0);
  expect(out).toContain('Mn–O 1.89 Å');
  expect(out).toContain('never proof');
});

test('--json is one document of the contract on standard output and nothing else', () => {
  const { code, out } = ringtrue('predict', DEMO, '--absorber', 'Mn', '--json', '--path-signals');
  expect(code).toBe(0);
  const result = JSON.parse(out);
  expect(result.program).toEqual({ name: 'ringtrue', version: VERSION });
  expectNear(result.k[1] - result.k[0], 0.05, { abs: 1e-12, label: 'k step' });
  expect(result.chi).toHaveLength(result.k.length);
  expectNear(
    result.paths.reduce((sum: number, { share }: { share: number }) => sum + share, 0),
    1,
    { abs: 1e-9, label: 'sum of shares' },
  );
  // Handbook coordination of a rutile-type crystal: six oxygens, two metals along c, eight over the corner.
  expect(result.shells.slice(0, 2).map(({ element, count }: { element: string; count: number }) => [element, count])).toEqual([
    ['O', 6],
    ['Mn', 2],
  ]);
  // The contract's formula rebuilds χ from the paths' own amplitudes and phases; λ read off the table at its grid points.
  const { s02 } = result.options;
  const at = result.k.findIndex((value: number) => Math.abs(value - 8) < 1e-9);
  const lambda = result.scattering.meanFreePath[result.scattering.k.findIndex((value: number) => Math.abs(value - 8) < 1e-6)];
  const rebuilt = result.paths.reduce(
    (
      sum: number,
      p: { k: number[]; amplitude: number[]; phase: number[]; degeneracy: number; halfLength: number; sigma2: { thermal: number } },
    ) => {
      const i = p.k.findIndex((value) => Math.abs(value - 8) < 1e-9);
      const R = p.halfLength;
      return (
        sum +
        ((p.degeneracy * s02 * p.amplitude[i]!) / (8 * R * R)) *
          Math.exp(-2 * p.sigma2.thermal * 64 - (2 * R) / lambda) *
          Math.sin(16 * R + p.phase[i]!)
      );
    },
    0,
  );
  expectNear(rebuilt, result.chi[at], { abs: 1e-9, label: 'χ(8 Å⁻¹) from amplitudes and phases' });
});

test('--out writes every file whole', () => {
  const out = join(folder, 'out');
  expect(ringtrue('predict', DEMO, '--absorber', 'Mn', '--out', out).code).toBe(0);
  const names = readdirSync(out, { recursive: true }).map(String).sort();
  expect(names).toEqual([
    'figures',
    'figures/chi-R.svg',
    'figures/chi-k.svg',
    'figures/parts-by-order.svg',
    'figures/parts-by-shell.svg',
    'figures/site-1.svg',
    'references.bib',
    'report.html',
    'report.md',
    'result.json',
    'tables',
    'tables/chi.csv',
    'tables/paths.csv',
    'tables/shells.csv',
    'tables/transform.csv',
  ]);
  expect(readFileSync(join(out, 'report.html'), 'utf8')).toContain('proves no structure');
  expect(JSON.parse(readFileSync(join(out, 'result.json'), 'utf8')).k.length).toBeGreaterThan(100);
});

test('a structure turned, moved and listed in another order gives the same χ', () => {
  const xyz = (atoms: readonly (readonly [string, number, number, number])[]) =>
    `${atoms.length}\ninvented\n${atoms.map((a) => a.join(' ')).join('\n')}\n`;
  const atoms = [
    ['Fe', 0, 0, 0],
    ['S', 1.33, 1.31, 1.34],
    ['S', -1.32, -1.33, 1.33],
    ['S', -1.34, 1.32, -1.31],
    ['S', 1.31, -1.34, -1.33],
    ['C', 2.6, 2.4, 0.4],
    ['C', -2.5, -2.6, 0.5],
  ] as const;
  const [c, s] = [Math.cos(0.7), Math.sin(0.7)];
  const moved = [...atoms].reverse().map(([e, x, y, z]) => [e, c * x - s * y + 3, s * x + c * y - 1, z + 10] as const);
  const chi = (path: string) => JSON.parse(ringtrue('predict', path, '--absorber', 'Fe', '--json').out).chi as number[];
  const first = chi(file('a.xyz', xyz(atoms)));
  const second = chi(file('b.xyz', xyz(moved)));
  // 1e-12 Å of rounding in the coordinates; sums in another order.
  for (const [i, value] of first.entries()) expectNear(second[i]!, value, { abs: 1e-8, label: `χ at point ${i}` });
});

const bad: readonly (readonly [what: string, args: () => string[], message: RegExp])[] = [
  ['no such file', () => [join(folder, 'absent.cif')], /absent\.cif: no such file/],
  ['a folder', () => [folder], /is a folder/],
  ['an empty file', () => [file('empty.cif', '')], /empty\.cif: the file is empty/],
  ['the wrong format', () => [file('letter.txt', 'Dear colleague,\nhere is no structure.\n')], /neither XYZ/],
  ['a binary file', () => [file('x.bin', new Uint8Array([1, 0, 2, 0, 255]))], /binary/],
  ['an absorber that is not there', () => [DEMO, '--absorber', 'Fe'], /no Fe in the structure.*Mn/],
  ['an absorber too light for the edge', () => [DEMO, '--absorber', 'O'], /O.*edge/],
  ['atoms on top of each other', () => [file('close.xyz', '3\n\nMn 0 0 0\nO 1.9 0 0\nO 2.1 0 0\n')], /0\.2/],
  ['a coordinate that is no number', () => [file('nan.xyz', '2\n\nMn 0 0 0\nO NaN 0 0\n')], /line 4/],
  ['a cell of zero volume', () => [file('flat.cif', cubic('Mn', '3.0', '0'))], /cell/],
  ['a cell length of zero', () => [file('nil.cif', cubic('Mn', '0.0'))], /cell/],
  ['a negative temperature', () => [DEMO, '--temperature', '-5'], /temperature must lie between 0 and 3000 K, got -5/],
  ['a temperature in words', () => [DEMO, '--temperature', 'cold'], /a number is wanted/],
  ['a radius beyond reason', () => [DEMO, '--radius', '500'], /radius must lie between 1 and 12 Å/],
  ['an unknown edge', () => [DEMO, '--edge', 'M5'], /Allowed choices are K/],
  ['a mistyped option', () => [DEMO, '--temprature', '10'], /Did you mean --temperature/],
  ['an isolated atom', () => [file('alone.xyz', '1\n\nMn 0 0 0\n')], /neighbour/],
  ['a folder that cannot be written', () => [DEMO, '--out', join(DEMO, 'below')], /cannot write/],
];
for (const [what, args, message] of bad) {
  test(`${what}: one clear line, exit code 2, no stack trace`, () => {
    const given = args();
    const { code, out, err } = ringtrue('predict', ...given, ...(given.includes('--absorber') ? [] : ['--absorber', 'Mn']));
    expect(err).toMatch(message);
    expect(code).toBe(2);
    expect(err).not.toMatch(/^\s+at /m);
    expect(err.trim().split('\n').length).toBeLessThanOrEqual(4);
    expect(out).toBe('');
  });
}

test('control characters of a file never reach the terminal', () => {
  const { out, err } = ringtrue('predict', file('esc.xyz', '2\n\u001b[31mred\u0007\nMn 0 0 0\nO 1.9 0 0\n'), '--absorber', 'Mn');
  // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is looked for
  expect(out + err).not.toMatch(/[\u0000-\u0009\u000b-\u001f\u007f]/);
});

test('a hundred thousand atoms are computed or refused clearly', () => {
  const side = 47;
  const lines: string[] = [];
  for (let i = 0; i < side ** 3; i++) {
    const [x, y, z] = [i % side, Math.floor(i / side) % side, Math.floor(i / side ** 2)];
    lines.push(`${i === 51888 ? 'Mn' : 'O'} ${(2.1 * x).toFixed(3)} ${(2.1 * y).toFixed(3)} ${(2.1 * z).toFixed(3)}`);
  }
  const { code, out } = ringtrue('predict', file('large.xyz', `${lines.length}\ninvented\n${lines.join('\n')}\n`), '--absorber', 'Mn');
  expect(code).toBe(0);
  expect(out).toContain('Mn–O 2.10 Å');
});

test('help of every command has examples', () => {
  for (const command of ['predict', 'sites', 'reduce', 'dose', 'serve']) {
    const { code, out } = ringtrue(command, '--help');
    expect(code).toBe(0);
    expect(out).toMatch(/Examples?:/);
  }
});

test('the version is that of the package', () => {
  expect(ringtrue('--version').out.trim()).toBe(JSON.parse(readFileSync('packages/cli/package.json', 'utf8')).version);
});
