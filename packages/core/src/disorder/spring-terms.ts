/**
 * The energy of a spring network, ½ Σ_t k_t (Σ_a B_a · u_a)²: one term for every internal coordinate, its constant and
 * its derivative at each atom that takes part (Wilson, Decius & Cross, Molecular Vibrations (1955), ch. 4). Reference
 * values are the structure's own, so no term has a force and the sum is never negative. Å, mdyn/Å.
 *
 *  stretch  pairs of Pauling bond order ≥ 0.04
 *  bend     pairs of bonds at one atom, not among metals alone; two components when nearly straight
 *  torsion  about every bond but one of two metals, ends in a straight line with it left out
 *  contact  pairs bound to each other by neither bond nor angle, near their van der Waals distance r₁ + 1.6 Å (Pauling,
 *           The Nature of the Chemical Bond (1960), ch. 7: radius = covalent + 0.8): curvature of a Lennard-Jones minimum
 *           of depth 0.1 kcal/mol (the middle of the UFF range), its repulsive wall beyond
 */

import { InputError } from '../errors.js';
import { isMetal } from '../structure/bonding.js';
import type { Vec3 } from '../structure/types.js';
import { combine, cross, dot3, type Lattice, reciprocal } from './lattice.js';
import { bondOrder, isBendable, type SpringForm, TORSION } from './spring-forms.js';
import { springConstantsOf } from './spring-parameters.js';

export interface SpringAtom {
  readonly element: string;
  /** Cartesian, Å. */
  readonly position: Vec3;
  /** u */
  readonly mass: number;
}

/** Atoms and, for a crystal, the three lattice vectors they repeat by (Å). */
export interface SpringBody {
  readonly atoms: readonly SpringAtom[];
  readonly lattice?: Lattice;
  /** Atoms at the cut of a cluster taken out of something larger. */
  readonly edge?: readonly number[];
}

export interface SpringTerm {
  readonly k: number;
  /** Indices into the body's atoms, and where each copy stands (3 per atom, Å). */
  readonly atoms: readonly number[];
  readonly positions: Float64Array;
  /** 3 per atom, Å⁻¹ or none. */
  readonly b: Float64Array;
}

/** A neighbour of a body's atom: which atom, by which way. */
interface Neighbour {
  readonly atom: number;
  /** Vector from the centre, Å. */
  readonly d: Vec3;
  readonly r: number;
  readonly order: number;
  /** Order that the constants go by: see `shareValence`. */
  strength: number;
}

const MIN_ORDER = 0.04;
/** r₁ + 0.6 log(1/0.04): the longest stretch; contacts reach a little farther. */
const REACH = 2.4;
const CONTACT = 1.6;
const CONTACT_DEPTH = 0.1 / 143.9325;
const STRAIGHT = Math.cos((165 * Math.PI) / 180);

export function springTerms(body: SpringBody, form: SpringForm): SpringTerm[] {
  const near = neighbourhoods(body);
  const bonds = near.map((list, i) => list.filter((nb) => isBond(body, near, i, nb)));
  shareValence(body, bonds);
  const terms: SpringTerm[] = [];
  for (let i = 0; i < body.atoms.length; i++) {
    for (const nb of bonds[i]!) if (isFirst(i, nb)) terms.push(stretch(body, i, nb, form));
    addBends(body, i, bonds[i]!, form, terms);
    for (const nb of bonds[i]!) if (isFirst(i, nb)) addTorsions(body, i, nb, bonds, terms);
    addContacts(body, i, near[i]!, bonds, terms);
  }
  holdEdge(body, terms);
  return terms;
}

/**
 * Holds each atom at the cut to its place by an isotropic spring that brings its own stiffness up to the mean of the
 * inner atoms (of its element, where there are any): what the missing neighbours, standing still, would add.
 */
function holdEdge(body: SpringBody, terms: SpringTerm[]): void {
  if (!body.edge || body.edge.length === 0) return;
  const stiffness = new Float64Array(body.atoms.length);
  for (const { k, atoms, b } of terms) for (let m = 0; m < b.length; m++) stiffness[atoms[Math.floor(m / 3)]!]! += (k * b[m]! * b[m]!) / 3;
  const edge = new Set(body.edge);
  // What floats loose inside, a water out of reach of the rest, is held as if it stood at the edge.
  const piece = piecesOf(body.atoms.length, terms);
  const tied = new Set(body.edge.map((i) => piece[i]!));
  for (let i = 0; i < piece.length; i++) if (!tied.has(piece[i]!)) edge.add(i);
  const inner = body.atoms.map((_, i) => i).filter((i) => !edge.has(i));
  const mean = (list: readonly number[]) => list.reduce((sum, i) => sum + stiffness[i]!, 0) / list.length;
  if (inner.length === 0) inner.push(...edge);
  for (const i of edge) {
    const like = inner.filter((j) => body.atoms[j]!.element === body.atoms[i]!.element);
    const wanted = mean(like.length > 0 ? like : inner);
    const k = Math.max(0.05 * wanted, wanted - stiffness[i]!);
    for (let c = 0; c < 3; c++) {
      const b = new Float64Array(3);
      b[c] = 1;
      terms.push({ k, atoms: [i], positions: place(body, i, [0, 0, 0]), b });
    }
  }
}

/** Which piece each atom is in, atoms of a piece joined by springs: a label per atom. */
export function piecesOf(count: number, terms: readonly SpringTerm[]): Int32Array {
  const parent = Int32Array.from({ length: count }, (_, i) => i);
  const root = (i: number): number => {
    let r = i;
    while (parent[r] !== r) r = parent[r]!;
    parent[i] = r;
    return r;
  };
  for (const { atoms } of terms) for (const a of atoms) parent[root(a)] = root(atoms[0]!);
  return parent.map((_, i) => root(i));
}

/** Of a pair listed from both ends, one is first. */
function isFirst(i: number, { atom, d }: Neighbour): boolean {
  if (i !== atom) return i < atom;
  return d[0] > 1e-6 || (Math.abs(d[0]) <= 1e-6 && (d[1] > 1e-6 || (Math.abs(d[1]) <= 1e-6 && d[2] > 0)));
}

function neighbourhoods(body: SpringBody): Neighbour[][] {
  const { atoms } = body;
  const radius = atoms.map((a) => springConstantsOf(a.element)[1]);
  const reach = 2 * Math.max(...radius) + REACH;
  const shifts = latticeShifts(body.lattice, reach, atoms);
  return atoms.map((from, i) => {
    const list: Neighbour[] = [];
    for (const s of shifts) {
      for (let j = 0; j < atoms.length; j++) {
        const p = atoms[j]!.position;
        const d: Vec3 = [p[0] + s[0] - from.position[0], p[1] + s[1] - from.position[1], p[2] + s[2] - from.position[2]];
        const r = Math.hypot(...d);
        if (r > radius[i]! + radius[j]! + REACH || (i === j && r < 1e-9)) continue;
        if (r < 0.4)
          throw new InputError(
            `spring network: atoms ${i} (${from.element}) and ${j} (${atoms[j]!.element}) are ${r.toFixed(2)} Å apart, wanted ≥ 0.4`,
          );
        const order = bondOrder(from.element, atoms[j]!.element, r);
        list.push({ atom: j, d, r, order, strength: order });
      }
    }
    return list;
  });
}

function latticeShifts(lattice: SpringBody['lattice'], reach: number, atoms: readonly SpringAtom[]): Vec3[] {
  if (!lattice) return [[0, 0, 0]];
  const inverse = reciprocal(lattice);
  // Atoms of one cell may be written up to their own extent apart.
  const extent = Math.max(0, ...atoms.map((p) => Math.hypot(...p.position.map((x, i) => x - atoms[0]!.position[i]!))));
  const [na, nb, nc] = inverse.map((row) => Math.ceil((reach + 2 * extent) * Math.hypot(...row))) as unknown as Vec3;
  const shifts: Vec3[] = [];
  for (let i = -na; i <= na; i++)
    for (let j = -nb; j <= nb; j++)
      for (let k = -nc; k <= nc; k++) {
        const s = combine(lattice, [i, j, k]);
        if (Math.hypot(...s) <= reach + 2 * extent) shifts.push(s);
      }
  return shifts;
}

/**
 * Two metal atoms held apart by a bridging non-metal that binds both more strongly are like ions across an opposite one:
 * no bond, their distance is kept by the bends. A whole metal–metal bond stays.
 */
function isBond(body: SpringBody, near: readonly Neighbour[][], i: number, nb: Neighbour): boolean {
  if (nb.order < MIN_ORDER) return false;
  const elementOf = (index: number) => body.atoms[index]!.element;
  if (nb.order >= 1 || !isMetal(elementOf(i)) || !isMetal(elementOf(nb.atom))) return true;
  for (const bridge of near[i]!) {
    if (isMetal(elementOf(bridge.atom)) || bridge.order <= nb.order) continue;
    const r = Math.hypot(bridge.d[0] - nb.d[0], bridge.d[1] - nb.d[1], bridge.d[2] - nb.d[2]);
    if (r > 1e-6 && bondOrder(elementOf(nb.atom), elementOf(bridge.atom), r) > nb.order) return false;
  }
  return true;
}

/** Bonds that an anion has to give. */
const VALENCE: Readonly<Record<string, number>> = { C: 4, N: 3, P: 3, As: 3, O: 2, S: 2, Se: 2, Te: 2, F: 1, Cl: 1, Br: 1, I: 1 };

/**
 * An anion bound to metals alone has no more bonds to give than its valence, shared among them (Pauling's electrostatic valence
 * principle, J. Am. Chem. Soc. 51, 1010 (1929)); the orders read off the distances (Pauling 1947) often add up to more, twice as
 * much in alkali halides and oxides of early metals. Where they do, a bond's strength is the geometric mean of the two estimates.
 * Over the optical phonons of 19 crystals this lowers the error from 41 to 25 % rms; the shared order alone would give 24 %, but
 * alkali halides 15–30 % too low (test/external/vibrations.test.ts).
 */
function shareValence(body: SpringBody, bonds: readonly Neighbour[][]): void {
  const elementOf = (i: number) => body.atoms[i]!.element;
  const share = bonds.map((list, i) => {
    const valence = VALENCE[elementOf(i)];
    if (valence === undefined || !list.every((nb) => isMetal(elementOf(nb.atom)))) return 1;
    return Math.min(1, valence / list.reduce((sum, nb) => sum + nb.order, 0));
  });
  for (const [i, list] of bonds.entries()) for (const nb of list) nb.strength = nb.order * Math.sqrt(share[i]! * share[nb.atom]!);
}

const unit = ({ d, r }: Neighbour): Vec3 => [d[0] / r, d[1] / r, d[2] / r];

function place(body: SpringBody, i: number, ...offsets: Vec3[]): Float64Array {
  const p = body.atoms[i]!.position;
  const out = new Float64Array(3 * offsets.length);
  for (const [n, d] of offsets.entries()) for (let c = 0; c < 3; c++) out[3 * n + c] = p[c]! + d[c]!;
  return out;
}

function stretch(body: SpringBody, i: number, nb: Neighbour, form: SpringForm): SpringTerm {
  return pairTerm(body, i, nb, form.stretch(body.atoms[i]!.element, body.atoms[nb.atom]!.element, nb.r, nb.strength));
}

function pairTerm(body: SpringBody, i: number, nb: Neighbour, k: number): SpringTerm {
  const e = unit(nb);
  return {
    k,
    atoms: [i, nb.atom],
    positions: place(body, i, [0, 0, 0], nb.d),
    b: Float64Array.of(-e[0], -e[1], -e[2], e[0], e[1], e[2]),
  };
}

function addBends(body: SpringBody, j: number, bonds: readonly Neighbour[], form: SpringForm, terms: SpringTerm[]): void {
  const elementOf = (index: number) => body.atoms[index]!.element;
  for (let p = 0; p < bonds.length; p++) {
    for (let q = p + 1; q < bonds.length; q++) {
      const [one, two] = [bonds[p]!, bonds[q]!];
      if (!isBendable(elementOf(one.atom), elementOf(j), elementOf(two.atom))) continue;
      const [u, v] = [unit(one), unit(two)];
      const cosine = Math.max(-1, Math.min(1, u[0] * v[0] + u[1] * v[1] + u[2] * v[2]));
      const k = form.bend(elementOf(one.atom), elementOf(j), elementOf(two.atom), one.r, two.r, cosine, one.strength * two.strength);
      if (!(k > 0)) continue;
      // Directions across each bond in the plane of the angle; straight angles bend out of it as well.
      for (const [s, t] of bendDirections(u, v, cosine)) {
        const b = new Float64Array(9);
        for (let c = 0; c < 3; c++) {
          b[c] = s[c]! / one.r;
          b[6 + c] = t[c]! / two.r;
          b[3 + c] = -b[c]! - b[6 + c]!;
        }
        terms.push({ k, atoms: [one.atom, j, two.atom], positions: place(body, j, one.d, [0, 0, 0], two.d), b });
      }
    }
  }
}

/** Unit vectors along which the ends move to open the angle. */
function bendDirections(u: Vec3, v: Vec3, cosine: number): (readonly [Vec3, Vec3])[] {
  const sine = Math.sqrt(1 - cosine * cosine);
  const straight = cosine < STRAIGHT;
  if (sine > 1e-4) {
    const s: Vec3 = [(u[0] * cosine - v[0]) / sine, (u[1] * cosine - v[1]) / sine, (u[2] * cosine - v[2]) / sine];
    const t: Vec3 = [(v[0] * cosine - u[0]) / sine, (v[1] * cosine - u[1]) / sine, (v[2] * cosine - u[2]) / sine];
    if (!straight) return [[s, t]];
    const n: Vec3 = [u[1] * s[2] - u[2] * s[1], u[2] * s[0] - u[0] * s[2], u[0] * s[1] - u[1] * s[0]];
    return [
      [s, t],
      [n, n],
    ];
  }
  const axis: Vec3 = Math.abs(u[0]) < 0.7 ? [1, 0, 0] : [0, 1, 0];
  const along = axis[0] * u[0] + axis[1] * u[1];
  const raw: Vec3 = [axis[0] - along * u[0], axis[1] - along * u[1], -along * u[2]];
  const length = Math.hypot(...raw);
  const s: Vec3 = [raw[0] / length, raw[1] / length, raw[2] / length];
  const n: Vec3 = [u[1] * s[2] - u[2] * s[1], u[2] * s[0] - u[0] * s[2], u[0] * s[1] - u[1] * s[0]];
  return straight
    ? [
        [s, s],
        [n, n],
      ]
    : [];
}

/** Torsions i–j–k–l about the bond j–k, shared out evenly so that a bond has one constant however many ends it carries. */
function addTorsions(body: SpringBody, j: number, mid: Neighbour, bonds: readonly Neighbour[][], terms: SpringTerm[]): void {
  const elementOf = (index: number) => body.atoms[index]!.element;
  if (isMetal(elementOf(j)) && isMetal(elementOf(mid.atom))) return;
  const axis = unit(mid);
  const bent = (nb: Neighbour, sign: number) => {
    const e = unit(nb);
    return Math.abs(sign * (e[0] * axis[0] + e[1] * axis[1] + e[2] * axis[2])) < -STRAIGHT;
  };
  const isBack = (nb: Neighbour) => nb.atom === j && Math.hypot(nb.d[0] + mid.d[0], nb.d[1] + mid.d[1], nb.d[2] + mid.d[2]) < 1e-6;
  const left = bonds[j]!.filter((nb) => nb !== mid && bent(nb, 1));
  const right = bonds[mid.atom]!.filter((nb) => !isBack(nb) && bent(nb, -1));
  const share = left.length * right.length;
  for (const a of left) {
    for (const l of right) {
      const tail: Vec3 = [mid.d[0] + l.d[0], mid.d[1] + l.d[1], mid.d[2] + l.d[2]];
      const b = torsionDerivatives(a.d, mid.d, l.d);
      terms.push({
        k: (TORSION * mid.strength * (a.strength * l.strength)) / share,
        atoms: [a.atom, j, mid.atom, l.atom],
        positions: place(body, j, a.d, [0, 0, 0], mid.d, tail),
        b,
      });
    }
  }
}

/** ∂φ/∂(i, j, k, l) with a = i − j, m = k − j, l = l − k (Blondel & Karplus, J. Comput. Chem. 17, 1132 (1996)). */
function torsionDerivatives(a: Vec3, m: Vec3, l: Vec3): Float64Array {
  const [F, G, H]: [Vec3, Vec3, Vec3] = [a, [-m[0], -m[1], -m[2]], l];
  const [A, B] = [cross(F, G), cross([H[0], H[1], H[2]], G)];
  const g = Math.hypot(...G);
  const [a2, b2] = [dot3(A, A), dot3(B, B)];
  const [fg, hg] = [dot3(F, G), dot3(H, G)];
  const out = new Float64Array(12);
  for (let c = 0; c < 3; c++) {
    const di = (-g / a2) * A[c]!;
    const dl = (g / b2) * B[c]!;
    const inner = (fg / (a2 * g)) * A[c]! - (hg / (b2 * g)) * B[c]!;
    out[c] = di;
    out[3 + c] = -di + inner;
    out[6 + c] = -dl - inner;
    out[9 + c] = dl;
  }
  return out;
}

function addContacts(body: SpringBody, i: number, near: readonly Neighbour[], bonds: readonly Neighbour[][], terms: SpringTerm[]): void {
  const elementOf = (index: number) => body.atoms[index]!.element;
  for (const nb of near) {
    if (!isFirst(i, nb) || nb.order >= MIN_ORDER || (isMetal(elementOf(i)) && isMetal(elementOf(nb.atom)))) continue;
    const sharesNeighbour = bonds[i]!.some((x) =>
      bonds[x.atom]!.some(
        (y) => y.atom === nb.atom && Math.hypot(x.d[0] + y.d[0] - nb.d[0], x.d[1] + y.d[1] - nb.d[1], x.d[2] + y.d[2] - nb.d[2]) < 1e-6,
      ),
    );
    if (sharesNeighbour) continue;
    const x = springConstantsOf(elementOf(i))[1] + springConstantsOf(elementOf(nb.atom))[1] + CONTACT;
    terms.push(pairTerm(body, i, nb, ((72 * CONTACT_DEPTH) / (x * x)) * (x / nb.r) ** 14));
  }
}
