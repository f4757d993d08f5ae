/**
 * What fills the unit cell: every atom of the file under every symmetry operation, atoms on special positions merged exactly.
 * An atom is on a special position when operations carry it onto itself; its place is then the mean of those images, which lies
 * on the symmetry element whatever digits the file was rounded to (x = 0.3333).
 */
import { type Diagnostic, InputError } from '../errors.js';
import { type CellGeometry, cellGeometry, transform } from './cell.js';
import { NeighbourGrid } from './grid.js';
import { formatOperator } from './operators.js';
import type { Atom, Structure, SymmetryOperator, Vec3 } from './types.js';

/** Å: rounding of coordinates in files stays below this; a split position is farther apart. */
const SAME_PLACE = 0.05;
/** Å: no two atoms are this close; a copy of a fully occupied atom within it is the atom itself, badly placed. */
const SAME_ATOM = 0.5;

/** Atoms per Å³ and room for a handful: no structure, with all its alternates, is nearly so dense. */
const DENSEST = 10;
const HANDFUL = 400;
/** More images of atoms in the cell than this are refused: some 50 bytes each. */
const MOST_IMAGES = 3e7;

/** One image of one atom of the file. */
export interface Image {
  readonly source: number;
  readonly symmetry: string;
  readonly position: Vec3;
  readonly distance: number;
}

export class Images {
  readonly diagnostics: Diagnostic[] = [];
  readonly geometry: CellGeometry;
  readonly isCrystal: boolean;
  readonly repeats: readonly [boolean, boolean, boolean];
  /** Occupancy of each atom of the file after merging on special positions. */
  readonly occupancy: Float64Array;
  /** Images of each atom of the file in one unit cell. */
  readonly multiplicity: Int32Array;
  /** Images an atom in general position has in one unit cell. */
  readonly order: number;
  private readonly grid: NeighbourGrid;
  private readonly sources: Int32Array;
  private readonly operatorOf: Uint16Array;
  private readonly wraps: Int32Array;
  private readonly positionOf: Float64Array;
  private readonly operators: readonly SymmetryOperator[];
  private readonly names = new Map<string, string>();

  constructor(structure: Structure) {
    const { atoms } = structure;
    this.isCrystal = structure.cell !== undefined;
    this.operators = this.isCrystal ? structure.operators : structure.operators.slice(0, 1);
    this.order = this.operators.length;
    this.geometry = structure.cell ? cellGeometry(structure.cell) : UNIT_CUBE;
    this.repeats = structure.cell ? (structure.repeats ?? [true, true, true]) : [false, false, false];
    this.occupancy = Float64Array.from(atoms, (atom) => atom.occupancy);
    this.multiplicity = new Int32Array(atoms.length);
    this.positionOf = new Float64Array(3 * atoms.length);

    const room = atoms.length * this.operators.length;
    if (room > MOST_IMAGES) {
      throw new InputError(
        `${atoms.length} atoms under ${this.operators.length} symmetry operators are more than the ${MOST_IMAGES / 1e6} million that can be held; cut out the part around the absorber`,
      );
    }
    const fractional = new Float64Array(3 * room);
    this.sources = new Int32Array(room);
    this.operatorOf = new Uint16Array(room);
    this.wraps = new Int32Array(3 * room);
    let count = 0;
    for (let source = 0; source < atoms.length; source++) {
      const f = this.settle(atoms[source]!, source, structure.format === 'pdb' || structure.format === 'mmcif');
      const start = count;
      for (let o = 0; o < this.operators.length; o++) {
        const operator = this.operators[o]!;
        const g = apply(operator, f);
        for (let axis = 0; axis < 3; axis++) {
          const wrap = this.repeats[axis] ? -floorNear(g[axis]!) : 0;
          this.wraps[3 * count + axis] = wrap;
          fractional[3 * count + axis] = g[axis]! + wrap;
        }
        if (this.isSpecial && this.isThere(fractional, start, count)) continue;
        this.sources[count] = source;
        this.operatorOf[count] = o;
        count++;
      }
      this.multiplicity[source] = count - start;
    }
    if (this.isCrystal) this.checkDensity(atoms);
    this.grid = new NeighbourGrid(fractional.subarray(0, 3 * count), this.geometry, this.repeats);
  }

  /**
   * A cell written in nm, or in the wrong setting, holds more atoms than any crystal (diamond: 0.18 per Å³) and would be searched
   * for ever.
   */
  private checkDensity(atoms: readonly Atom[]): void {
    let count = 0;
    for (let i = 0; i < atoms.length; i++) if (atoms[i]!.element !== 'H') count += this.multiplicity[i]! * this.occupancy[i]!;
    const { volume, reciprocal } = this.geometry;
    const thinnest = 1 / Math.max(...reciprocal);
    if (count / volume > 0.5 || thinnest < SAME_ATOM) {
      throw new InputError(
        `the unit cell holds ${count.toFixed(0)} atoms in ${Number(volume.toPrecision(4))} Å³, denser than any crystal; its lengths should be in Å and its symmetry operators those of its setting`,
      );
    }
  }

  /** Atoms per Å³ without hydrogens, or undefined where nothing repeats in three dimensions. */
  density(atoms: readonly Atom[]): number | undefined {
    if (!this.isCrystal || this.repeats.includes(false)) return undefined;
    let sum = 0;
    for (let i = 0; i < atoms.length; i++) if (atoms[i]!.element !== 'H') sum += this.multiplicity[i]! * this.occupancy[i]!;
    return sum / this.geometry.volume;
  }

  /** Where an atom of the file lies, Å, on its special position if it has one. */
  position(source: number): Vec3 {
    return [this.positionOf[3 * source]!, this.positionOf[3 * source + 1]!, this.positionOf[3 * source + 2]!];
  }

  /**
   * All images within `radius` of a point, unsorted.
   * @throws {InputError} more atoms than any structure has there: each would be met with every other
   */
  around(centre: Vec3, radius: number): Image[] {
    const found: Image[] = [];
    const most = HANDFUL + DENSEST * 4.19 * radius ** 3;
    this.grid.visit(centre, radius, (index, shift, x, y, z, d2) => {
      if (found.length >= most) {
        const place = centre.map((v) => v.toFixed(1)).join(' ');
        throw new InputError(
          `more than ${Math.floor(most)} atoms lie within ${radius} Å of ${place}; coordinates should be in Å, and each atom be there once`,
        );
      }
      found.push({ source: this.sources[index]!, symmetry: this.symmetryOf(index, shift), position: [x, y, z], distance: Math.sqrt(d2) });
    });
    return found;
  }

  private symmetryOf(index: number, shift: Vec3): string {
    const o = this.operatorOf[index]!;
    const t = [0, 1, 2].map((axis) => this.wraps[3 * index + axis]! + shift[axis]!);
    const key = `${o}|${t.join()}`;
    let name = this.names.get(key);
    if (name === undefined) {
      const { rotation, translation } = this.operators[o]!;
      name = formatOperator(
        rotation,
        translation.map((v, axis) => v + t[axis]!),
      );
      this.names.set(key, name);
    }
    return name;
  }

  private isSpecial = false;

  /** Fractional place of an atom, moved onto its special position; records place, occupancy and whether it is special. */
  private settle(atom: Atom, source: number, occupancyIsShared: boolean): Vec3 {
    const f = transform(this.geometry.toFractional, atom.position);
    this.isSpecial = false;
    const sum = [f[0], f[1], f[2]] as [number, number, number];
    let order = 1;
    let farthest = 0;
    for (let o = 1; o < this.operators.length; o++) {
      const g = apply(this.operators[o]!, f);
      const near = [0, 1, 2].map((axis) => g[axis]! - (this.repeats[axis] ? Math.round(g[axis]! - f[axis]!) : 0)) as unknown as Vec3;
      const apart = this.apart(near, f);
      if (apart > (atom.occupancy > 0.5 ? SAME_ATOM : SAME_PLACE)) continue;
      farthest = Math.max(farthest, apart);
      for (let axis = 0; axis < 3; axis++) sum[axis]! += near[axis]!;
      order++;
    }
    let place = f;
    if (order > 1) {
      this.isSpecial = true;
      place = [sum[0] / order, sum[1] / order, sum[2] / order];
      if (farthest > SAME_PLACE) {
        this.diagnostics.push({
          code: 'near-special-position',
          message: `${atom.name} lies ${farthest.toFixed(2)} Å from its own symmetry copy with occupancy ${atom.occupancy}; it is placed on the symmetry element`,
          ...(atom.line === undefined ? {} : { line: atom.line }),
        });
      }
      // The PDB's custom: an atom on a twofold axis carries occupancy 0.5, for each operation makes it anew. CIF states the chemical one.
      if (occupancyIsShared && atom.occupancy <= 1 / order + 0.02) this.occupancy[source] = Math.min(1, atom.occupancy * order);
    }
    const r = order > 1 ? transform(this.geometry.toCartesian, place) : atom.position;
    this.positionOf.set(r, 3 * source);
    return place;
  }

  private apart(u: Vec3, v: Vec3): number {
    const d = transform(this.geometry.toCartesian, [u[0] - v[0], u[1] - v[1], u[2] - v[2]]);
    return Math.hypot(d[0], d[1], d[2]);
  }

  /** Whether the image at `index` coincides, up to lattice translations, with one of [start, index). */
  private isThere(fractional: Float64Array, start: number, index: number): boolean {
    const d: [number, number, number] = [0, 0, 0];
    for (let other = start; other < index; other++) {
      for (let axis = 0; axis < 3; axis++) {
        const delta = fractional[3 * index + axis]! - fractional[3 * other + axis]!;
        d[axis] = delta - (this.repeats[axis] ? Math.round(delta) : 0);
      }
      if (this.apart(d, [0, 0, 0]) < SAME_PLACE) return true;
    }
    return false;
  }
}

/** floor, but a value a rounding error below an integer counts as that integer, so that 0 and 1 do not flicker. */
const floorNear = (value: number): number => Math.floor(value + 1e-9);

function apply({ rotation: m, translation: t }: SymmetryOperator, f: Vec3): Vec3 {
  return [
    m[0]! * f[0] + m[1]! * f[1] + m[2]! * f[2] + t[0],
    m[3]! * f[0] + m[4]! * f[1] + m[5]! * f[2] + t[1],
    m[6]! * f[0] + m[7]! * f[1] + m[8]! * f[2] + t[2],
  ];
}

/** A molecule's "cell" is the unit cube, so that fractional is Cartesian. */
const UNIT_CUBE: CellGeometry = {
  toCartesian: Float64Array.of(1, 0, 0, 0, 1, 0, 0, 0, 1),
  toFractional: Float64Array.of(1, 0, 0, 0, 1, 0, 0, 0, 1),
  volume: 1,
  reciprocal: [1, 1, 1],
};
