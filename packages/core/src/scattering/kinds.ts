/**
 * Which atoms of a site share a muffin-tin sphere: one kind per element, or per element and surroundings; the absorber on its own
 * with its core hole.
 */
import type { FreeAtom } from '../atom/types.js';
import { bohrFromAngstrom, hartreeFromEv } from '../constants.js';
import type { Site } from '../structure/types.js';

export interface ScattererKinds {
  /** For each atom of the site its kind: 0 the absorber, −1 left out (hydrogen, or farther than any path). */
  readonly kindOfAtom: Int32Array;
  /** For each kind the atom whose surroundings stand for it: the one nearest to the absorber. */
  readonly representatives: readonly number[];
}

/** Atoms of one element whose neighbours bring potentials within this to their centres share a sphere. */
const SAME_SURROUNDINGS = hartreeFromEv(1);
/** Å: farther atoms found no kind of their own; a finite cluster ends there, and what they lack would look like surroundings. */
const FOUNDING_DISTANCE = 4;
/** Most kinds of one element: each costs its phase shifts. */
const MOST_KINDS = 4;
/** Å: neighbours beyond bring less than 1e-3 eV. */
const REACH = 7;

/**
 * @param radius  Å; atoms farther from the absorber scatter in no path and belong to no kind
 * @param atomOfElement  free atoms: given, atoms of an element are told apart by the potential that the overlapped free atoms around
 *   bring to their centres (an oxo oxygen −2.1 eV, a water oxygen −0.4 eV); absent, an element is one kind
 *
 * Hydrogens are left out: touching spheres with a hydrogen at 0.97 Å squeeze the oxygen's sphere and raise the interstitial
 * density, and no measured spectrum decides what would be right.
 */
export function scattererKinds(site: Site, radius: number, atomOfElement?: (element: string) => FreeAtom): ScattererKinds {
  const kindOfAtom = new Int32Array(site.atoms.length).fill(-1);
  const representatives = [0];
  const known = new Map<string, { kind: number; potential: number }[]>();
  kindOfAtom[0] = 0;
  for (let i = 1; i < site.atoms.length; i++) {
    const { element, distance } = site.atoms[i]!;
    if (element === 'H' || distance > radius) continue;
    const kinds = known.get(element) ?? [];
    known.set(element, kinds);
    const potential = atomOfElement ? neighbourPotential(site, i, atomOfElement) : 0;
    const nearest = kinds.reduce<{ kind: number; potential: number } | undefined>(
      (best, one) => (best && Math.abs(best.potential - potential) <= Math.abs(one.potential - potential) ? best : one),
      undefined,
    );
    const mayFound = distance <= FOUNDING_DISTANCE && kinds.length < MOST_KINDS;
    if (nearest && (!mayFound || Math.abs(nearest.potential - potential) <= SAME_SURROUNDINGS)) {
      kindOfAtom[i] = nearest.kind;
      continue;
    }
    kindOfAtom[i] = representatives.length;
    kinds.push({ kind: representatives.length, potential });
    representatives.push(i); // atoms stand by distance, so the first is the nearest
  }
  return { kindOfAtom, representatives };
}

/** Coulomb potential of the free atoms around at the centre of one atom, hartree. */
function neighbourPotential(site: Site, centre: number, atomOfElement: (element: string) => FreeAtom): number {
  const [x, y, z] = site.atoms[centre]!.position;
  let sum = 0;
  site.atoms.forEach(({ element, position, occupancy }, other) => {
    if (other === centre || element === 'H') return;
    const distance = Math.hypot(position[0] - x, position[1] - y, position[2] - z);
    if (distance <= REACH) sum += occupancy * coulombAt(atomOfElement(element), bohrFromAngstrom(distance));
  });
  return sum;
}

/** Linear in ln r between mesh points 1 % apart: ample to tell surroundings apart. */
function coulombAt({ x0, dx, rCoulomb }: FreeAtom, r: number): number {
  const at = (Math.log(r) - x0) / dx;
  const i = Math.floor(at);
  if (i + 1 >= rCoulomb.length) return 0;
  return (rCoulomb[i]! + (at - i) * (rCoulomb[i + 1]! - rCoulomb[i]!)) / r;
}
