/** Symmetry operators as crystallographers write them, "-x, y+1/2, -z": text to exact matrices and back. */
import { ReadError } from '../errors.js';
import type { SymmetryOperator, Vec3 } from './types.js';

/** No space group has more, in any usual setting; 192 in Fm-3m. */
const MOST_OPERATORS = 1000;

export const IDENTITY: SymmetryOperator = { rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1], translation: [0, 0, 0], text: 'x,y,z' };

const TERM = /([+-]?)(?:(\d+\/\d+|\d*\.\d+|\d+\.?)\*?)?([xyz])?/y;

/**
 * One operator. Translations are snapped to the multiples of 1/24 that space groups have when written within 0.0006 of one
 * (".3333"), so that products stay exact.
 * @throws {ReadError} not three terms of x, y, z and numbers, or not a symmetry (determinant not ±1)
 */
export function parseOperator(text: string, line?: number): SymmetryOperator {
  const fail = (why: string) =>
    new ReadError(
      `${line ? `line ${line}: ` : ''}"${text.trim().slice(0, 60)}" is no symmetry operator: ${why}; write it like -x,y+1/2,-z`,
      {
        ...(line ? { line } : {}),
        text,
      },
    );
  const rows = text
    .toLowerCase()
    .replace(/["'\s]/g, '')
    .split(',');
  if (rows.length !== 3) throw fail('it needs three parts separated by commas');
  const rotation: number[] = [];
  const translation: number[] = [];
  for (const row of rows) {
    const coefficients = { x: 0, y: 0, z: 0 };
    let shift = 0;
    TERM.lastIndex = 0;
    if (row === '') throw fail('a part is empty');
    while (TERM.lastIndex < row.length) {
      const at = TERM.lastIndex;
      const [found = '', sign, number, axis] = TERM.exec(row) ?? [];
      if (found === '' || (number === undefined && axis === undefined)) throw fail(`"${row.slice(at)}" cannot be read`);
      const value = (sign === '-' ? -1 : 1) * (number === undefined ? 1 : fraction(number));
      if (axis) coefficients[axis as 'x' | 'y' | 'z'] += value;
      else shift += value;
    }
    rotation.push(coefficients.x, coefficients.y, coefficients.z);
    translation.push(snap24(shift));
  }
  const [a, b, c, d, e, f, g, h, i] = rotation as [number, number, number, number, number, number, number, number, number];
  const determinant = a * (e * i - f * h) - b * (d * i - f * g) + c * (d * h - e * g);
  if (Math.abs(Math.abs(determinant) - 1) > 1e-6) throw fail('it does not keep volumes');
  return { rotation, translation: translation as unknown as Vec3, text: formatOperator(rotation, translation) };
}

/** "x-y,x,z+1/2" of a matrix and a translation. */
export function formatOperator(rotation: readonly number[], translation: readonly number[]): string {
  return [0, 1, 2]
    .map((row) => {
      let text = '';
      for (let column = 0; column < 3; column++) {
        const value = rotation[3 * row + column]!;
        if (value === 0) continue;
        text += (value < 0 ? '-' : text ? '+' : '') + (Math.abs(value) === 1 ? '' : Math.abs(value)) + 'xyz'.charAt(column);
      }
      const shift = translation[row]!;
      return shift === 0 ? text : text + (shift < 0 ? '-' : '+') + fractionText(Math.abs(shift));
    })
    .join(',');
}

/** Identity first, no operator twice (equal up to lattice translations). */
export function tidyOperators(operators: readonly SymmetryOperator[]): readonly SymmetryOperator[] {
  const seen = new Map<string, SymmetryOperator>([[operatorKey(IDENTITY), IDENTITY]]);
  for (const operator of operators) {
    const key = operatorKey(operator);
    if (!seen.has(key)) seen.set(key, operator);
    if (seen.size > MOST_OPERATORS)
      throw new ReadError(`the file lists more than ${MOST_OPERATORS} different symmetry operators; a space group has at most 192`);
  }
  return [...seen.values()];
}

const operatorKey = ({ rotation, translation }: SymmetryOperator): string =>
  `${rotation.map((v) => v + 0).join()};${translation.map((v) => Math.round((((v % 1) + 1) % 1) * 1e4) % 1e4).join()}`;

function fraction(text: string): number {
  const [top, bottom] = text.split('/');
  return bottom === undefined ? Number(top) : Number(top) / Number(bottom);
}

const snap24 = (value: number): number => (Math.abs(value * 24 - Math.round(value * 24)) < 0.0144 ? Math.round(value * 24) / 24 : value);

function fractionText(value: number): string {
  for (const bottom of [1, 2, 3, 4, 6, 8, 12, 24]) {
    const top = value * bottom;
    if (Math.abs(top - Math.round(top)) < 1e-9) return bottom === 1 ? `${Math.round(top)}` : `${Math.round(top)}/${bottom}`;
  }
  return value.toFixed(4);
}
