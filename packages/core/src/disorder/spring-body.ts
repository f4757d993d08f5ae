/**
 * What vibrates: the atoms of a molecule, of a cluster cut out of something larger, or of a crystal's cell.
 * Of atoms that cannot be there together (alternates, partly occupied places nearer than 0.7 Å) the one of the highest
 * occupancy is kept; the others share its motion.
 */
import { InputError } from '../errors.js';
import type { Site, Structure, Vec3 } from '../structure/types.js';
import { combine, dot3, latticeOf, nearestImage, reciprocal } from './lattice.js';
import type { SpringAtom, SpringBody } from './spring-terms.js';

const TOGETHER = 0.7;
/** Atoms nearer to the cut than this may lack neighbours, Å. */
const EDGE = 2.8;

/** u; of `element`. */
export type MassOf = (element: string) => number;

interface Candidate {
  readonly element: string;
  readonly position: Vec3;
  readonly occupancy: number;
}

/** Cells of more atoms than this are not taken whole: their modes cost (6n)³ at every wave vector. */
const LARGEST_CELL = 48;

/**
 * What to let vibrate for a site: the whole crystal where its cell is small, else the site's cluster.
 *
 * @param site  of this structure; with a large cell its radius should reach some 5 Å beyond the paths wanted
 * @throws {InputError} see springBodyOfCrystal and springBodyOfSite
 */
export function springBodyOf(structure: Structure, site: Site, massOf: MassOf): SpringBody {
  const isCrystal = structure.cell !== undefined && site.periodic && !structure.repeats?.includes(false);
  if (!isCrystal || structure.atoms.length > LARGEST_CELL) return springBodyOfSite(site, massOf);
  const body = springBodyOfCrystal(structure, massOf);
  return body.atoms.length <= LARGEST_CELL ? body : springBodyOfSite(site, massOf);
}

/**
 * A site's cluster as a spring body. A molecule that lies wholly inside is free; where the cluster was cut, the atoms
 * within 2.8 Å of the cut are held at the mean stiffness of the inner ones (see springNetwork).
 *
 * @throws {InputError} the cluster is too small to have an inside
 */
export function springBodyOfSite(site: Site, massOf: MassOf): SpringBody {
  const kept = keepPossible(site.atoms, (a, b) => Math.hypot(...a.map((x, c) => x - b[c]!)));
  const atoms = kept.map(({ element, position }): SpringAtom => ({ element, position, mass: massOf(element) }));
  if (site.radius === Infinity) return { atoms };
  const centre = site.atoms[0]!.position;
  const edge = atoms.flatMap(({ position }, i) => (Math.hypot(...position.map((x, c) => x - centre[c]!)) > site.radius - EDGE ? [i] : []));
  if (edge.length === 0) return { atoms };
  if (edge.length === atoms.length || site.radius <= EDGE)
    throw new InputError(`spring network: a cluster of radius ${site.radius} Å has no inside, wanted more than ${EDGE} Å`);
  return { atoms, edge };
}

/**
 * The whole cell of a crystal, expanded by its operators, as a repeating spring body.
 *
 * @throws {InputError} no cell, a cell that repeats in less than three dimensions, or no atoms
 */
export function springBodyOfCrystal(structure: Structure, massOf: MassOf): SpringBody {
  if (!structure.cell) throw new InputError('spring network: the structure has no cell to repeat by');
  if (structure.repeats?.includes(false))
    throw new InputError('spring network: a slab or wire does not repeat in three dimensions; use its cluster');
  if (structure.atoms.length === 0) throw new InputError('spring network: the structure has no atoms');
  const lattice = latticeOf(structure.cell);
  const inverse = reciprocal(lattice);
  const all: Candidate[] = [];
  for (const { rotation: r, translation: t } of structure.operators) {
    for (const atom of structure.atoms) {
      const f = inverse.map((row) => dot3(row, atom.position));
      const g = [0, 1, 2].map((i) => {
        const x = r[3 * i]! * f[0]! + r[3 * i + 1]! * f[1]! + r[3 * i + 2]! * f[2]! + t[i]!;
        return x - Math.floor(x + 1e-9);
      }) as unknown as Vec3;
      all.push({ element: atom.element, position: combine(lattice, g), occupancy: atom.occupancy });
    }
  }
  const kept = keepPossible(all, (a, b) => Math.hypot(...nearestImage([a[0] - b[0], a[1] - b[1], a[2] - b[2]], lattice, inverse)));
  return { atoms: kept.map(({ element, position }) => ({ element, position, mass: massOf(element) })), lattice };
}

function keepPossible<T extends Candidate>(all: readonly T[], distance: (a: Vec3, b: Vec3) => number): T[] {
  const order = all.map((_, i) => i).sort((a, b) => all[b]!.occupancy - all[a]!.occupancy || a - b);
  const kept: number[] = [];
  for (const i of order) if (kept.every((j) => distance(all[i]!.position, all[j]!.position) >= TOGETHER)) kept.push(i);
  return kept.sort((a, b) => a - b).map((i) => all[i]!);
}
