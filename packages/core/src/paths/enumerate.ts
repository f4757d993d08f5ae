/**
 * All closed routes of the photoelectron over a site, alike ones joined. Å.
 *
 * Two routes are alike when their vertices scatter alike (same kinds) and all distances between their vertices are alike, read
 * forwards or backwards: then their amplitudes are equal, time reversal and mirror images included.
 */
import { checkRunning, InputError, type Running } from '../errors.js';
import type { Site } from '../structure/types.js';
import type { Path } from './types.js';

/** Distances within this of each other, Å, are alike: 0.004 rad at k = 10 Å⁻¹. */
const TOLERANCE = 2e-4;

/** More groups than this are refused, so that memory stays bounded (about 300 bytes each). */
const MOST_GROUPS = 2_000_000;

export interface EnumerationInput {
  readonly site: Site;
  /** For each atom of the site its kind, 0 the absorber alone, −1 for atoms that do not scatter. */
  readonly kindOfAtom: Int32Array;
  /** Longest half path length, Å. */
  readonly radius: number;
  /** 2 … 5 */
  readonly maxLegs: number;
}

/** A group while it is being counted. */
interface Group {
  /** The member that stands for all: the one of the smallest size, whatever the order of the atoms. */
  vertices: number[];
  halfLength: number;
  /** Sum of all distances between its vertices, Å. */
  size: number;
  degeneracy: number;
  readonly members: number[][];
}

/**
 * Every group of routes with 2 … maxLegs legs and a half length within the radius, by half length. Both directions of a
 * route count; members list one direction.
 *
 * @throws {InputError} more groups than memory is given for
 * @throws {CancelledError} asked to stop
 */
export function enumeratePaths({ site, kindOfAtom, radius, maxLegs }: EnumerationInput, running?: Running): Path[] {
  const atoms: number[] = [0];
  for (let i = 1; i < site.atoms.length; i++) if (kindOfAtom[i]! >= 0 && site.atoms[i]!.distance <= radius) atoms.push(i);
  const distances = distanceMatrix(site, atoms);
  const classes = distanceClasses(distances, 2 * radius);
  const n = atoms.length;
  const groups = new Map<string, Group>();
  const route = [0];

  const record = (length: number): void => {
    const weight = directionWeight(route);
    if (weight === 0) return;
    let share = weight;
    for (const vertex of new Set(route)) if (vertex !== 0) share *= site.atoms[atoms[vertex]!]!.occupancy;
    const key = keyOf(route, atoms, kindOfAtom, classes, n);
    const group = groups.get(key);
    const members = route.map((vertex) => atoms[vertex]!);
    if (group) {
      group.degeneracy += share;
      group.members.push(members);
      const size = sizeOf(route, distances, n);
      if (size < group.size) Object.assign(group, { vertices: members, halfLength: length / 2, size });
      return;
    }
    if (groups.size >= MOST_GROUPS) {
      throw new InputError(`more than ${MOST_GROUPS} different paths lie within ${radius} Å: use a smaller radius or fewer legs`);
    }
    groups.set(key, {
      vertices: members,
      halfLength: length / 2,
      size: sizeOf(route, distances, n),
      degeneracy: share,
      members: [members],
    });
  };

  const extend = (length: number): void => {
    const last = route[route.length - 1]!;
    for (let next = 0; next < n; next++) {
      if (next === last) continue;
      const reached = length + distances[last * n + next]!;
      if (reached + distances[next * n]! > 2 * radius + 1e-9) continue;
      if (route.length === 1) {
        checkRunning(running);
        running?.onProgress?.('paths', next / n);
      }
      route.push(next);
      if (next !== 0) record(reached + distances[next * n]!);
      if (route.length < maxLegs) extend(reached);
      route.pop();
    }
  };
  extend(0);

  return [...groups.values()]
    .map(({ vertices, halfLength, degeneracy, members }) => ({ vertices, halfLength, degeneracy, members, legs: vertices.length }))
    .sort((a, b) => a.halfLength - b.halfLength || a.legs - b.legs || compare(a.vertices, b.vertices));
}

/** 2 for a route read once for both directions, 1 for one equal to its reverse, 0 for the direction not read. */
function directionWeight(route: readonly number[]): 0 | 1 | 2 {
  for (let i = 1, j = route.length - 1; i < j; i++, j--) {
    if (route[i]! < route[j]!) return 2;
    if (route[i]! > route[j]!) return 0;
  }
  return 1;
}

function distanceMatrix(site: Site, atoms: readonly number[]): Float64Array {
  const n = atoms.length;
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    const p = site.atoms[atoms[i]!]!.position;
    for (let j = 0; j < i; j++) {
      const q = site.atoms[atoms[j]!]!.position;
      out[i * n + j] = Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
      out[j * n + i] = out[i * n + j]!;
    }
  }
  return out;
}

/**
 * A number for each distance, the same for alike ones. A class begins at its shortest member and reaches TOLERANCE from there,
 * so it never drifts; distances that symmetry makes equal differ by rounding only and fall together wherever they lie.
 */
function distanceClasses(distances: Float64Array, longest: number): Int32Array {
  const order = Array.from(distances.keys()).filter((i) => distances[i]! <= longest);
  order.sort((a, b) => distances[a]! - distances[b]!);
  const classes = new Int32Array(distances.length).fill(-1);
  let start = Number.NEGATIVE_INFINITY;
  let number = -1;
  for (const i of order) {
    if (distances[i]! - start > TOLERANCE) {
      start = distances[i]!;
      number++;
    }
    classes[i] = number;
  }
  return classes;
}

function sizeOf(route: readonly number[], distances: Float64Array, n: number): number {
  let size = 0;
  for (let i = 0; i < route.length; i++) for (let j = 0; j < i; j++) size += distances[route[i]! * n + route[j]!]!;
  return size;
}

/** Kinds of the vertices and classes of all distances between them, read in the direction that comes first. */
function keyOf(route: readonly number[], atoms: readonly number[], kindOfAtom: Int32Array, classes: Int32Array, n: number): string {
  const forward = describe(route, atoms, kindOfAtom, classes, n);
  const back = describe([0, ...route.slice(1).reverse()], atoms, kindOfAtom, classes, n);
  if (back < forward) return back;
  return forward;
}

function describe(route: readonly number[], atoms: readonly number[], kindOfAtom: Int32Array, classes: Int32Array, n: number): string {
  let key = '';
  for (const vertex of route) key += String.fromCharCode(kindOfAtom[atoms[vertex]!]!);
  for (let i = 0; i < route.length; i++) {
    for (let j = i + 1; j < route.length; j++) {
      const number = classes[route[i]! * n + route[j]!]! + 1;
      key += String.fromCharCode(number & 0xffff, number >>> 16);
    }
  }
  return key;
}

function compare(a: readonly number[], b: readonly number[]): number {
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return a[i]! - b[i]!;
  return 0;
}
