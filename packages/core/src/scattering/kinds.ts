/** Which atoms of a site share a muffin-tin sphere: one kind per element, and the absorber on its own with its core hole. */
import type { Site } from '../structure/types.js';

export interface ScattererKinds {
  /** For each atom of the site its kind: 0 the absorber, −1 left out (hydrogen, or farther than any path). */
  readonly kindOfAtom: Int32Array;
  /** For each kind the atom whose surroundings stand for it: the one nearest to the absorber. */
  readonly representatives: readonly number[];
}

/**
 * @param radius  Å; atoms farther from the absorber scatter in no path and belong to no kind
 *
 * Hydrogens are left out: touching spheres with a hydrogen at 0.97 Å squeeze the oxygen's sphere and raise the interstitial
 * density, and no measured spectrum decides what would be right.
 */
export function scattererKinds(site: Site, radius: number): ScattererKinds {
  const kindOfAtom = new Int32Array(site.atoms.length).fill(-1);
  const representatives = [0];
  const kindOfElement = new Map<string, number>();
  kindOfAtom[0] = 0;
  for (let i = 1; i < site.atoms.length; i++) {
    const { element, distance } = site.atoms[i]!;
    if (element === 'H' || distance > radius) continue;
    let kind = kindOfElement.get(element);
    if (kind === undefined) {
      kind = representatives.length;
      kindOfElement.set(element, kind);
      representatives.push(i); // atoms stand by distance, so the first is the nearest
    }
    kindOfAtom[i] = kind;
  }
  return { kindOfAtom, representatives };
}
