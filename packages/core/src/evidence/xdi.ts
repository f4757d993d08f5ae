/**
 * XDI 1.0, the open XAS Data Interchange format (specification and dictionary: XraySpectroscopy/XAS-Data-Interchange, commit
 * ed21ad5). Grammar in short: `# XDI/1.0 …`, then `# Family.tag: value` fields, `# ///`, comments, `# ---`, a label line, numbers.
 *
 * Strict where the text is: no version line, ragged rows, numbers that are none and an angle without `Mono.d_spacing` are errors.
 * What leaves the data readable is a diagnostic. Where the text disagrees with itself: `Mono.d_spacing` missing beside energies, a
 * missing `# ///` and missing labels are accepted; an empty value is an empty string; a field name that breaks the rule is ignored, named.
 */

import { type Diagnostic, ReadError } from '../errors.js';
import { parseNumber } from './numbers.js';
import type { DataTable } from './types.js';

export interface XdiField {
  /** As written; compared without case. */
  readonly name: string;
  readonly value: string;
  readonly line: number;
}

export interface XdiFile {
  /** [major, minor, …] as integers: 1.12 is newer than 1.2. */
  readonly version: readonly number[];
  /** Words after the version: programs and extensions, in order. */
  readonly applications: readonly string[];
  /** In order; of repeated names the last counts. */
  readonly fields: readonly XdiField[];
  readonly comments: readonly string[];
  readonly table: DataTable;
  readonly diagnostics: readonly Diagnostic[];
}

// biome-ignore format: a list of words
const EDGES = new Set(['K', 'L', 'L1', 'L2', 'L3', 'M', 'M1', 'M2', 'M3', 'M4', 'M5', 'N', 'N1', 'N2', 'N3', 'N4', 'N5', 'N6', 'N7', 'O', 'O1', 'O2', 'O3', 'O4', 'O5', 'O6', 'O7']);
const SYMBOLS = new Set(
  (
    'H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br Kr Rb Sr Y Zr Nb Mo Tc Ru Rh Pd Ag Cd In Sn Sb Te I Xe ' +
    'Cs Ba La Ce Pr Nd Pm Sm Eu Gd Tb Dy Ho Er Tm Yb Lu Hf Ta W Re Os Ir Pt Au Hg Tl Pb Bi Po At Rn Fr Ra Ac Th Pa U Np Pu Am Cm Bk Cf Es Fm Md No Lr Rf Db Sg ' +
    'Bh Hs Mt Ds Rg Cn Nh Fl Mc Lv Ts Og Uut Uup Uus Uuo'
  ).split(' '),
);
const UNITS = new Set(['ev', 'kev', 'pixel', 'degrees', 'radians', 'steps']);
const FIELD_NAME = /^[A-Za-z][A-Za-z0-9_-]*\.[A-Za-z0-9_-]+$/;
const ISO_TIME = /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}(:\d{2}(\.\d+)?)?(Z|[+-]\d{2}:?\d{2})?$/;
const RECOMMENDED = ['Facility.name', 'Facility.xray_source', 'Beamline.name', 'Scan.start_time'];

/** Value of the last field of that name, whatever its case; undefined when absent. */
export function xdiField(file: Pick<XdiFile, 'fields'>, name: string): XdiField | undefined {
  return file.fields.findLast((field) => field.name.toLowerCase() === name.toLowerCase());
}

/** Whether a text claims to be XDI. */
export const looksLikeXdi = (text: string): boolean => /^\uFEFF?#[ \t]*XDI\//i.test(text);

/**
 * Reads an XDI file.
 *
 * @param text  whole file; LF, CRLF or CR line ends
 * @throws {ReadError} no version line, no data, ragged rows, a cell that is no finite number, an angle without d-spacing
 */
export function readXdi(text: string): XdiFile {
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/);
  const diagnostics: Diagnostic[] = [];
  const note = (code: string, message: string, line?: number) => diagnostics.push({ code, message, ...(line ? { line } : {}) });

  const head = /^#\s*XDI\/(\d+(?:\.\d+)+)(?:\s+(.*?))?\s*$/.exec(lines[0]!);
  if (!head) throw new ReadError(`readXdi: line 1 should be "# XDI/1.0", found "${lines[0]!.slice(0, 40)}"`, { line: 1 });
  const version = head[1]!.split('.').map(Number);
  if (version[0] !== 1) note('xdi-version', `XDI ${head[1]} is read by the rules of XDI 1`, 1);

  const fields: XdiField[] = [];
  const known = new Set<string>();
  const comments: string[] = [];
  let part: 'fields' | 'comments' | 'done' = 'fields';
  let labels: { words: string[]; line: number } | undefined;
  let at = 1;
  for (; at < lines.length; at++) {
    const raw = lines[at]!;
    if (!raw.trimStart().startsWith('#')) {
      if (raw.trim() === '') continue;
      break;
    }
    const body = raw.trimStart().slice(1);
    if (part !== 'done' && /^\s*-{3,}\s*$/.test(body)) {
      part = 'done';
    } else if (part === 'done') {
      if (labels) note('xdi-comment-after-header', 'a second line with # after the header end is neither label nor data; ignored', at + 1);
      else labels = { words: body.trim().split(/\s+/), line: at + 1 };
    } else if (part === 'fields' && /^\s*\/{3,}\s*$/.test(body)) {
      part = 'comments';
    } else if (part === 'comments') {
      if (/^\s*-{3,}/.test(body))
        note('xdi-dashes-in-comment', 'three dashes followed by text are read as a comment, not as the header end', at + 1);
      comments.push(body.replace(/^ /, '').replace(/\s+$/, ''));
    } else readField(body, at + 1);
  }
  function readField(body: string, line: number) {
    const colon = body.indexOf(':');
    const name = (colon < 0 ? body : body.slice(0, colon)).trim();
    if (colon < 0 || !FIELD_NAME.test(name)) {
      note('xdi-field-ignored', `"${name.slice(0, 40)}" is no Family.tag with a colon; the field is ignored`, line);
      return;
    }
    if (known.has(name.toLowerCase())) note('xdi-field-repeated', `${name} stands here again; the last one counts`, line);
    known.add(name.toLowerCase());
    fields.push({ name, value: body.slice(colon + 1).trim(), line });
  }
  if (part !== 'done') note('xdi-no-header-end', 'the line "# ---" that ends the header is missing', at + 1);

  const rows: number[][] = [];
  const rowLines: number[] = [];
  for (; at < lines.length; at++) {
    const raw = lines[at]!.trim();
    if (raw === '') continue;
    if (raw.startsWith('#')) {
      note('xdi-comment-in-data', `a line with # stands among the data: "${raw.slice(0, 40)}"; it is ignored`, at + 1);
      continue;
    }
    const cells = raw.split(/[ \t]+/);
    if (rows.length > 0 && cells.length !== rows[0]!.length) {
      throw new ReadError(`readXdi: line ${at + 1}: every row needs ${rows[0]!.length} numbers like the first, found ${cells.length}`, {
        line: at + 1,
      });
    }
    rows.push(cells.map((cell, i) => parseNumber(cell, `readXdi: line ${at + 1}, column ${i + 1}`, at + 1)));
    rowLines.push(at + 1);
  }
  if (rows.length === 0) throw new ReadError(`readXdi: line ${lines.length}: the file ends without data`, { line: lines.length });

  const count = rows[0]!.length;
  const names: string[] = Array(count).fill('');
  const units: string[] = Array(count).fill('');
  for (const field of fields) {
    const column = /^column\.(\d+)$/i.exec(field.name);
    if (!column) continue;
    const index = Number(column[1]) - 1;
    if (index < 0 || index >= count) {
      note('xdi-column-absent', `${field.name} is described, but the data have ${count} columns`, field.line);
      continue;
    }
    const [word = '', unit = ''] = field.value.split(/\s+/);
    names[index] = word;
    units[index] = unit;
  }
  if (labels && labels.words.length !== count) {
    note('xdi-label-count', `${labels.words.length} labels stand over ${count} columns`, labels.line);
  } else if (labels) {
    for (let i = 0; i < count; i++) {
      if (names[i] === '') names[i] = labels.words[i]!;
      else if (names[i]!.toLowerCase() !== labels.words[i]!.toLowerCase()) {
        note(
          'xdi-label-contradicts',
          `label ${i + 1} says ${labels.words[i]}, Column.${i + 1} says ${names[i]}; the field is believed`,
          labels.line,
        );
      }
    }
  }
  checkFields(fields, units, note);
  const table: DataTable = {
    names,
    units,
    columns: names.map((_, j) => Float64Array.from(rows, (row) => row[j]!)),
    lines: Int32Array.from(rowLines),
  };
  return { version, applications: head[2] ? head[2].split(/\s+/) : [], fields, comments, table, diagnostics };
}

function checkFields(
  fields: readonly XdiField[],
  units: readonly string[],
  note: (code: string, message: string, line?: number) => void,
): void {
  const find = (name: string) => xdiField({ fields }, name);
  const symbol = find('Element.symbol');
  if (!symbol) note('xdi-no-symbol', 'the required field Element.symbol is missing');
  else if (!SYMBOLS.has(symbol.value))
    note('xdi-bad-symbol', `Element.symbol should be an element's symbol, found "${symbol.value}"`, symbol.line);
  const edge = find('Element.edge');
  if (!edge) note('xdi-no-edge', 'the required field Element.edge is missing');
  else if (!EDGES.has(edge.value)) note('xdi-bad-edge', `Element.edge should be one of K, L1, L2, L3, …, found "${edge.value}"`, edge.line);
  const abscissa = find('Column.1');
  if (!abscissa) note('xdi-no-column-1', 'the required field Column.1 is missing');
  const unit = units[0]!.toLowerCase();
  const transformed = /^(k|r)\b/i.test(abscissa?.value ?? ''); // the dictionary has these words, but its units are those of a scan
  if (abscissa && !transformed && !UNITS.has(unit))
    note('xdi-no-unit', `Column.1 should name its unit (eV, keV, degrees, …), found "${abscissa.value}"`, abscissa.line);
  const dSpacing = find('Mono.d_spacing');
  const d = Number(dSpacing?.value || Number.NaN);
  if (dSpacing && !(d > 0 && d < Infinity))
    note('xdi-bad-d-spacing', `Mono.d_spacing should be a length in Å, found "${dSpacing.value}"`, dSpacing.line);
  if (!(d > 0 && d < Infinity)) {
    if (unit === 'degrees' || unit === 'radians' || unit === 'steps') {
      const line = abscissa?.line ?? 1;
      throw new ReadError(`readXdi: line ${line}: an abscissa in ${unit} needs Mono.d_spacing in Å`, { line });
    }
    if (!dSpacing) note('xdi-no-d-spacing', 'Mono.d_spacing is missing (not needed for energies)');
  }
  const missing = RECOMMENDED.filter((name) => !find(name));
  if (missing.length > 0) note('xdi-recommended-missing', `recommended fields are missing: ${missing.join(', ')}`);
  for (const name of ['Scan.start_time', 'Scan.end_time']) {
    const time = find(name);
    if (time && time.value !== '' && !ISO_TIME.test(time.value)) {
      note('xdi-bad-time', `${name} should be like 2007-04-05T14:30:22, found "${time.value}"`, time.line);
    }
  }
}
