// Samples of good and bad XDI 1.0; their origin stands in xdi/ORIGIN.md. Every fault has to be found, named, and put in its line.
import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { readScan, readXdi, writeXdi, xdiField } from '../../packages/core/src/evidence/index.js';
import { expectNear } from '../support/expect-near.js';

const sample = (name: string) => readFileSync(new URL(`xdi/${name}.xdi`, import.meta.url), 'utf8');
const codes = (name: string) => readXdi(sample(name)).diagnostics.map(({ code }) => code);

test.each(['ok01_full', 'ok03_crlf', 'ok04_cr', 'ok05_case', 'ok10_blank_lines_in_data'])('%s', (name) => {
  const { table, comments, diagnostics } = readXdi(sample(name));
  expect(diagnostics).toEqual([]);
  expect(comments).toEqual(['an invented file', '  second line, two blanks kept']);
  expect(table.columns.map((column) => column.length)).toEqual([12, 12, 12, 12]);
  expect([table.columns[0]![0], table.columns[1]![0]]).toEqual([7082, 100000]);
});

test('what is only recommended is said, not refused', () => {
  expect(codes('ok02_minimal')).toEqual(['xdi-recommended-missing']);
  expect(codes('ok15_version_multi_digit')).toEqual([]);
  expect(readXdi(sample('ok15_version_multi_digit')).version).toEqual([1, 12]);
  expect(codes('ok09_long_separators')).toEqual([]);
});

test('fields: the last counts, free text and empty values are kept, comments are no fields', () => {
  expect(xdiField(readXdi(sample('ok06_duplicate_field')), 'sample.NAME')?.value).toBe('the later one');
  expect(codes('ok06_duplicate_field')).toContain('xdi-field-repeated');
  const extended = readXdi(sample('ok07_extension'));
  expect(['inventor.note', 'inventor.empty', 'sample.pressure'].map((name) => xdiField(extended, name)?.value)).toEqual([
    'free text: with colons, kept',
    '',
    '2 GPa',
  ]);
  const fieldlike = readXdi(sample('ok08_fieldlike_comment'));
  expect(xdiField(fieldlike, 'Element.symbol')?.value).toBe('Fe');
  expect(fieldlike.table.columns[0]!.length).toBeGreaterThan(0);
  expect(xdiField(readXdi(sample('ok14_utf8_value')), 'Sample.name')?.value).toBe('échantillon n°3 – α-Fe₂O₃');
});

test('numbers in every notation', () => {
  const { columns } = readXdi(sample('ok11_numbers')).table;
  expect(columns.map((column) => Array.from(column))).toEqual([
    [7082, 7092, 7102],
    [1e5, 0.5, 1],
    [3e4, -1, 2],
    [1.2, 0, 3],
  ]);
});

test('keV and angles become eV', () => {
  const kev = readScan(sample('ok12_keV'));
  expect(kev.kind === 'absorption' && Array.from(kev.energyEv)).toEqual([7082, 7112, 7142]);
  const angle = readScan(sample('ok13_angle'));
  if (angle.kind !== 'absorption') throw new Error('absorption is wanted');
  // E = hc/(2 d sin θ), hc 12398.419843 eV Å, d 3.13553 Å
  [7079.917963238341, 7110.434185014708, 7140.9229769775375].forEach((e, i) => {
    expectNear(angle.energyEv[i]!, e, { rel: 1e-10, label: 'energy, eV' }); // hc was given to 11 digits
  });
});

test.each([
  ['bad01_no_version', /line 1 should be "# XDI\/1.0"/],
  ['bad05_ragged_rows', /line 25.*4 numbers.*found 3/],
  ['bad06_nan', /line 25, column 3.*finite.*"NaN"/],
  ['bad07_comma_decimal', /line 20, column 1.*"7082,0".*dot/],
  ['bad08_no_data', /without data/],
  ['bad10_angle_without_d', /line 2: .*degrees needs Mono.d_spacing/],
])('%s is refused', (name, message) => {
  expect(() => readXdi(sample(name))).toThrow(message);
});

test.each([
  ['bad02_no_symbol', 'xdi-no-symbol', undefined],
  ['bad03_bad_edge', 'xdi-bad-edge', 7],
  ['bad04_no_header_end', 'xdi-no-header-end', undefined],
  ['bad09_label_count', 'xdi-label-count', 19],
  ['bad11_bad_time', 'xdi-bad-time', 12],
  ['bad12_comment_in_data', 'xdi-comment-in-data', 23],
  ['bad14_labels_contradict', 'xdi-label-contradicts', 19],
])('%s is read, its fault named', (name, code, line) => {
  const found = readXdi(sample(name)).diagnostics.find((diagnostic) => diagnostic.code === code);
  expect(found).toBeDefined();
  if (line !== undefined) expect(found!.line).toBe(line);
});

test('four broken field names are ignored one by one', () => {
  const { diagnostics } = readXdi(sample('bad13_field_syntax'));
  expect(diagnostics.filter(({ code }) => code === 'xdi-field-ignored').map(({ line }) => line)).toEqual([15, 16, 17, 18]);
});

test('written and read again, nothing is lost', () => {
  const file = readXdi(sample('ok07_extension'));
  const fields = file.fields.filter(({ name }) => !/^column\./i.test(name)).map(({ name, value }) => [name, value] as const);
  const again = readXdi(writeXdi({ ...file, fields }));
  expect(again.table).toEqual({ ...file.table, lines: again.table.lines });
  expect(again.comments).toEqual(file.comments);
  expect(again.applications).toEqual(file.applications);
  expect(fields.map(([name]) => xdiField(again, name)?.value)).toEqual(fields.map(([, value]) => value));
  expect(again.diagnostics).toEqual(file.diagnostics);
  expect(() =>
    writeXdi({ ...file, fields, table: { ...file.table, columns: [Float64Array.of(Number.NaN)], names: ['energy'], units: ['eV'] } }),
  ).toThrow(/not finite/);
});
