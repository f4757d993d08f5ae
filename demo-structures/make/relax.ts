/**
 * Geometry from wished-for distances: atoms are added with rough places, pairs tied to distances, and the sum of
 *   w (d − d0)² over ties,  (V − V0)²/10 over chiral centres,  ½ (d_min − d)² over pairs that touch without being tied
 * is brought to its minimum (FIRE: Bitzek et al., Phys. Rev. Lett. 97, 170201 (2006)). Å.
 */
import type { Vec3 } from '../../packages/core/src/structure/types.js';

export interface DraftAtom {
  readonly name: string;
  readonly element: string;
  readonly residue: { readonly name: string; readonly number: number };
}

interface Tie {
  readonly i: number;
  readonly j: number;
  readonly d: number;
  readonly w: number;
}

/** A chiral centre: (a − c)·((b − c) × (d − c)) is to be `volume`, Å³. */
interface Chiral {
  readonly atoms: readonly [c: number, a: number, b: number, d: number];
  readonly volume: number;
}

/** Weights: a bond to a metal; 1 is a demand of chemistry, less a wish. */
export const METAL_BOND = 20;

export const METALS = new Set(['Mn', 'Fe']);

export class Draft {
  readonly atoms: DraftAtom[] = [];
  readonly start: number[] = [];
  readonly ties: Tie[] = [];
  readonly chirals: Chiral[] = [];

  add(residue: DraftAtom['residue'], name: string, element: string, at: Vec3): number {
    this.atoms.push({ name, element, residue });
    this.start.push(...at);
    return this.atoms.length - 1;
  }

  tie(i: number, j: number, d: number, w = 1): void {
    this.ties.push({ i, j, d, w });
  }

  place(i: number): Vec3 {
    return [this.start[3 * i]!, this.start[3 * i + 1]!, this.start[3 * i + 2]!];
  }

  /** Index of an atom by residue number and name. */
  find(number: number, name: string): number {
    const i = this.atoms.findIndex((atom) => atom.residue.number === number && atom.name === name);
    if (i < 0) throw new RangeError(`no atom ${name} in residue ${number}`);
    return i;
  }
}

/** Å: nearest approach of atoms that nothing ties. */
function leastContact(a: string, b: string): number {
  const isPolar = (element: string) => element === 'O' || element === 'N';
  if (METALS.has(a) || METALS.has(b)) return 3.2;
  return isPolar(a) && isPolar(b) ? 2.7 : 3.3;
}

export interface Relaxed {
  readonly positions: readonly Vec3[];
  /** Largest |d − d0|, Å: among bonds to metals, and among all demands. */
  readonly worstBond: number;
  readonly worst: number;
}

export function relax(draft: Draft, random: () => number): Relaxed {
  const n = draft.atoms.length;
  const x = Float64Array.from(draft.start, (v) => v + 0.3 * (random() - 0.5));
  const tied = new Set(draft.ties.map(({ i, j }) => Math.min(i, j) * n + Math.max(i, j)));
  const touching: { i: number; j: number; d: number }[] = [];
  for (let i = 0; i < n; i++)
    for (let j = i + 1; j < n; j++)
      if (!tied.has(i * n + j)) touching.push({ i, j, d: leastContact(draft.atoms[i]!.element, draft.atoms[j]!.element) });

  const force = new Float64Array(3 * n);
  const pull = (i: number, j: number, strength: number): void => {
    for (let c = 0; c < 3; c++) {
      const f = strength * (x[3 * i + c]! - x[3 * j + c]!);
      force[3 * i + c]! -= f;
      force[3 * j + c]! += f;
    }
  };
  const apart = (i: number, j: number): number =>
    Math.max(1e-3, Math.hypot(x[3 * i]! - x[3 * j]!, x[3 * i + 1]! - x[3 * j + 1]!, x[3 * i + 2]! - x[3 * j + 2]!));
  const computeForces = (repulsion: number): void => {
    force.fill(0);
    for (const { i, j, d, w } of draft.ties) {
      const r = apart(i, j);
      pull(i, j, (2 * w * (r - d)) / r);
    }
    for (const { i, j, d } of touching) {
      const r = apart(i, j);
      if (r < d) pull(i, j, (-repulsion * (d - r)) / r);
    }
    for (const chiral of draft.chirals) chiralForce(x, chiral, force);
  };

  const v = new Float64Array(3 * n);
  let dt = 0.05;
  let alpha = 0.1;
  let downhill = 0;
  const steps = 20000;
  for (let step = 0; step < steps; step++) {
    computeForces(step < 2000 ? 0.05 : 1);
    let power = 0;
    let ff = 0;
    let vv = 0;
    for (let m = 0; m < v.length; m++) {
      power += force[m]! * v[m]!;
      ff += force[m]! * force[m]!;
      vv += v[m]! * v[m]!;
    }
    if (ff < 1e-16 && step > 2500) break;
    if (power > 0) {
      const mix = alpha * Math.sqrt(vv / (ff || 1));
      for (let m = 0; m < v.length; m++) v[m] = (1 - alpha) * v[m]! + mix * force[m]!;
      if (++downhill > 5) {
        dt = Math.min(0.2, 1.1 * dt);
        alpha *= 0.99;
      }
    } else {
      v.fill(0);
      dt *= 0.5;
      alpha = 0.1;
      downhill = 0;
    }
    for (let m = 0; m < v.length; m++) {
      v[m]! += dt * force[m]!;
      x[m]! += Math.max(-0.1, Math.min(0.1, dt * v[m]!));
    }
  }
  const worstOf = (weight: number) =>
    Math.max(...draft.ties.filter(({ w }) => w >= weight).map(({ i, j, d }) => Math.abs(apart(i, j) - d)));
  return {
    worstBond: worstOf(METAL_BOND),
    worst: worstOf(1),
    positions: Array.from({ length: n }, (_, i): Vec3 => [x[3 * i]!, x[3 * i + 1]!, x[3 * i + 2]!]),
  };
}

function chiralForce(x: Float64Array, { atoms: [c, a, b, d], volume }: Chiral, force: Float64Array): void {
  const from = (i: number): Vec3 => [x[3 * i]! - x[3 * c]!, x[3 * i + 1]! - x[3 * c + 1]!, x[3 * i + 2]! - x[3 * c + 2]!];
  const [p, q, r] = [from(a), from(b), from(d)];
  const gradients = [cross(q, r), cross(r, p), cross(p, q)];
  const strength = -0.2 * (dot(p, gradients[0]!) - volume);
  [a, b, d].forEach((i, m) => {
    for (let k = 0; k < 3; k++) {
      force[3 * i + k]! += strength * gradients[m]![k]!;
      force[3 * c + k]! -= strength * gradients[m]![k]!;
    }
  });
}

export const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
export const cross = (a: Vec3, b: Vec3): Vec3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
export const along = (from: Vec3, direction: Vec3, length: number): Vec3 => {
  const r = Math.hypot(...direction);
  return [0, 1, 2].map((c) => from[c]! + (length * direction[c]!) / r) as unknown as Vec3;
};
