/**
 * Unit-cell geometry. Cartesian r = A f with the cell vectors as columns of A; the standard axes put a along x and b in the
 * xy plane (International Tables B, 3.3.1; the convention of the PDB format). V = det A; |a*| = |b × c|/V.
 */
import { InputError } from '../errors.js';
import type { Cell, Vec3 } from './types.js';

export interface CellGeometry {
  /** A, row-major (9), Å. */
  readonly toCartesian: Float64Array;
  /** A⁻¹, row-major (9), Å⁻¹. */
  readonly toFractional: Float64Array;
  /** Å³ */
  readonly volume: number;
  /** |a*|, |b*|, |c*|, Å⁻¹: a sphere of radius r spans ± r |a*| in the fractional x. */
  readonly reciprocal: Vec3;
}

/** cos of an angle in degrees, exact where crystals need it (90° must not leave 6e-17 in the matrix). */
function cosine(degrees: number): number {
  if (degrees === 90) return 0;
  if (degrees === 120) return -0.5;
  if (degrees === 60) return 0.5;
  return Math.cos((degrees * Math.PI) / 180);
}

function standardVectors({ a, b, c, alpha, beta, gamma }: Cell): readonly [Vec3, Vec3, Vec3] {
  const [ca, cb, cg] = [cosine(alpha), cosine(beta), cosine(gamma)];
  const sg = Math.sqrt(1 - cg * cg);
  const cx = cb;
  const cy = (ca - cb * cg) / sg;
  return [
    [a, 0, 0],
    [b * cg, b * sg, 0],
    [c * cx, c * cy, c * Math.sqrt(Math.max(0, 1 - cx * cx - cy * cy))],
  ];
}

/**
 * Matrices, volume and reciprocal lengths of a cell.
 * @throws {InputError} a length or angle is impossible, or the cell has no volume
 */
export function cellGeometry(cell: Cell): CellGeometry {
  for (const key of ['a', 'b', 'c'] as const) {
    if (!(cell[key] > 0 && cell[key] < Infinity)) throw new InputError(`cell length ${key} is ${cell[key]} Å; it must be above 0`);
  }
  for (const key of ['alpha', 'beta', 'gamma'] as const) {
    if (!(cell[key] > 0 && cell[key] < 180)) throw new InputError(`cell angle ${key} is ${cell[key]}°; it must lie between 0 and 180`);
  }
  const [a, b, c] = cell.vectors ?? standardVectors(cell);
  const bc = cross(b, c);
  const ca = cross(c, a);
  const ab = cross(a, b);
  const det = dot(a, bc);
  const volume = Math.abs(det);
  // Below one thousandth of abc the three vectors lie in a plane for every purpose of chemistry.
  if (!(volume > 1e-3 * cell.a * cell.b * cell.c))
    throw new InputError('the unit cell has no volume: its angles put a, b, c into one plane');
  return {
    toCartesian: Float64Array.of(a[0], b[0], c[0], a[1], b[1], c[1], a[2], b[2], c[2]),
    toFractional: Float64Array.from([...bc, ...ca, ...ab], (v) => v / det),
    volume,
    reciprocal: [norm(bc) / volume, norm(ca) / volume, norm(ab) / volume],
  };
}

/** The cell of three vectors, Å. */
export function cellOfVectors(a: Vec3, b: Vec3, c: Vec3): Cell {
  const angle = (u: Vec3, v: Vec3) => (Math.acos(Math.max(-1, Math.min(1, dot(u, v) / (norm(u) * norm(v))))) * 180) / Math.PI;
  return { a: norm(a), b: norm(b), c: norm(c), alpha: angle(b, c), beta: angle(a, c), gamma: angle(a, b), vectors: [a, b, c] };
}

/** m · v, m row-major (9). */
export function transform(m: ArrayLike<number>, v: Vec3): Vec3 {
  return [
    m[0]! * v[0] + m[1]! * v[1] + m[2]! * v[2],
    m[3]! * v[0] + m[4]! * v[1] + m[5]! * v[2],
    m[6]! * v[0] + m[7]! * v[1] + m[8]! * v[2],
  ];
}

export const distance = (u: Vec3, v: Vec3): number => Math.hypot(u[0] - v[0], u[1] - v[1], u[2] - v[2]);

const dot = (u: Vec3, v: Vec3): number => u[0] * v[0] + u[1] * v[1] + u[2] * v[2];
const norm = (u: Vec3): number => Math.hypot(u[0], u[1], u[2]);
const cross = (u: Vec3, v: Vec3): Vec3 => [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
