/**
 * From the text of a file to a spectrum: absorption against energy, or chi(k).
 * E = hc/(2 d sin θ) for angles; μ = ln(I0/It) in transmission, If/I0 in fluorescence (channels summed).
 */

import type { Edge } from '../atom/types.js';
import { HC_EV_ANGSTROM } from '../constants.js';
import { elementSymbol } from '../elements/index.js';
import { type Diagnostic, ReadError } from '../errors.js';
import { readColumns } from './columns.js';
import { MOST_POINTS } from './limits.js';
import { checkRoles, guessRoles, rolesInWords, unitByMagnitude } from './roles.js';
import type { ColumnRoles, DataTable, EnergyUnit, MeasuredScan, ReadOptions } from './types.js';
import { looksLikeXdi, readXdi, xdiField } from './xdi.js';

/** A fall in energy larger than this is a second scan in the file, not backlash of the monochromator; eV, common practice. */
const SECOND_SCAN_EV = 20;
/** Points at the same energy within this are one point, eV: far below any monochromator's step. */
const SAME_ENERGY_EV = 1e-4;

interface Source {
  readonly table: DataTable;
  readonly diagnostics: Diagnostic[];
  readonly title: string;
  readonly element?: string | undefined;
  readonly edge?: string | undefined;
  readonly dSpacing?: number | undefined;
}

function sourceOf(text: string): Source {
  if (looksLikeXdi(text)) {
    const file = readXdi(text);
    const value = (name: string) => xdiField(file, name)?.value;
    const title = value('Sample.name') ?? file.comments.find((line) => line !== '') ?? '';
    const dSpacing = Number(value('Mono.d_spacing') || Number.NaN);
    return {
      table: file.table,
      diagnostics: [...file.diagnostics],
      title,
      element: value('Element.symbol'),
      edge: value('Element.edge'),
      dSpacing: dSpacing > 0 ? dSpacing : undefined,
    };
  }
  const { table, diagnostics, header } = readColumns(text);
  return { table, diagnostics: [...diagnostics], title: header.find((line) => line !== '') ?? '' };
}

const isEdge = (text: string | undefined): text is Edge => text === 'K' || text === 'L1' || text === 'L2' || text === 'L3';

/**
 * Reads one spectrum from the text of a file: XDI, or columns of numbers.
 *
 * What the options leave out is taken from the file, else guessed; `guess` says what, and the diagnostics list every row
 * that was left out, averaged or put in order.
 *
 * @param text     whole file
 * @throws {ReadError} the text cannot be read, or more than one row in twenty cannot be used; the line is named
 * @throws {InputError} the stated columns do not make a spectrum
 */
export function readScan(text: string, options: ReadOptions = {}): MeasuredScan {
  const source = sourceOf(text);
  const { table, diagnostics } = source;
  if (table.lines.length > MOST_POINTS) {
    throw new ReadError(
      `readScan: line ${table.lines[MOST_POINTS]}: ${table.lines.length} points are more than the ${MOST_POINTS} of one scan; average neighbours first, or give one scan a file`,
      { line: table.lines[MOST_POINTS]! },
    );
  }
  const roles = options.columns ?? guessRoles(table);
  checkRoles(roles, table.columns.length);
  let guess = options.columns ? '' : rolesInWords(roles, table.names);
  const column = (n: number) => table.columns[n - 1]!;
  const symbol = options.element ?? source.element;
  const element = symbol === undefined ? undefined : elementSymbol(symbol);
  if (symbol !== undefined && element === undefined)
    diagnostics.push({ code: 'unknown-element', message: `"${symbol}" is no element's symbol` });
  const edge = options.edge ?? (isEdge(source.edge) ? source.edge : undefined);
  const head = {
    title: source.title,
    ...(element === undefined ? {} : { element }),
    ...(edge === undefined ? {} : { edge }),
    columns: roles,
    diagnostics,
  };

  if (roles.k && roles.chi) {
    const weight = options.chiWeight ?? 0;
    const chi = Float64Array.from(column(roles.chi), (y, i) => (weight === 0 ? y : y / column(roles.k!)[i]! ** weight));
    if (options.chiWeight === undefined) guess = [guess, 'chi taken as unweighted'].filter(Boolean).join('; ');
    const [k, [values], lines] = inOrder(column(roles.k), [chi], table.lines, 'k', 'Å⁻¹', { reverse: 1, same: 1e-7 }, diagnostics);
    return { kind: 'chi', ...head, guess, k, chi: values!, lines };
  }

  const { energyEv, said } = energyFrom(table, roles, options, source.dSpacing);
  if (said && options.energyUnit === undefined) guess = [guess, said].filter(Boolean).join('; ');
  const { mu, reference, detection } = absorptionFrom(table, roles, diagnostics);
  const series = reference ? [mu, reference] : [mu];
  const good = (i: number) => Number.isFinite(energyEv[i]!) && Number.isFinite(mu[i]!);
  const kept = Array.from(energyEv.keys()).filter(good);
  if ((energyEv.length - kept.length) * 20 > energyEv.length) {
    const line = table.lines[energyEv.findIndex((_, i) => !good(i))]!;
    throw new ReadError(
      `readScan: line ${line}: ${energyEv.length - kept.length} of ${energyEv.length} points have no absorption (intensities must be positive)`,
      {
        line,
      },
    );
  }
  const pick = (x: Float64Array) => Float64Array.from(kept, (i) => x[i]!);
  const pickedLines = Int32Array.from(kept, (i) => table.lines[i]!);
  const rule = { reverse: SECOND_SCAN_EV, same: SAME_ENERGY_EV };
  const [energy, ordered, lines] = inOrder(pick(energyEv), series.map(pick), pickedLines, 'energy', 'eV', rule, diagnostics);
  noteDeadPoints(ordered[0]!, lines, diagnostics);
  return {
    kind: 'absorption',
    ...head,
    guess,
    detection,
    energyEv: energy,
    mu: ordered[0]!,
    lines,
    ...(ordered[1] ? { reference: ordered[1] } : {}),
  };
}

function energyFrom(
  table: DataTable,
  roles: ColumnRoles,
  options: ReadOptions,
  fileSpacing: number | undefined,
): { energyEv: Float64Array; said: string } {
  const at = (roles.energy ?? roles.angle)!;
  const x = table.columns[at - 1]!;
  const stated = table.units[at - 1]!.toLowerCase();
  const words = new Map<string, EnergyUnit>([
    ['ev', 'eV'],
    ['kev', 'keV'],
    ['degrees', 'degrees'],
    ['deg', 'degrees'],
    ['radians', 'radians'],
    ['rad', 'radians'],
  ]);
  let unit = options.energyUnit ?? words.get(stated);
  let said = '';
  if (!unit) {
    unit = roles.angle ? 'degrees' : unitByMagnitude(x);
    said = `${roles.angle ? 'angles' : 'energies'} taken as ${unit}`;
  }
  if (unit === 'eV' && options.energyUnit === undefined && unitByMagnitude(x) === 'keV') {
    throw new ReadError(`readScan: column ${at} says eV, but no value reaches 200; if these are keV, state so`);
  }
  if (unit === 'eV') return { energyEv: Float64Array.from(x), said };
  if (unit === 'keV') return { energyEv: x.map((e) => 1000 * e), said };
  const d = options.dSpacing ?? fileSpacing;
  if (!(d && d > 0)) throw new ReadError(`readScan: column ${at} holds angles; the d-spacing of the monochromator in Å is needed`);
  const radians = unit === 'degrees' ? Math.PI / 180 : 1;
  return { energyEv: x.map((angle) => HC_EV_ANGSTROM / (2 * d * Math.sin(angle * radians))), said };
}

/** NaN where an intensity is not positive; each such row is listed. */
function absorptionFrom(table: DataTable, roles: ColumnRoles, diagnostics: Diagnostic[]) {
  if (roles.mu) return { mu: Float64Array.from(table.columns[roles.mu - 1]!), reference: undefined, detection: 'ready' as const };
  const i0 = table.columns[roles.i0! - 1]!;
  const n = i0.length;
  const mu = new Float64Array(n);
  const transmitted = roles.transmitted ? table.columns[roles.transmitted - 1]! : undefined;
  const behind = transmitted && roles.reference ? table.columns[roles.reference - 1]! : undefined;
  const reference = behind?.every((x, i) => x > 0 && transmitted![i]! > 0)
    ? behind.map((x, i) => Math.log(transmitted![i]! / x))
    : undefined;
  if (behind && !reference)
    diagnostics.push({ code: 'reference-unusable', message: 'the reference intensity is not positive throughout; it is not used' });
  for (let i = 0; i < n; i++) {
    let signal = 0;
    if (transmitted) signal = transmitted[i]!;
    else for (const channel of roles.fluorescence!) signal += table.columns[channel - 1]![i]!;
    const usable = i0[i]! > 0 && signal > 0;
    mu[i] = usable ? (transmitted ? Math.log(i0[i]! / signal) : signal / i0[i]!) : Number.NaN;
    if (!usable) {
      const message = `the point is left out: intensities must be positive, found I0 ${i0[i]} and ${transmitted ? 'It' : 'If'} ${signal}`;
      diagnostics.push({ code: 'point-dropped', message, line: table.lines[i]! });
    }
  }
  return { mu, reference, detection: transmitted ? ('transmission' as const) : ('fluorescence' as const) };
}

/** Points in rising order, repeated ones averaged; every change is listed with its line. */
function inOrder(
  x: Float64Array,
  series: readonly Float64Array[],
  lines: Int32Array,
  what: string,
  unit: string,
  rule: { readonly reverse: number; readonly same: number },
  diagnostics: Diagnostic[],
): [Float64Array, Float64Array[], Int32Array] {
  const n = x.length;
  if (n < 2) throw new ReadError(`readScan: two points or more are needed, found ${n}`);
  const rising = x[n - 1]! > x[0]!;
  const order = Array.from(x.keys());
  if (!rising) {
    order.reverse();
    diagnostics.push({ code: 'order-reversed', message: `the ${what} falls; the points were put in rising order` });
  }
  for (let i = 1; i < n; i++) {
    const back = x[order[i - 1]!]! - x[order[i]!]!;
    const line = lines[order[i]!]!;
    if (back > rule.reverse) {
      const place = `from ${x[order[i - 1]!]!.toFixed(2)} to ${x[order[i]!]!.toFixed(2)} ${unit}`;
      throw new ReadError(`readScan: line ${line}: the ${what} turns back ${place}; one scan a file is needed`, { line });
    }
    if (back > rule.same)
      diagnostics.push({ code: 'out-of-order', message: `the ${what} steps back by ${back.toPrecision(3)} ${unit}; put in order`, line });
  }
  order.sort((a, b) => x[a]! - x[b]!);
  const groups: number[][] = [];
  for (const i of order) {
    const group = groups.at(-1);
    if (group && x[i]! - x[group[0]!]! <= rule.same) {
      group.push(i);
      diagnostics.push({
        code: 'repeated-point',
        message: `${what} ${x[i]} ${unit} stands here again; the points were averaged`,
        line: lines[i]!,
      });
    } else groups.push([i]);
  }
  const mean = (y: Float64Array) => Float64Array.from(groups, (group) => group.reduce((sum, i) => sum + y[i]!, 0) / group.length);
  return [mean(x), series.map(mean), Int32Array.from(groups, (group) => lines[group[0]!]!)];
}

/** A detector that stands still gives the same digits again and again: three or more equal values in a row are named. */
function noteDeadPoints(mu: Float64Array, lines: Int32Array, diagnostics: Diagnostic[]): void {
  for (let i = 0; i < mu.length; ) {
    let j = i + 1;
    while (j < mu.length && mu[j] === mu[i]) j++;
    if (j - i >= 3)
      diagnostics.push({
        code: 'dead-points',
        message: `${j - i} points have exactly the same absorption; did the detector stand still?`,
        line: lines[i]!,
      });
    i = j;
  }
}
