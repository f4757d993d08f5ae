/**
 * Which atoms exclude each other. Alternates of one residue (or CIF assembly) are one group with labels A, B, …; atoms that share a
 * place without saying so (mixed occupation, split metals), occupancies summing to at most 1, are a group too. In one molecule
 * exactly one label of each group is present.
 */
import { distance } from './cell.js';
import type { Image, Images } from './images.js';
import { isOriented, type LocalDisorder, orientedAtoms, SAME_SPOT, SLACK } from './orientations.js';
import type { Atom, Structure } from './types.js';

/** Å: alternates of two residues that touch so, and carry the same labels, were refined together. */
const IN_CONTACT = 4;

export interface DisorderGroup {
  readonly labels: readonly string[];
  /** Occupancy of each label. */
  readonly weights: readonly number[];
}

export interface Disorder {
  readonly groups: readonly DisorderGroup[];
  /** Group of each atom of the file, −1 for none. */
  readonly groupOf: Int32Array;
  /** 1 for every atom that excludes its own images by symmetry (orientations.ts). */
  readonly oriented: Uint8Array;
  /** Label of each atom within its group. */
  readonly labelOf: (source: number) => string;
}

export function findDisorder(structure: Structure, images: Images): Disorder {
  const { atoms } = structure;
  const groupOf = new Int32Array(atoms.length).fill(-1);
  const keys = new Map<string, number[]>();
  atoms.forEach((atom, source) => {
    if (atom.alternate === undefined || atom.occupancy === 0 || isOriented(atom)) return;
    const residue = atom.residue;
    const key = residue ? `${residue.chain}|${residue.number}${residue.insertion}` : `assembly ${atom.assembly ?? ''}`;
    const members = keys.get(key);
    if (members) members.push(source);
    else keys.set(key, [source]);
  });
  const implicit = new Map<number, string>();
  const labelOf = (source: number) => implicit.get(source) ?? atoms[source]!.alternate ?? '';
  const memberLists = [...keys.values()];
  for (const members of sharedPlaces(atoms, images)) {
    members.forEach((source) => {
      implicit.set(source, labelIn(atoms[source]!, source));
    });
    memberLists.push(members);
  }
  const groups: DisorderGroup[] = [];
  for (const members of memberLists) {
    const labels = [...new Set(members.map(labelOf))].sort();
    const weights = labels.map((label) => {
      const own = members.filter((source) => labelOf(source) === label);
      return own.reduce((sum, source) => sum + images.occupancy[source]!, 0) / own.length;
    });
    for (const source of members) groupOf[source] = groups.length;
    groups.push({ labels, weights });
  }
  return { groups, groupOf, oriented: orientedAtoms(atoms, images), labelOf };
}

const labelIn = (atom: Atom, source: number): string =>
  `${atom.name}${atom.residue ? ` ${atom.residue.chain}${atom.residue.number}` : ''}#${source}`;

/** Sets of atoms without alternate labels, of different sources, that sit on one spot with occupancies summing to at most 1. */
function sharedPlaces(atoms: readonly Atom[], images: Images): number[][] {
  const root = new Map<number, number>();
  const find = (source: number): number => {
    let at = source;
    while (root.get(at) !== at) at = root.get(at)!;
    return at;
  };
  atoms.forEach((atom, source) => {
    if (atom.alternate !== undefined || atom.element === 'H' || !(images.occupancy[source]! > 0 && images.occupancy[source]! < 1)) return;
    for (const other of images.around(images.position(source), SAME_SPOT)) {
      const partner = atoms[other.source]!;
      if (other.source === source || partner.alternate !== undefined || partner.element === 'H') continue;
      if (images.occupancy[source]! + images.occupancy[other.source]! > 1 + SLACK) continue;
      for (const s of [source, other.source]) if (!root.has(s)) root.set(s, s);
      root.set(find(source), find(other.source));
    }
  });
  const sets = new Map<number, number[]>();
  for (const source of root.keys()) {
    const key = find(source);
    const set = sets.get(key);
    if (set) set.push(source);
    else sets.set(key, [source]);
  }
  return [...sets.values()].map((set) => set.sort((a, b) => a - b));
}

/** One way the groups around a site can be: which label each group shows, and how likely that is. */
export interface Combination {
  readonly weight: number;
  readonly labels: ReadonlyMap<number, string>;
  /** "A", "A+B"; empty when there is one way only. */
  readonly name: string;
}

/**
 * The combinations of alternates near a site, most likely first. Groups in contact that carry the same labels go together (a side
 * chain and its water, refined as A and B); others are independent. Beyond `limit` combinations the least likely are dropped.
 *
 * @param cluster  images around the absorber
 * @param near     Å: groups with an atom this near vary; farther ones show their likeliest label
 * @param fixed    group and label of the absorber itself
 * @returns the combinations, their weights summing to 1 − dropped
 */
export function combinations(
  { groups, groupOf, labelOf }: LocalDisorder,
  cluster: readonly Image[],
  near: number,
  fixed: { readonly group: number; readonly label: string } | undefined,
  limit: number,
): { readonly list: readonly Combination[]; readonly dropped: number } {
  const members = new Map<number, Image[]>();
  for (const image of cluster) {
    const group = groupOf(image);
    if (group < 0) continue;
    const list = members.get(group);
    if (list) list.push(image);
    else members.set(group, [image]);
  }
  if (fixed && !members.has(fixed.group)) members.set(fixed.group, []);
  const units: { groups: number[]; near: boolean }[] = [];
  for (const [group, own] of members) {
    const isNear = own.some((image) => image.distance <= near);
    const joined = units.filter((unit) =>
      unit.groups.some((other) => {
        if (groups[other]!.labels.join() !== groups[group]!.labels.join()) return false;
        const theirs = members.get(other)!;
        return own.some((a) => theirs.some((b) => labelOf(a) === labelOf(b) && distance(a.position, b.position) < IN_CONTACT));
      }),
    );
    const unit = { groups: [group, ...joined.flatMap((other) => other.groups)], near: isNear || joined.some((other) => other.near) };
    for (const other of joined) units.splice(units.indexOf(other), 1);
    units.push(unit);
  }
  let list: { weight: number; labels: Map<number, string>; parts: string[] }[] = [{ weight: 1, labels: new Map(), parts: [] }];
  let dropped = 0;
  for (const unit of units) {
    const { labels } = groups[unit.groups[0]!]!;
    const weights = labels.map((_, i) => unit.groups.reduce((sum, group) => sum + groups[group]!.weights[i]!, 0));
    const total = weights.reduce((sum, weight) => sum + weight, 0);
    let options = labels.map((label, i) => ({ label, weight: weights[i]! / total })).filter(({ weight }) => weight > 0);
    if (fixed && unit.groups.includes(fixed.group)) options = [{ label: fixed.label, weight: 1 }];
    else if (!unit.near)
      options = [{ label: options.reduce((best, option) => (option.weight > best.weight ? option : best)).label, weight: 1 }];
    const isChoice = options.length > 1;
    list = list.flatMap((one) =>
      options.map(({ label, weight }) => ({
        weight: one.weight * weight,
        labels: new Map([...one.labels, ...unit.groups.map((group) => [group, label] as const)]),
        parts: isChoice ? [...one.parts, label.replace(/#\d+$/, '')] : one.parts,
      })),
    );
    list.sort((a, b) => b.weight - a.weight);
    for (const lost of list.splice(limit)) dropped += lost.weight;
  }
  return { list: list.map(({ weight, labels, parts }) => ({ weight, labels, name: parts.join('+') })), dropped };
}
