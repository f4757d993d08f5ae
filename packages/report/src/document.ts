/** A report before it has a form: headings, words, tables, figures. HTML and Markdown are made from the same one. */
import type { Table } from './prediction-tables.js';

export type Block =
  | { readonly kind: 'heading'; readonly level: 2 | 3; readonly text: string }
  | { readonly kind: 'paragraph'; readonly text: string }
  /** What must not be overlooked. */
  | { readonly kind: 'caution'; readonly text: string }
  | { readonly kind: 'list'; readonly items: readonly string[] }
  | { readonly kind: 'facts'; readonly facts: readonly (readonly [name: string, value: string])[] }
  | { readonly kind: 'table'; readonly table: Table }
  /** `name` is the file of the figure without ending, in the folder figures. */
  | { readonly kind: 'figure'; readonly name: string; readonly svg: string; readonly caption: string };

export interface ReportDocument {
  readonly title: string;
  readonly blocks: readonly Block[];
}

export const heading = (text: string, level: 2 | 3 = 2): Block => ({ kind: 'heading', level, text });
export const paragraph = (text: string): Block => ({ kind: 'paragraph', text });
export const caution = (text: string): Block => ({ kind: 'caution', text });
/** Nothing where there is nothing to list. */
export const list = (items: readonly string[]): Block[] => (items.length > 0 ? [{ kind: 'list', items }] : []);
export const facts = (rows: readonly (readonly [string, string])[]): Block => ({ kind: 'facts', facts: rows });
/** Nothing where there are no rows. */
export const tableOf = (table: Table): Block[] => (table.rows.length > 0 ? [{ kind: 'table', table }] : []);
export const figure = (name: string, svg: string, caption: string): Block => ({ kind: 'figure', name, svg, caption });

/** A number of a table for reading: four figures; the CSV has all. */
export function readable(value: string | number): string {
  if (typeof value === 'string') return value;
  if (!Number.isFinite(value)) return '–';
  if (Number.isInteger(value)) return String(value).replace('-', '−');
  const size = Math.abs(value);
  const text = size >= 1e-4 && size < 1e5 ? String(Number(value.toPrecision(4))) : value.toExponential(2);
  return text.replace(/-/g, '−');
}
