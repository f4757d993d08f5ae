/**
 * Disorder about a symmetry element (a CIF's disorder group below 0, "PART −1"; or an atom half there beside its own image, without a
 * word): an atom and its own image by the site symmetry are never there together. Of the copies of such a group that get in each
 * other's way, one is present, all its atoms with it.
 */
import { longestBond } from './bonding.js';
import { distance } from './cell.js';
import type { Disorder, DisorderGroup } from './disorder-groups.js';
import type { Image, Images } from './images.js';
import type { Atom } from './types.js';

/** Å: two atoms nearer than this cannot both be there; the shortest bond of atoms that are no pair of their own is C=C, 1.33. */
const CLASH = 1.3;
/** Å: the same for an atom and its own image: no bond of two like atoms across a symmetry element is drawn as disorder. */
const OWN_CLASH = 2;

/** Who excludes whom in one cluster. */
export interface LocalDisorder {
  readonly groups: readonly DisorderGroup[];
  /** Index into groups, −1 for none. */
  readonly groupOf: (image: Image) => number;
  readonly labelOf: (image: Image) => string;
}

/** Å: closer than any two atoms that are not hydrogen. */
export const SAME_SPOT = 0.8;
/** Occupancies are rounded to two digits. */
export const SLACK = 0.05;

/** Whether a CIF says that an atom is disordered about a symmetry element. */
export const isOriented = ({ alternate, residue }: Atom): boolean =>
  residue === undefined && alternate !== undefined && /^-\d/.test(alternate);

/** 1 for every atom in general position that excludes its own images. */
export function orientedAtoms(atoms: readonly Atom[], images: Images): Uint8Array {
  return Uint8Array.from(atoms, (atom, source) => {
    const occupancy = images.occupancy[source]!;
    if (!images.isCrystal || images.multiplicity[source] !== images.order || !(occupancy > 0)) return 0;
    if (isOriented(atom)) return 1;
    if (atom.alternate !== undefined || atom.element === 'H' || occupancy > 0.5 + SLACK) return 0;
    return images.around(images.position(source), SAME_SPOT).some((image) => image.source === source && image.distance > 1e-6) ? 1 : 0;
  });
}

/**
 * Adds to the disorder of a structure one group for every place of a cluster where copies by symmetry exclude each other. Atoms on
 * the symmetry element itself belong to every copy and to no group. Cost: square of the number of such atoms in the cluster.
 */
export function localDisorder(disorder: Disorder, atoms: readonly Atom[], images: Images, cluster: readonly Image[]): LocalDisorder {
  const oriented = cluster.filter(({ source }) => disorder.oriented[source] === 1);
  if (oriented.length === 0) {
    return {
      groups: disorder.groups,
      groupOf: ({ source }) => disorder.groupOf[source]!,
      labelOf: ({ source }) => disorder.labelOf(source),
    };
  }
  const copyOf = ({ source, symmetry }: Image): string => `${atoms[source]!.alternate ?? atoms[source]!.name} at ${symmetry}`;
  const root = oriented.map((_, i) => i);
  const find = (i: number): number => {
    let at = i;
    while (root[at] !== at) at = root[at]!;
    return at;
  };
  for (let i = 0; i < oriented.length; i++) {
    for (let j = 0; j < i; j++) {
      const [a, b] = [oriented[i]!, oriented[j]!];
      const elements = [atoms[a.source]!.element, atoms[b.source]!.element] as const;
      const isOneCopy = copyOf(a) === copyOf(b);
      if (!isOneCopy && elements.includes('H')) continue;
      const reach = isOneCopy ? longestBond(...elements) : a.source === b.source ? OWN_CLASH : CLASH;
      if (distance(a.position, b.position) < reach) root[find(i)] = find(j);
    }
  }
  const groups = [...disorder.groups];
  const groupOf = new Map<Image, number>();
  const places = new Map<number, Image[]>();
  oriented.forEach((image, i) => {
    const place = places.get(find(i));
    if (place) place.push(image);
    else places.set(find(i), [image]);
  });
  for (const place of places.values()) {
    const labels = [...new Set(place.map(copyOf))].sort();
    const weights = labels.map((label) => {
      const own = place.filter((image) => copyOf(image) === label);
      return own.reduce((sum, { source }) => sum + images.occupancy[source]!, 0) / own.length;
    });
    for (const image of place) groupOf.set(image, groups.length);
    groups.push({ labels, weights });
  }
  return {
    groups,
    groupOf: (image) => groupOf.get(image) ?? disorder.groupOf[image.source]!,
    labelOf: (image) => (groupOf.has(image) ? copyOf(image) : disorder.labelOf(image.source)),
  };
}
