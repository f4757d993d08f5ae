import fc from 'fast-check';
import { expect, test } from 'vitest';
import { readColumns } from './columns.js';
import { readScan } from './read-scan.js';
import { parseColumnRoles } from './roles.js';

const rows = (n: number, f: (i: number) => (number | string)[], delimiter = ' ') =>
  Array.from({ length: n }, (_, i) => f(i).join(delimiter)).join('\n');

test('any valid table comes back as it was written', () => {
  const number = fc.oneof(fc.integer({ min: -1e6, max: 1e6 }), fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e12, max: 1e12 }));
  const table = fc
    .integer({ min: 2, max: 6 })
    .chain((columns) => fc.array(fc.array(number, { minLength: columns, maxLength: columns }), { minLength: 2, maxLength: 30 }));
  const style = fc.record({
    delimiter: fc.constantFrom(' ', '\t', ',', ', ', ';', '   '),
    mark: fc.constantFrom('#', '%', ';', '!'),
    end: fc.constantFrom('\n', '\r\n', '\r'),
    blank: fc.boolean(),
  });
  fc.assert(
    fc.property(table, style, (values, { delimiter, mark, end, blank }) => {
      const head = [`${mark} invented`, `${mark} a b`];
      const body = values.map((row) => row.map(String).join(delimiter));
      const { table: read, diagnostics } = readColumns([...head, ...body].join(blank ? end + end : end) + end);
      expect(diagnostics).toEqual([]);
      expect(read.columns.map((column) => Array.from(column))).toEqual(values[0]!.map((_, j) => values.map((row) => row[j]! + 0)));
      expect(Array.from(read.lines)).toEqual(values.map((_, i) => (blank ? 2 * (i + 2) : i + 2) + 1));
    }),
    { numRuns: 150, seed: 4 },
  );
});

test('a broken cell is named with its line, or its row is left out and listed; never read as a number', () => {
  const broken = fc.constantFrom('NaN', 'inf', '-', '***', 'abc', '1.2.3', '0x10', '12e', '--', '1_000');
  fc.assert(
    fc.property(fc.integer({ min: 1, max: 98 }), broken, (at, cell) => {
      const text = rows(100, (i) => [7000 + i, i === at ? cell : 1 + i / 100]);
      const line = at + 1;
      try {
        const { table, diagnostics } = readColumns(text);
        expect(diagnostics.map((d) => [d.code, d.line])).toEqual([['row-dropped', line]]);
        expect(Array.from(table.lines)).not.toContain(line);
        expect(table.columns[0]!.length).toBe(99);
      } catch (error) {
        expect((error as Error).message).toMatch(new RegExp(`line ${line}\\b`));
      }
    }),
    { numRuns: 60, seed: 5 },
  );
});

test('columns by name: detectors, channels, units', () => {
  const text = `# energy_keV\ti0\tifluor_1\tifluor_2\tother\n${rows(30, (i) => [7 + i / 1000, 100, 2 + i, 3, 9], '\t')}`;
  const scan = readScan(text);
  if (scan.kind !== 'absorption') throw new Error('absorption is wanted');
  expect(scan.columns).toEqual({ energy: 1, i0: 2, fluorescence: [3, 4] });
  expect(scan.guess).toContain('fluorescence = column 3 (ifluor_1) + column 4 (ifluor_2)');
  expect(scan.energyEv[1]).toBeCloseTo(7001, 9);
  expect(scan.mu[1]).toBeCloseTo(0.06, 12);
  expect(scan.detection).toBe('fluorescence');
});

test('stated columns win, and what they say is checked', () => {
  const text = rows(30, (i) => [i, 7000 + i, Math.E, 1]);
  const scan = readScan(text, { columns: parseColumnRoles('energy=2,i0=3,it=4') });
  if (scan.kind !== 'absorption') throw new Error('absorption is wanted');
  expect(scan.mu[0]).toBeCloseTo(1, 12);
  expect(() => readScan(text, { columns: parseColumnRoles('energy=2,mu=7') })).toThrow(/mu=7, but the file has 4 columns/);
  expect(() => readScan(text, { columns: parseColumnRoles('energy=2,i0=3') })).toThrow(/needed are energy/);
  expect(() => parseColumnRoles('energy=x')).toThrow(/should be like/);
  expect(() => readScan(text)).toThrow(/cannot be told apart/);
});

test('chi(k) with a stated weight', () => {
  const text = `# k chi\n${rows(200, (i) => [0.05 * (i + 40), (0.05 * (i + 40)) ** 3 * 0.01])}`;
  const scan = readScan(text, { chiWeight: 3 });
  if (scan.kind !== 'chi') throw new Error('chi is wanted');
  expect(scan.chi[100]).toBeCloseTo(0.01, 12);
});

test('angles fall, energies rise; a d-spacing is needed', () => {
  const text = `# angle mu\n${rows(30, (i) => [16.3 - 0.01 * i, i])}`;
  const scan = readScan(text, { dSpacing: 3.13553 });
  if (scan.kind !== 'absorption') throw new Error('absorption is wanted');
  expect(scan.energyEv[0]).toBeCloseTo(12398.419843 / (2 * 3.13553 * Math.sin((16.3 * Math.PI) / 180)), 4);
  expect(scan.energyEv[1]! > scan.energyEv[0]!).toBe(true);
  expect(() => readScan(text)).toThrow(/d-spacing/);
});

test('bad points are listed with their lines', () => {
  const energies = Array.from({ length: 100 }, (_, i) => 7000 + i);
  energies[20] = 7018.5; // steps back
  energies[40] = 7039; // stands there already
  const text = `energy,i0,it\n${rows(100, (i) => [energies[i]!, 100, i === 60 ? -1 : i >= 80 && i < 84 ? 50 : 40 + (i % 7)], ',')}`;
  const { diagnostics } = readScan(text);
  const found = (code: string) => diagnostics.filter((d) => d.code === code).map((d) => d.line);
  expect(found('out-of-order')).toEqual([22]);
  expect(found('repeated-point')).toEqual([42]);
  expect(found('point-dropped')).toEqual([62]);
  expect(found('dead-points')).toEqual([82]);
});

test('what cannot be used is refused with its line', () => {
  expect(() => readScan(`# energy_eV mu\n${rows(30, (i) => [7 + i / 1000, i])}`)).toThrow(/says eV, but no value reaches 200/);
  expect(() => readScan('# nothing\n\n')).toThrow(/nothing but comments/);
  expect(() => readScan('7000,5\t1,2\n7001,5\t1,3\n')).toThrow(/dot/);
  expect(() => readScan(`${rows(30, (i) => [7000 + i, 1])}\n${rows(30, (i) => [7000 + i, 1])}`)).toThrow(/line 31: .*turns back/);
  expect(() => readScan(`energy i0 it\n${rows(30, (i) => [7000 + i, i < 5 ? 0 : 1, 1])}`)).toThrow(
    /line 2: 5 of 30 points have no absorption/,
  );
  expect(() => readScan(rows(30, (i) => (i % 3 === 0 ? [7000 + i, 1, 2] : [7000 + i, 1]))).toString()).toThrow();
});
