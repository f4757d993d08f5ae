/**
 * From a spring network to quantum mean squares. With mass-weighted modes e_s(q), ω_s² = λ_s:
 *
 *   ⟨(Σ_a g_a·u_a)²⟩ = 1/N_q Σ_q Σ_s ħ/(2ω_s) coth(ħω_s / 2k_BT) |Σ_a g_a·e_s(a) e^{iq·R_a} / √M_a|²
 *
 * A crystal: q on a uniform mesh of the Brillouin zone displaced by half a step, so that it never meets the zone centre,
 * half of it by time reversal (Born & Huang, Dynamical Theory of Crystal Lattices (1954); mesh: Monkhorst & Pack,
 * Phys. Rev. B 13, 5188 (1976)). A molecule: q = 0 alone, its six (five, three) rigid motions projected out exactly
 * (Miller, Handy & Adams, J. Chem. Phys. 72, 99 (1980)).
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { ATOMIC_MASS_KG, BOLTZMANN_EV_PER_K, ELEMENTARY_CHARGE, HBAR_JS } from '../constants.js';
import type { Vec3 } from '../structure/types.js';
import { combine, reciprocal } from './lattice.js';
import type { SpringBody, SpringTerm } from './spring-terms.js';

/** ħω/k_B in K of λ = 1 (mdyn/Å)/u. */
export const KELVIN_PER_ROOT = (HBAR_JS * Math.sqrt(100 / ATOMIC_MASS_KG)) / (BOLTZMANN_EV_PER_K * ELEMENTARY_CHARGE);

/** Modes of one q; `vectors` holds real and imaginary parts, mode by mode: (modes × 2 × 3n), imaginary absent at q = 0. */
export interface ModeSet {
  readonly q: Vec3;
  /** Part of the mean over the zone. */
  readonly weight: number;
  /** ħω/k_B, K, ascending, rigid motions left out. */
  readonly theta: Float64Array;
  readonly re: Float64Array;
  readonly im?: Float64Array;
}

/** Where a route's gradient acts: body atom, place of that copy (Å), g. */
export interface Pull {
  readonly atom: number;
  readonly position: Vec3;
  readonly g: Vec3;
}

/** Mass-weighted Hessian of a body that does not repeat, (3n × 3n), (mdyn/Å)/u. */
export function massWeightedHessian(body: SpringBody, terms: readonly SpringTerm[]): Matrix {
  const h = Matrix.zeros(3 * body.atoms.length, 3 * body.atoms.length);
  const root = body.atoms.map((a) => 1 / Math.sqrt(a.mass));
  for (const { k, atoms, b } of terms) {
    for (let m = 0; m < b.length; m++) {
      const row = 3 * atoms[Math.floor(m / 3)]! + (m % 3);
      const kb = k * b[m]! * root[atoms[Math.floor(m / 3)]!]!;
      for (let n = 0; n < b.length; n++) {
        const atom = atoms[Math.floor(n / 3)]!;
        const column = 3 * atom + (n % 3);
        h.set(row, column, h.get(row, column) + kb * b[n]! * root[atom]!);
      }
    }
  }
  return h;
}

/** Orthonormal rigid motions of a free body in mass-weighted coordinates: six, five for a straight one. */
export function rigidMotions(body: SpringBody): Float64Array[] {
  const n = body.atoms.length;
  const total = body.atoms.reduce((sum, a) => sum + a.mass, 0);
  const centre = [0, 1, 2].map((c) => body.atoms.reduce((sum, a) => sum + a.mass * a.position[c]!, 0) / total);
  const basis: Float64Array[] = [];
  for (let kind = 0; kind < 6; kind++) {
    const v = new Float64Array(3 * n);
    const axis = kind % 3;
    for (const [i, { position, mass }] of body.atoms.entries()) {
      const w = Math.sqrt(mass);
      if (kind < 3) v[3 * i + axis] = w;
      else {
        const [p, q] = [(axis + 1) % 3, (axis + 2) % 3];
        v[3 * i + q] = w * (position[p]! - centre[p]!);
        v[3 * i + p] = -w * (position[q]! - centre[q]!);
      }
    }
    const before = Math.hypot(...v);
    for (let pass = 0; pass < 2; pass++) for (const u of basis) axpy(-dot(u, v), u, v);
    const length = Math.hypot(...v);
    if (length > 1e-5 * before && length > 0) basis.push(v.map((x) => x / length));
  }
  return basis;
}

export function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}

export function axpy(factor: number, x: Float64Array, y: Float64Array): void {
  for (let i = 0; i < x.length; i++) y[i]! += factor * x[i]!;
}

/** H ← P H P with P = 1 − Σ v vᵀ, plus a large multiple of Σ v vᵀ so that the rigid motions end at the top of the list. */
function liftRigid(h: Matrix, basis: readonly Float64Array[], top: number): void {
  const n = h.rows;
  for (const v of basis) {
    const hv = new Float64Array(n);
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) hv[i]! += h.get(i, j) * v[j]!;
    const vhv = dot(v, hv);
    for (let i = 0; i < n; i++)
      for (let j = 0; j < n; j++) h.set(i, j, h.get(i, j) - v[i]! * hv[j]! - hv[i]! * v[j]! + (vhv + top) * v[i]! * v[j]!);
  }
}

/** Normal modes of a body that does not repeat, without the rigid motions given. */
export function bodyModes(body: SpringBody, terms: readonly SpringTerm[], basis: readonly Float64Array[]): ModeSet {
  const h = massWeightedHessian(body, terms);
  let trace = 0;
  for (let i = 0; i < h.rows; i++) trace += h.get(i, i);
  liftRigid(h, basis, 2 * trace + 1);
  const { values, vectors } = symmetricModes(h);
  const kept = h.rows - basis.length;
  return { q: [0, 0, 0], weight: 1, theta: values.slice(0, kept), re: vectors.slice(0, kept * h.rows) };
}

/** Modes of a crystal over the mesh of `divisions`. */
export function latticeModes(body: SpringBody, terms: readonly SpringTerm[], divisions: readonly [number, number, number]): ModeSet[] {
  const inverse = reciprocal(body.lattice!);
  const sets: ModeSet[] = [];
  const total = divisions[0] * divisions[1] * divisions[2];
  for (let i = 0; i < divisions[0]; i++)
    for (let j = 0; j < divisions[1]; j++)
      for (let k = 0; k < divisions[2]; k++) {
        const index = [i, j, k] as const;
        const mirror = index.map((x, c) => divisions[c]! - 1 - x);
        const order = index.map((x, c) => x - mirror[c]!).find((d) => d !== 0) ?? 0;
        if (order > 0) continue; // its time-reversed partner stands for it
        const f = index.map((x, c) => (x + 0.5) / divisions[c]!);
        const q = combine(inverse, f.map((x) => 2 * Math.PI * x) as unknown as Vec3);
        sets.push(modesAt(body, terms, q, (order === 0 ? 1 : 2) / total));
      }
  return sets;
}

function modesAt(body: SpringBody, terms: readonly SpringTerm[], q: Vec3, weight: number): ModeSet {
  const size = 3 * body.atoms.length;
  // Hermitian D = A + iB as the real symmetric [[A, −B], [B, A]]: every mode comes twice, each copy counts half.
  const h = Matrix.zeros(2 * size, 2 * size);
  const add = (row: number, column: number, value: number) => h.set(row, column, h.get(row, column) + value);
  for (const { k, atoms, positions, b } of terms) {
    const re = new Float64Array(b.length);
    const im = new Float64Array(b.length);
    const at = new Int32Array(b.length);
    for (let m = 0; m < b.length; m++) {
      const a = Math.floor(m / 3);
      const phase = q[0] * positions[3 * a]! + q[1] * positions[3 * a + 1]! + q[2] * positions[3 * a + 2]!;
      const w = b[m]! / Math.sqrt(body.atoms[atoms[a]!]!.mass);
      re[m] = w * Math.cos(phase);
      im[m] = w * Math.sin(phase);
      at[m] = 3 * atoms[a]! + (m % 3);
    }
    for (let m = 0; m < b.length; m++) {
      for (let n = 0; n < b.length; n++) {
        const A = k * (re[m]! * re[n]! + im[m]! * im[n]!);
        const B = k * (re[m]! * im[n]! - im[m]! * re[n]!);
        add(at[m]!, at[n]!, A);
        add(size + at[m]!, size + at[n]!, A);
        add(size + at[m]!, at[n]!, B);
        add(at[m]!, size + at[n]!, -B);
      }
    }
  }
  const { values, vectors } = symmetricModes(h);
  const re = new Float64Array(2 * size * size);
  const im = new Float64Array(2 * size * size);
  for (let s = 0; s < 2 * size; s++) {
    re.set(vectors.subarray(2 * size * s, 2 * size * s + size), s * size);
    im.set(vectors.subarray(2 * size * s + size, 2 * size * (s + 1)), s * size);
  }
  return { q, weight: weight / 2, theta: values, re, im };
}

/** Ascending ħω/k_B in K and the modes as rows. */
function symmetricModes(h: Matrix): { values: Float64Array; vectors: Float64Array } {
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(h, { assumeSymmetric: true });
  const n = h.rows;
  const order = realEigenvalues.map((_, i) => i).sort((a, b) => realEigenvalues[a]! - realEigenvalues[b]!);
  const values = new Float64Array(n);
  const vectors = new Float64Array(n * n);
  for (const [s, column] of order.entries()) {
    values[s] = KELVIN_PER_ROOT * Math.sqrt(Math.max(0, realEigenvalues[column]!));
    for (let i = 0; i < n; i++) vectors[s * n + i] = eigenvectorMatrix.get(i, column);
  }
  return { values, vectors };
}

/** Each mode's ħω/k_B and its weighted overlap |Σ g·e e^{iqR}/√M|² with a route. */
export function forEachOverlap(
  set: ModeSet,
  body: SpringBody,
  pulls: readonly Pull[],
  visit: (theta: number, squared: number) => void,
): void {
  const size = 3 * body.atoms.length;
  const count = pulls.length;
  const cos = new Float64Array(count);
  const sin = new Float64Array(count);
  for (const [p, { position, atom }] of pulls.entries()) {
    const phase = set.q[0] * position[0] + set.q[1] * position[1] + set.q[2] * position[2];
    const root = 1 / Math.sqrt(body.atoms[atom]!.mass);
    cos[p] = root * Math.cos(phase);
    sin[p] = root * Math.sin(phase);
  }
  for (let s = 0; s < set.theta.length; s++) {
    let x = 0;
    let y = 0;
    for (let p = 0; p < count; p++) {
      const { g, atom } = pulls[p]!;
      const at = s * size + 3 * atom;
      const re = g[0] * set.re[at]! + g[1] * set.re[at + 1]! + g[2] * set.re[at + 2]!;
      const im = set.im ? g[0] * set.im[at]! + g[1] * set.im[at + 1]! + g[2] * set.im[at + 2]! : 0;
      x += cos[p]! * re - sin[p]! * im;
      y += cos[p]! * im + sin[p]! * re;
    }
    visit(set.theta[s]!, set.weight * (x * x + y * y));
  }
}
