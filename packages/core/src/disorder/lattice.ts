/** Vectors of a repeating body, Å. */
import { InputError } from '../errors.js';
import { cellGeometry } from '../structure/cell.js';
import type { Cell, Vec3 } from '../structure/types.js';

export type Lattice = readonly [a: Vec3, b: Vec3, c: Vec3];

export const cross = (u: Vec3, v: Vec3): Vec3 => [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
export const dot3 = (u: Vec3, v: Vec3): number => u[0] * v[0] + u[1] * v[1] + u[2] * v[2];

/** Rows a*, b*, c* without the factor 2π: a*·r is the first fractional coordinate of r. @throws {InputError} no volume */
export function reciprocal([a, b, c]: Lattice): Lattice {
  const bc = cross(b, c);
  const volume = dot3(a, bc);
  if (!(Math.abs(volume) > 1e-3)) throw new InputError(`lattice: the cell has no volume (${volume} Å³)`);
  const rows = [bc, cross(c, a), cross(a, b)].map((v): Vec3 => [v[0] / volume, v[1] / volume, v[2] / volume]);
  return [rows[0]!, rows[1]!, rows[2]!];
}

/** f₁a + f₂b + f₃c. */
export const combine = ([a, b, c]: Lattice, f: Vec3): Vec3 => [
  f[0] * a[0] + f[1] * b[0] + f[2] * c[0],
  f[0] * a[1] + f[1] * b[1] + f[2] * c[1],
  f[0] * a[2] + f[1] * b[2] + f[2] * c[2],
];

/** Lattice vectors of a file's cell, in the file's axes. @throws {InputError} the cell is impossible */
export function latticeOf(cell: Cell): Lattice {
  const m = cellGeometry(cell).toCartesian;
  const column = (i: number): Vec3 => [m[i]!, m[3 + i]!, m[6 + i]!];
  return [column(0), column(1), column(2)];
}

/** The copy of d by lattice vectors nearest to zero (of those next to the rounded one; exact for cells not too oblique). */
export function nearestImage(d: Vec3, lattice: Lattice, inverse: Lattice): Vec3 {
  const f = inverse.map((row) => -Math.round(dot3(row, d))) as unknown as Vec3;
  const s = combine(lattice, f);
  return [d[0] + s[0], d[1] + s[1], d[2] + s[2]];
}
