/** Single-scattering paths: absorber, neighbour and back, neighbours alike joined. Å. */
import type { Site } from '../structure/types.js';
import type { Path } from './types.js';

/** Half lengths this close, Å, count as equal: far below what a spectrum tells apart (0.0005 Å is 1 % of a radian at k = 10 Å⁻¹). */
const TOLERANCE = 5e-4;

/**
 * All two-leg paths to neighbours with a sphere within the radius, by length.
 *
 * Neighbours of one kind join the shortest of their group while they lie within TOLERANCE of it, so that a group never
 * drifts and rounding in a file's last digit splits none that symmetry joins. A neighbour of partial occupancy counts in part.
 */
export function singleScatteringPaths(site: Site, kindOfAtom: Int32Array, radius: number): Path[] {
  const paths: { vertices: number[]; legs: number; halfLength: number; degeneracy: number; members: number[][] }[] = [];
  const open = new Map<number, (typeof paths)[number]>();
  site.atoms.forEach(({ distance, occupancy }, atom) => {
    const kind = kindOfAtom[atom]!;
    if (atom === 0 || kind < 0 || distance > radius) return;
    const last = open.get(kind);
    if (last && distance - last.halfLength <= TOLERANCE) {
      last.members.push([0, atom]);
      last.degeneracy += occupancy;
      return;
    }
    const path = { vertices: [0, atom], legs: 2, halfLength: distance, degeneracy: occupancy, members: [[0, atom]] };
    open.set(kind, path);
    paths.push(path);
  });
  return paths;
}
