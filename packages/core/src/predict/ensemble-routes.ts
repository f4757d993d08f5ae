/**
 * What one frame needs of one site, as plain data that a worker can be sent: its atoms, its routes, and how a route's amplitude
 * follows the geometry. Å; bohr where it says so.
 *
 *   A(k) = T(k; distances) Π_i e^{iρ_i}/R_i,   ρ_i = p R_i
 *
 * The fast factors are exact in every frame. T, the trace over scattering matrices (multiple scattering) or the curved-wave sum
 * (single scattering), is a smooth function of the distances among the route's atoms (angles and torsions are polynomials of
 * their squares), so a low polynomial in them, fitted to exact amplitudes at sample frames, stands in for it.
 */
import { inverse, Matrix, pseudoInverse } from 'ml-matrix';
import { bohrFromAngstrom } from '../constants.js';
import { latticeOf } from '../disorder/lattice.js';
import { checkRunning, type Running } from '../errors.js';
import type { Path } from '../paths/index.js';
import { RehrAlbers, type ScatteringTable, singleScattering } from '../scattering/index.js';
import { parseOperator } from '../structure/operators.js';
import type { Site, Structure, Vec3 } from '../structure/types.js';

/** Atoms of a site, each an atom of the frame under an operation. */
export interface RouteAtoms {
  /** Atom of the frame (m). */
  readonly source: Int32Array;
  /** Rotation and shift from the frame's atom, (m × 12), only where a crystal's symmetry is used. */
  readonly operation?: Float64Array;
  /** Place in the mean surroundings relative to the absorber, (m × 3): tells which copy of a repeating box is meant. */
  readonly reference: Float64Array;
}

/** Alike routes: those of one path. */
export interface RouteGroup {
  /** Vertices of the routes, indices into the site's atoms, absorber first, all in the direction of the path: (routes × legs). */
  readonly routes: Int32Array;
  readonly legs: number;
  /** Part with which each route counts: occupancies, 2 for both directions. */
  readonly weights: Float64Array;
  /** Sphere of each vertex (legs). */
  readonly spheres: readonly number[];
  /** Half length in the mean surroundings, Å: the reference of the phase and of the moments. */
  readonly halfLength: number;
  /** Pairs of vertices, first met, whose distances T depends on: (pairs × 2). */
  readonly pairs: Int32Array;
  /** Their distances in the mean surroundings, Å. */
  readonly distances: Float64Array;
  /** Polynomial of T, (terms × nk × re, im), terms as `features` lists them; empty: T is computed in every frame. */
  readonly polynomial: Float64Array;
}

/** Single scattering of one sphere: T at evenly spaced distances, (nodes × nk × re, im). */
export interface DistanceTable {
  readonly start: number;
  readonly step: number;
  readonly values: Float64Array;
}

/** Spacing of the single-scattering nodes, Å. */
const NODE_STEP = 0.04;
/** How far beyond the mean distances the nodes reach, Å; outside them T is computed. */
const NODE_MARGIN = 0.6;

export function routeAtoms(structure: Structure, site: Site): RouteAtoms {
  const m = site.atoms.length;
  const centre = site.atoms[0]!.position;
  const reference = new Float64Array(3 * m);
  for (const [i, { position }] of site.atoms.entries()) for (let c = 0; c < 3; c++) reference[3 * i + c] = position[c]! - centre[c]!;
  const source = Int32Array.from(site.atoms, (atom) => atom.source);
  if (!structure.cell || structure.operators.length === 1) return { source, reference };
  const lattice = latticeOf(structure.cell);
  const column = (f: readonly number[]): Vec3 =>
    [0, 1, 2].map((c) => f[0]! * lattice[0][c]! + f[1]! * lattice[1][c]! + f[2]! * lattice[2][c]!) as unknown as Vec3;
  const toCartesian = new Matrix([0, 1, 2].map((c) => lattice.map((v) => v[c]!)));
  const toFractional = inverse(toCartesian);
  const operation = new Float64Array(12 * m);
  for (const [i, { symmetry }] of site.atoms.entries()) {
    const { rotation, translation } = parseOperator(symmetry);
    const R = toCartesian.mmul(new Matrix([0, 3, 6].map((row) => [...rotation.slice(row, row + 3)]))).mmul(toFractional);
    operation.set(R.to1DArray(), 12 * i);
    operation.set(column(translation), 12 * i + 9);
  }
  return { source, reference, operation };
}

/** The routes of a path, each in the direction whose distances are those of the path, and nothing fitted yet. */
export function routeGroup(site: Site, path: Path, kindOfAtom: Int32Array): RouteGroup {
  const { legs, vertices, halfLength, members } = path;
  const pairs = pairsOf(vertices);
  const apart = (a: number, b: number): number => {
    const [p, q] = [site.atoms[a]!.position, site.atoms[b]!.position];
    return Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
  };
  const all = (route: readonly number[]): number[] => route.flatMap((a, i) => route.slice(0, i).map((b) => apart(a, b)));
  const wanted = all(vertices);
  const misfit = (route: readonly number[]): number =>
    all(route).reduce((worst, d, i) => Math.max(worst, Math.abs(d - wanted[i]!)), 0) +
    route.reduce((sum, atom, i) => sum + (kindOfAtom[atom] === kindOfAtom[vertices[i]!] ? 0 : 1e3), 0);
  const routes = members.flatMap((member) => {
    const back = [member[0]!, ...member.slice(1).reverse()];
    return misfit(back) < misfit(member) ? back : [...member];
  });
  const weights = Float64Array.from(members, (member) => {
    const isPalindrome = member.every((atom, i) => i === 0 || atom === member[legs - i]);
    let weight = isPalindrome ? 1 : 2;
    for (const atom of new Set(member)) if (atom !== 0) weight *= site.atoms[atom]!.occupancy;
    return weight;
  });
  return {
    routes: Int32Array.from(routes),
    legs,
    weights,
    spheres: vertices.map((atom) => kindOfAtom[atom]!),
    halfLength,
    pairs,
    distances: Float64Array.from({ length: pairs.length / 2 }, (_, j) => apart(vertices[pairs[2 * j]!]!, vertices[pairs[2 * j + 1]!]!)),
    polynomial: new Float64Array(0),
  };
}

/** Pairs of the route's different atoms, each by the vertex where it is first met. */
function pairsOf(vertices: readonly number[]): Int32Array {
  const first = vertices.flatMap((atom, i) => (vertices.indexOf(atom) === i ? [i] : []));
  return Int32Array.from(first.flatMap((b, j) => first.slice(0, j).flatMap((a) => [a, b])));
}

/** Distances in a polynomial's argument count in this unit, Å, so that its columns are of one size. */
const UNIT = 0.05;

/** Exponents of the polynomial's terms by number of distances: to the fourth power of one, cubic in three, quadratic in more. */
const TERMS: readonly (readonly (readonly number[])[])[] = Array.from({ length: 11 }, (_, n) => monomials(n, n <= 1 ? 4 : n <= 3 ? 3 : 2));

function monomials(n: number, degree: number): number[][] {
  if (n === 0) return [[]];
  const out: number[][] = [];
  for (let power = 0; power <= degree; power++) for (const rest of monomials(n - 1, degree - power)) out.push([power, ...rest]);
  return out;
}

export function featureCount(distances: number): number {
  return TERMS[distances]!.length;
}

/** @param d  deviations from the mean distances, Å (n) @param out  (featureCount), filled in place */
export function features(d: Float64Array, n: number, out: Float64Array): void {
  const terms = TERMS[n]!;
  for (let t = 0; t < terms.length; t++) {
    const powers = terms[t]!;
    let value = 1;
    for (let j = 0; j < n; j++) for (let e = powers[j]!; e > 0; e--) value *= d[j]! / UNIT;
    out[t] = value;
  }
}

/** Π R_i e^{−iρ_i}, which turns an amplitude into T. Half length in Å, product of the legs in bohrᴺ. */
export function stripLegs(table: ScatteringTable, halfLength: number, product: number, re: Float64Array, im: Float64Array): void {
  const R = 2 * bohrFromAngstrom(halfLength);
  for (let k = 0; k < re.length; k++) {
    const size = product * Math.exp(table.pIm[k]! * R);
    const c = size * Math.cos(table.pRe[k]! * R);
    const s = -size * Math.sin(table.pRe[k]! * R);
    const [a, b] = [re[k]!, im[k]!];
    re[k] = a * c - b * s;
    im[k] = a * s + b * c;
  }
}

/** T of single scattering off a sphere between two distances. */
export function distanceTable(table: ScatteringTable, sphere: number, nearest: number, farthest: number): DistanceTable {
  const start = Math.max(0.8, nearest - NODE_MARGIN);
  const nodes = 4 + Math.ceil((farthest + NODE_MARGIN - start) / NODE_STEP);
  const nk = table.k.length;
  const values = new Float64Array(2 * nk * nodes);
  const re = new Float64Array(nk);
  const im = new Float64Array(nk);
  for (let n = 0; n < nodes; n++) {
    const r = start + n * NODE_STEP;
    singleScattering(table, sphere, r, re, im);
    stripLegs(table, r, bohrFromAngstrom(r) ** 2, re, im);
    for (let k = 0; k < nk; k++) {
      values[2 * (n * nk + k)] = re[k]!;
      values[2 * (n * nk + k) + 1] = im[k]!;
    }
  }
  return { start, step: NODE_STEP, values };
}

/**
 * Fits each multiple-scattering group's polynomial to exact amplitudes, one route of the group a sample frame, in turn.
 *
 * @param places  positions of the site's atoms in each sample frame, Å, (frames)(m × 3)
 * @throws {CancelledError} asked to stop
 */
export function fitPolynomials(
  table: ScatteringTable,
  groups: readonly RouteGroup[],
  places: readonly Float64Array[],
  running?: Running,
): RouteGroup[] {
  const nk = table.k.length;
  const design = groups.map(({ legs, distances }) => (legs === 2 ? undefined : new Matrix(places.length, featureCount(distances.length))));
  const values = groups.map(({ legs }) => (legs === 2 ? undefined : new Matrix(places.length, 2 * nk)));
  const re = new Float64Array(nk);
  const im = new Float64Array(nk);
  const deviation = new Float64Array(16);
  for (const [s, xyz] of places.entries()) {
    running?.onProgress?.('amplitudes of sample frames', s / places.length);
    const multiple = new RehrAlbers(table); // its memory is worth keeping within a frame only
    for (const [g, group] of groups.entries()) {
      const X = design[g];
      if (!X) continue;
      checkRunning(running);
      const member = s % group.weights.length;
      const { halfLength, product } = routeGeometry(group, member, xyz, deviation);
      exactAmplitude(multiple, group, member, xyz, re, im);
      stripLegs(table, halfLength, product, re, im);
      const row = new Float64Array(X.columns);
      features(deviation, group.distances.length, row);
      X.setRow(s, row as unknown as number[]);
      for (let k = 0; k < nk; k++) {
        values[g]!.set(s, 2 * k, re[k]!);
        values[g]!.set(s, 2 * k + 1, im[k]!);
      }
    }
  }
  return groups.map((group, g) => {
    const X = design[g];
    if (!X) return group;
    const polynomial = Float64Array.from(pseudoInverse(X, 1e-7).mmul(values[g]!).to1DArray());
    return { ...group, polynomial };
  });
}

/** Half length (Å), product of the legs (bohrᴺ) of one route in a frame; deviations of its distances into `deviation`. */
export function routeGeometry(
  { routes, legs, pairs, distances }: RouteGroup,
  member: number,
  xyz: Float64Array,
  deviation: Float64Array,
): { halfLength: number; product: number } {
  let length = 0;
  let product = 1;
  const base = member * legs;
  for (let i = 0; i < legs; i++) {
    const r = apartIn(xyz, routes[base + i]!, routes[base + (i + 1 === legs ? 0 : i + 1)]!);
    length += r;
    product *= bohrFromAngstrom(r);
  }
  for (let j = 0; j < distances.length; j++)
    deviation[j] = apartIn(xyz, routes[base + pairs[2 * j]!]!, routes[base + pairs[2 * j + 1]!]!) - distances[j]!;
  return { halfLength: length / 2, product };
}

export function apartIn(xyz: Float64Array, a: number, b: number): number {
  const x = xyz[3 * a]! - xyz[3 * b]!;
  const y = xyz[3 * a + 1]! - xyz[3 * b + 1]!;
  const z = xyz[3 * a + 2]! - xyz[3 * b + 2]!;
  return Math.sqrt(x * x + y * y + z * z);
}

/** A(k) of one multiple-scattering route in a frame, by Rehr–Albers matrices. */
export function exactAmplitude(
  multiple: RehrAlbers,
  group: RouteGroup,
  member: number,
  xyz: Float64Array,
  re: Float64Array,
  im: Float64Array,
): void {
  const { legs, routes, spheres } = group;
  const positions = Array.from({ length: legs }, (_, i): Vec3 => {
    const atom = 3 * routes[member * legs + i]!;
    return [xyz[atom]!, xyz[atom + 1]!, xyz[atom + 2]!];
  });
  multiple.amplitude(positions, spheres, re, im);
}
