import { ReadError } from '../errors.js';

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)([eEdD][+-]?\d+)?$/;

/** Whether a cell is a finite number in C notation (Fortran's D exponent is read too). */
export const isNumber = (cell: string): boolean => NUMBER.test(cell) && Number.isFinite(toNumber(cell));

const toNumber = (cell: string): number => Number(cell.replace(/[dD]/, 'e'));

/**
 * A cell as a finite number.
 *
 * @param where  who reads and the place, put before the message
 * @throws {ReadError} not a finite number; says when the cause is a decimal comma
 */
export function parseNumber(cell: string, where: string, line: number): number {
  if (isNumber(cell)) return toNumber(cell);
  const advice = /^[+-]?\d+,\d+/.test(cell) ? '; the decimal mark must be a dot' : '';
  throw new ReadError(`${where}: a finite number is needed, found "${cell.slice(0, 30)}"${advice}`, { line, text: cell });
}
