// Files below 1 MB made to cost time or memory, each once the cause of a hang or of an error that was none of ours. What is
// refused says so; nothing takes longer than some seconds of a busy machine (2 s are asked for of a quiet one).
import { type ColumnRoles, describeSites, InputError, ReadError, readScan, readStructure, readXdi, reduce } from '@ringtrue/core';
import { expect, test } from 'vitest';
import { writeFolder } from '../../packages/cli/src/files.js';

const times = (count: number, line: (i: number) => string): string => Array.from({ length: count }, (_, i) => line(i)).join('');
const sites = (text: string): unknown => describeSites(readStructure(text), { radius: 4 }).sites.length;
const chi = (text: string, columns?: ColumnRoles): unknown =>
  reduce([readScan(text, { element: 'Fe', ...(columns ? { columns } : {}) })]).k.length;

const iron = (i: number, x: number, y: number, z: number, occupancy = '  1.00'): string =>
  `HETATM${String(i % 100000).padStart(5)} FE   LIG A${String(i % 10000).padStart(4)}    ${[x, y, z].map((v) => v.toFixed(3).padStart(8)).join('')}${occupancy} 20.00          FE\n`;
const lattice = (i: number, step: number): [number, number, number] => [
  step * (i % 23) + 0.3 * Math.abs(Math.sin(i * i)),
  step * (Math.floor(i / 23) % 23) + 0.3 * Math.abs(Math.sin(0.7 * i * i)),
  step * Math.floor(i / 529) + 0.3 * Math.abs(Math.sin(1.3 * i * i)),
];
const crystal = (rows: string, operators: string, edge: number): string =>
  `data_t\n${['a', 'b', 'c'].map((axis) => `_cell_length_${axis} ${edge}\n`).join('')}${['alpha', 'beta', 'gamma'].map((angle) => `_cell_angle_${angle} 90\n`).join('')}` +
  `loop_\n_space_group_symop_operation_xyz\n${operators}loop_\n_atom_site_label\n_atom_site_type_symbol\n_atom_site_fract_x\n_atom_site_fract_y\n_atom_site_fract_z\n${rows}`;
const COUNT = 12_000;

test.each<[name: string, work: () => unknown, refusal: RegExp | undefined]>([
  ['all atoms on one spot', () => sites(times(4500, (i) => iron(i, 1, 1, 1))), /more than \d+ atoms lie within 4 Å/],
  ['atoms a hundredth there on one spot', () => sites(times(COUNT, (i) => iron(i, 1, 1, 1, '  0.01'))), /lie within 0.8 Å/],
  ['absorbers by the thousand', () => sites(times(COUNT, (i) => iron(i, ...lattice(i, 2.6)))), /more than the 5000 that are listed/],
  [
    'a crystal of them',
    () => sites(`CRYST1   60.000   60.000   60.000  90.00  90.00  90.00 P 1\n${times(5500, (i) => iron(i, ...lattice(i, 2.6)))}`),
    /5000/,
  ],
  [
    'bonds stated by the thousand',
    () =>
      sites(
        times(2000, (i) => iron(i, ...lattice(i, 2.6))) +
          times(12_000, (i) => `CONECT${[i, i + 1, i + 7, 7 * i].map((s) => String(s % 2000).padStart(5)).join('')}\n`),
      ),
    undefined,
  ],
  [
    'operators by the thousand',
    () =>
      sites(
        crystal(
          'Fe1 Fe 0 0 0\n',
          times(40_000, (i) => `'x+${i}/40001,y,z'\n`),
          1e5,
        ),
      ),
    /more than 1000 different symmetry operators/,
  ],
  ['an operator of a megabyte', () => sites(crystal('Fe1 Fe 0 0 0\n', `'${'1'.repeat(900_000)},z,x'\n`, 9)), /no symmetry operator/],
  ['a comment of one word', () => sites(`1\n${'a'.repeat(900_000)}\nFe 0 0 0\n`), undefined],
  ['blanks before a comma', () => chi(`1${' '.repeat(900_000)},2\n`), /two points or more/],
  ['columns by the thousand', () => chi(`${'1 '.repeat(400_000)}\n${'2 '.repeat(400_000)}\n`), /columns are more than the 1000/],
  [
    'points by the thousand',
    () => chi(times(48_000, (i) => `${(6900 + 0.02 * i).toFixed(2)} ${Math.atan(0.02 * i - 212).toFixed(6)}\n`)),
    /more than the 20000 of one scan/,
  ],
  [
    'k without end',
    () => chi('0 0\n1e9 1\n2e9 2\n'.concat(times(30, (i) => `${3e9 + i} 1\n`)), { k: 1, chi: 2 }),
    /beyond the 40 that are treated/,
  ],
  ['k below 0', () => chi('-4 0\n0 0\n', { k: 1, chi: 2 }), /a range of 4/],
  ['chi of two huge points', () => chi('0.5 -0.25\n10 2e72\n', { k: 1, chi: 2 }), /20 are needed/],
  [
    'chi beyond arithmetic',
    () =>
      chi(
        times(300, (i) => `${i / 20} ${i % 2 ? '' : '-'}1e308\n`),
        { k: 1, chi: 2 },
      ),
    /too large or too small/,
  ],
  [
    'fields by the thousand',
    () => readXdi(`# XDI/1.0\n${times(30_000, (i) => `# A.b${i}: 1\n`)}# ---\n# energy mu\n7000 1\n7001 2\n`).fields.length,
    undefined,
  ],
])('%s', (_, work, refusal) => {
  const start = process.cpuUsage();
  let message: string | undefined;
  try {
    work();
  } catch (error) {
    if (!(error instanceof ReadError || error instanceof InputError)) throw error;
    ({ message } = error);
    expect(message.length).toBeLessThanOrEqual(600);
  }
  if (refusal) expect(message).toMatch(refusal);
  else expect(message).toBeUndefined();
  const { user, system } = process.cpuUsage(start);
  expect((user + system) / 1e6).toBeLessThan(15);
});

test('a file of dummy atoms alone holds no structure', () => {
  expect(() => readStructure('1\n\nX 0 0 0\n')).toThrow(/line 1: all atoms of the first frame are dummies/);
});

test('names that objects have of their own are names like others', () => {
  expect(() => readScan('# __proto__ mu\n1 2\n2 3\n', { columns: { energy: 1, mu: 2 } })).not.toThrow();
  const text = '# XDI/1.0\n# Column.1: energy constructor\n# Column.2: mu\n# ---\n7000 1\n7001 2\n';
  const scan = readScan(text, { element: 'Fe' });
  expect(scan.kind).toBe('absorption'); // its unit is unknown, so eV by magnitude
  expect(scan.guess).toMatch(/taken as eV/);
  expect(Object.keys({})).toEqual([]);
});

test.each(['../beside.txt', '/etc/x', 'a/../../b', 'a\\b', 'a\0b', '', '.hidden/../x', '-\n'])('no result is written to %j', (name) => {
  expect(() => writeFolder('/nowhere', new Map([[name, '']]))).toThrow(/no name for a result|cannot write/);
});
