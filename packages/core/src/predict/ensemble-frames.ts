/**
 * Frames of a trajectory, or models of an entry, made ready for averaging: checked against the first, packed into typed arrays, and
 * looked over once for the mean surroundings and an even sample. Å.
 *
 * The mean of a molecule is taken after each frame was turned onto the first about the absorbers (Horn, J. Opt. Soc. Am. A 4, 629
 * (1987)); that of a repeating box after atoms that left on one side were followed, without the drift of the whole.
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { InputError } from '../errors.js';
import { cellGeometry, cellOfVectors } from '../structure/cell.js';
import { findSites } from '../structure/sites.js';
import type { Atom, Cell, Structure, Vec3 } from '../structure/types.js';

/** One frame as a reader gives it. */
export interface EnsembleFrame {
  readonly atoms: readonly Atom[];
  readonly cell?: Cell;
  /** Line where it starts, for messages. */
  readonly line?: number;
}

/** Numbers of one packed frame: three an atom, and the nine of the cell vectors in a repeating box. */
export const frameSize = (first: Structure): number => 3 * first.atoms.length + (first.cell ? 9 : 0);

/**
 * Packs a frame: positions, then cell vectors where there is a cell.
 *
 * @param number  of the frame, from 1, for messages
 * @param out     room for frameSize numbers from `at` on
 * @throws {InputError} atoms other than the first frame's: names frame and atom
 */
export function packFrame(first: Structure, { atoms, cell, line }: EnsembleFrame, number: number, out: Float64Array, at: number): void {
  const where = `frame ${number}${line === undefined ? '' : ` (line ${line})`}`;
  const wanted = first.atoms;
  const common = Math.min(atoms.length, wanted.length);
  for (let i = 0; i < common; i++) {
    const atom = atoms[i]!;
    const own = wanted[i]!;
    if (atom.element !== own.element || (first.format !== 'xyz' && atom.name !== own.name))
      throw new InputError(
        `${where}: atom ${i + 1} is ${nameOf(atom)}, in frame 1 it is ${nameOf(own)}; all frames must list the same atoms in the same order`,
      );
    const [x, y, z] = atom.position;
    out[at + 3 * i] = x;
    out[at + 3 * i + 1] = y;
    out[at + 3 * i + 2] = z;
    if (!Number.isFinite(x + y + z)) throw new InputError(`${where}: atom ${i + 1} (${nameOf(atom)}) has a coordinate that is no number`);
  }
  if (atoms.length !== wanted.length) {
    const next = (atoms.length > wanted.length ? atoms : wanted)[common]!;
    throw new InputError(
      `${where} has ${atoms.length} atoms, frame 1 has ${wanted.length} (atom ${common + 1}, ${nameOf(next)}, is in one of them only); all frames must list the same atoms`,
    );
  }
  if (first.cell) out.set(vectorsOf(cell ?? first.cell), at + 3 * wanted.length);
}

const nameOf = ({ element, name }: Atom): string => (name.startsWith(element) && /^\d*$/.test(name.slice(element.length)) ? element : name);

/** Cell vectors as nine numbers, a first. */
function vectorsOf(cell: Cell): number[] {
  const m = cellGeometry(cell).toCartesian;
  return [m[0]!, m[3]!, m[6]!, m[1]!, m[4]!, m[7]!, m[2]!, m[5]!, m[8]!];
}

/** More sample frames than this are thinned to every other one. */
const MOST_SAMPLES = 96;

/** Mean surroundings and an even sample of the frames that were added. */
export class EnsembleSurvey {
  readonly first: Structure;
  /** Frames added. */
  count = 0;
  /** Packed frames, evenly spaced: every 2ⁿ-th, 48 to 96 of them where there are as many. */
  samples: Float64Array[] = [];
  private stride = 1;
  private readonly size: number;
  private readonly sum: Float64Array;
  private readonly previous: Float64Array;
  private readonly origin: Float64Array;
  private readonly fit: readonly number[];

  /**
   * @param first     the first frame of all, to which the others are turned
   * @param absorber, radius  the atoms within `radius` of an absorber fix the turn of a molecule
   * @throws {InputError} absorber not present
   */
  constructor(first: Structure, absorber: string, radius: number) {
    this.first = first;
    this.size = frameSize(first);
    this.sum = new Float64Array(this.size);
    this.previous = new Float64Array(this.size);
    this.origin = new Float64Array(this.size);
    packFrame(first, { atoms: first.atoms, ...(first.cell ? { cell: first.cell } : {}) }, 1, this.origin, 0);
    this.previous.set(this.origin);
    const near = findSites(first, { absorber, radius }).flatMap(({ atoms }) =>
      atoms.flatMap(({ element, source }) => (element === 'H' ? [] : [source])),
    );
    this.fit = [...new Set(near)];
  }

  /** @param frame  packed, kept by no reference */
  add(frame: Float64Array): void {
    if (this.count % this.stride === 0) {
      this.samples.push(frame.slice());
      if (this.samples.length > MOST_SAMPLES) {
        this.samples = this.samples.filter((_, i) => i % 2 === 0);
        this.stride *= 2;
      }
    }
    this.count++;
    if (this.first.cell) this.addUnwrapped(frame);
    else this.addTurned(frame);
  }

  /** The structure of the mean positions. @throws {InputError} fewer than two frames */
  mean(): Structure {
    const { first, count, sum } = this;
    if (count < 2) throw new InputError(`an ensemble needs at least 2 frames, got ${count}; predict without --ensemble takes a single one`);
    const at = (i: number): number => sum[i]! / count;
    const atoms = first.atoms.map((atom, i) => ({ ...atom, position: [at(3 * i), at(3 * i + 1), at(3 * i + 2)] as const }));
    const { cell: _, ...rest } = first;
    if (!first.cell) return { ...rest, atoms, moreFrames: [] };
    const n = 3 * atoms.length;
    const vector = (i: number): Vec3 => [at(n + 3 * i), at(n + 3 * i + 1), at(n + 3 * i + 2)];
    return { ...rest, atoms, moreFrames: [], cell: cellOfVectors(vector(0), vector(1), vector(2)) };
  }

  /** A box: each atom at the copy nearest to where it was, the drift of the whole taken off. */
  private addUnwrapped(frame: Float64Array): void {
    const n = 3 * this.first.atoms.length;
    const wrap = new NearestCopy(frame.subarray(n), this.first.repeats);
    const d = new Float64Array(3);
    const drift = new Float64Array(3);
    for (let i = 0; i < n; i += 3) {
      for (let c = 0; c < 3; c++) d[c] = frame[i + c]! - this.previous[i + c]!;
      wrap.apply(d);
      for (let c = 0; c < 3; c++) {
        this.previous[i + c]! += d[c]!;
        drift[c]! += (3 / n) * (this.previous[i + c]! - this.origin[i + c]!);
      }
    }
    for (let i = 0; i < n; i++) this.sum[i]! += this.previous[i]! - drift[i % 3]!;
    for (let i = n; i < this.size; i++) this.sum[i]! += frame[i]!;
  }

  /** A molecule: turned and shifted onto the first frame. */
  private addTurned(frame: Float64Array): void {
    const { origin, fit, sum } = this;
    const [a, b] = [centroid(frame, fit), centroid(origin, fit)];
    const R = bestRotation(frame, a, origin, b, fit);
    for (let i = 0; i < sum.length; i += 3) {
      const x = frame[i]! - a[0];
      const y = frame[i + 1]! - a[1];
      const z = frame[i + 2]! - a[2];
      for (let c = 0; c < 3; c++) sum[i + c]! += b[c]! + R[3 * c]! * x + R[3 * c + 1]! * y + R[3 * c + 2]! * z;
    }
  }
}

/** Takes differences to their nearest copy in a repeating box (exact for cells not too oblique). */
export class NearestCopy {
  private readonly vectors: Float64Array;
  private readonly inverse: Float64Array;
  private readonly repeats: readonly [boolean, boolean, boolean];

  /** @param vectors  a, b, c, nine numbers */
  constructor(vectors: Float64Array, repeats: readonly [boolean, boolean, boolean] = [true, true, true]) {
    const v = (i: number): Vec3 => [vectors[3 * i]!, vectors[3 * i + 1]!, vectors[3 * i + 2]!];
    this.vectors = vectors;
    this.inverse = cellGeometry(cellOfVectors(v(0), v(1), v(2))).toFractional;
    this.repeats = repeats;
  }

  /** @param d  (3), changed in place */
  apply(d: Float64Array): void {
    const { inverse: m, vectors: v, repeats } = this;
    const [x, y, z] = [d[0]!, d[1]!, d[2]!];
    for (let axis = 0; axis < 3; axis++) {
      if (!repeats[axis]) continue;
      const turns = Math.round(m[3 * axis]! * x + m[3 * axis + 1]! * y + m[3 * axis + 2]! * z);
      if (turns !== 0) for (let c = 0; c < 3; c++) d[c]! -= turns * v[3 * axis + c]!;
    }
  }
}

function centroid(frame: Float64Array, atoms: readonly number[]): Vec3 {
  const sum: [number, number, number] = [0, 0, 0];
  for (const i of atoms) for (let c = 0; c < 3; c++) sum[c]! += frame[3 * i + c]! / atoms.length;
  return sum;
}

/** Rotation (9, row-major) that carries the chosen atoms of `from` best onto those of `to`: Horn's largest quaternion. */
function bestRotation(from: Float64Array, a: Vec3, to: Float64Array, b: Vec3, atoms: readonly number[]): number[] {
  const S = new Float64Array(9);
  for (const i of atoms)
    for (let c = 0; c < 3; c++) for (let e = 0; e < 3; e++) S[3 * c + e]! += (from[3 * i + c]! - a[c]!) * (to[3 * i + e]! - b[e]!);
  const [xx, xy, xz, yx, yy, yz, zx, zy, zz] = S as unknown as [number, number, number, number, number, number, number, number, number];
  const N = new Matrix([
    [xx + yy + zz, yz - zy, zx - xz, xy - yx],
    [yz - zy, xx - yy - zz, xy + yx, zx + xz],
    [zx - xz, xy + yx, yy - xx - zz, yz + zy],
    [xy - yx, zx + xz, yz + zy, zz - xx - yy],
  ]);
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(N, { assumeSymmetric: true });
  const best = realEigenvalues.indexOf(Math.max(...realEigenvalues));
  const [w, x, y, z] = [0, 1, 2, 3].map((i) => eigenvectorMatrix.get(i, best)) as [number, number, number, number];
  return [
    w * w + x * x - y * y - z * z,
    2 * (x * y - w * z),
    2 * (x * z + w * y),
    2 * (x * y + w * z),
    w * w - x * x + y * y - z * z,
    2 * (y * z - w * x),
    2 * (x * z - w * y),
    2 * (y * z + w * x),
    w * w - x * x - y * y + z * z,
  ];
}
