import type { Edge } from '../atom/types.js';
import { InputError } from '../errors.js';
import { COVALENT_RADII } from './covalent-radii.js';
import { EDGE_ROWS, FIRST_EDGE_Z } from './edges-table.js';
import { ELEMENT_ROWS } from './elements-table.js';

export interface Element {
  readonly Z: number;
  readonly symbol: string;
  /** Standard atomic weight, u. */
  readonly mass: number;
  /** Single-bond covalent radius, Å; NaN above Z = 96, where none is published. */
  readonly covalentRadius: number;
}

const ELEMENTS: readonly Element[] = ELEMENT_ROWS.map(([symbol, mass], i) => ({
  Z: i + 1,
  symbol,
  mass,
  covalentRadius: COVALENT_RADII[i] ?? Number.NaN,
}));
const BY_SYMBOL: ReadonlyMap<string, Element> = new Map(ELEMENTS.map((element) => [element.symbol, element]));
const EDGE_COLUMN: Readonly<Record<Edge, number>> = { K: 0, L1: 1, L2: 2, L3: 3 };

/** "FE" or "fe" → "Fe": the element's symbol if there is one, whatever its case; deuterium and tritium are "H". */
export function elementSymbol(text: string): string | undefined {
  const name = text.charAt(0).toUpperCase() + text.slice(1).toLowerCase();
  if (name === 'D' || name === 'T') return 'H';
  return BY_SYMBOL.has(name) ? name : undefined;
}

/**
 * The element of a symbol written in any case.
 * @throws {InputError} no such element
 */
export function elementBySymbol(symbol: string): Element {
  const known = BY_SYMBOL.get(symbol) ?? BY_SYMBOL.get(elementSymbol(symbol) ?? '');
  if (!known) throw new InputError(`"${symbol}" is no element symbol; write it like Fe or Cu`);
  return known;
}

/**
 * The element of an atomic number, 1 … 103.
 * @throws {InputError} no such element
 */
export function elementByNumber(Z: number): Element {
  const known = ELEMENTS[Z - 1];
  if (!known) throw new InputError(`no element has the atomic number ${Z}; 1 to ${ELEMENTS.length} are known`);
  return known;
}

/** Whether the tables hold the edge. */
export const hasEdge = (Z: number): boolean => EDGE_ROWS[Z - FIRST_EDGE_Z] !== undefined;

/**
 * Energy of an absorption edge, eV (tabulated literature, see edges-table.ts).
 * @throws {InputError} the element is too light for the edge, or beyond the table
 */
export const edgeEnergyEv = (Z: number, edge: Edge): number => edgeRow(Z, edge)[EDGE_COLUMN[edge]]!;

/**
 * Full width at half maximum of a core level, eV (tabulated literature, see edges-table.ts).
 * @throws {InputError} the element is too light for the edge, or beyond the table
 */
export const coreWidthEv = (Z: number, edge: Edge): number => edgeRow(Z, edge)[4 + EDGE_COLUMN[edge]]!;

/**
 * Covalent radius, Å (Cordero et al. 2008).
 * @throws {InputError} none is published for the element
 */
export function covalentRadius(symbol: string): number {
  const { covalentRadius: radius } = elementBySymbol(symbol);
  if (!(radius > 0)) throw new InputError(`${symbol} has no published covalent radius`);
  return radius;
}

function edgeRow(Z: number, edge: Edge): readonly number[] {
  const row = EDGE_ROWS[Z - FIRST_EDGE_Z];
  if (row) return row;
  const { symbol } = elementByNumber(Z);
  const reason = Z < FIRST_EDGE_Z ? `is too light for a ${edge} edge` : `lies beyond the table of ${edge} edges`;
  throw new InputError(`${symbol} ${reason}; Na (11) to U (92) can be absorbers`);
}
