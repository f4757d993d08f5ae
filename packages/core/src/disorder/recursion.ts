/**
 * The vibrations that one route sees, without the normal modes: the Lanczos recursion started from the route's own
 * mass-weighted gradient gives a Gauss quadrature of its projected density of states, which is all that σ² asks for
 * (Poiarkova & Rehr, Phys. Rev. B 59, 948 (1999), with the recursion method; Golub & Welsch, Math. Comput. 23, 221
 * (1969)). Cost ∝ atoms, where diagonalising costs ∝ atoms³. Full re-orthogonalisation: ghosts would count twice.
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { axpy, dot, KELVIN_PER_ROOT, type Pull } from './normal-modes.js';
import type { SpringBody, SpringTerm } from './spring-terms.js';

/** ħω/k_B in K, and the squared overlap, of the quadrature's nodes. */
export interface Spectrum {
  readonly theta: Float64Array;
  readonly squared: Float64Array;
}

/** The recursion is looked at every so many steps, and ended when ⟨1/ω²⟩, the most demanding moment σ² asks for, stands still. */
const LOOK = 12;
const SETTLED = 1e-4;
const LONGEST = 240;

/**
 * @param rigid  motions to keep out, orthonormal, mass-weighted
 * @returns a route's spectrum from its pulls; σ² within 1e-4 of the normal modes' (tests), after some 40 steps
 */
export function recursion(
  body: SpringBody,
  terms: readonly SpringTerm[],
  rigid: readonly Float64Array[],
): (pulls: readonly Pull[]) => Spectrum {
  const size = 3 * body.atoms.length;
  const root = Float64Array.from({ length: size }, (_, i) => 1 / Math.sqrt(body.atoms[Math.floor(i / 3)]!.mass));
  const apply = sparseHessian(body.atoms.length, terms, root);

  return (pulls) => {
    let v: Float64Array = new Float64Array(size);
    for (const { atom, g } of pulls) for (let c = 0; c < 3; c++) v[3 * atom + c]! += g[c]! * root[3 * atom + c]!;
    for (const u of rigid) axpy(-dot(u, v), u, v);
    const norm = Math.sqrt(dot(v, v));
    if (!(norm > 1e-12)) return { theta: new Float64Array(0), squared: new Float64Array(0) };
    v = v.map((x) => x / norm);
    const basis = [v];
    const alpha: number[] = [];
    const beta: number[] = [];
    const w = new Float64Array(size);
    let moment = 0;
    for (let n = 0; n < Math.min(LONGEST, size); n++) {
      apply(basis[n]!, w);
      alpha.push(dot(basis[n]!, w));
      for (let pass = 0; pass < 2; pass++) {
        for (const u of rigid) axpy(-dot(u, w), u, w);
        for (const u of basis) axpy(-dot(u, w), u, w);
      }
      const length = Math.sqrt(dot(w, w));
      if (length < 1e-10 * alpha[0]!) break; // the route's own part of space is used up: exact
      if (alpha.length % LOOK === 0) {
        const { theta, squared } = quadrature(alpha, beta, norm);
        const now = theta.reduce((sum, t, s) => sum + squared[s]! / (t * t), 0);
        if (Math.abs(now - moment) < SETTLED * now) return { theta, squared };
        moment = now;
      }
      beta.push(length);
      basis.push(w.map((x) => x / length));
    }
    return quadrature(alpha, beta, norm);
  };
}

/** Nodes and weights from the recursion's tridiagonal matrix. */
function quadrature(alpha: readonly number[], beta: readonly number[], norm: number): Spectrum {
  const m = alpha.length;
  const t = Matrix.zeros(m, m);
  for (let i = 0; i < m; i++) {
    t.set(i, i, alpha[i]!);
    if (i + 1 < m) {
      t.set(i, i + 1, beta[i]!);
      t.set(i + 1, i, beta[i]!);
    }
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(t, { assumeSymmetric: true });
  return {
    theta: Float64Array.from(realEigenvalues, (x) => KELVIN_PER_ROOT * Math.sqrt(Math.max(0, x))),
    squared: Float64Array.from(realEigenvalues, (_, s) => (norm * eigenvectorMatrix.get(0, s)) ** 2),
  };
}

/** x ↦ H x for the mass-weighted Hessian kept as 3 × 3 blocks, row by row. */
function sparseHessian(count: number, terms: readonly SpringTerm[], root: Float64Array): (x: Float64Array, y: Float64Array) => void {
  const rows = Array.from({ length: count }, () => new Map<number, Float64Array>());
  for (const { k, atoms, b } of terms)
    for (const [p, i] of atoms.entries())
      for (const [q, j] of atoms.entries()) {
        const block = rows[i]!.get(j) ?? new Float64Array(9);
        rows[i]!.set(j, block);
        const scale = k * root[3 * i]! * root[3 * j]!;
        for (let c = 0; c < 9; c++) block[c]! += scale * b[3 * p + Math.floor(c / 3)]! * b[3 * q + (c % 3)]!;
      }
  const start = new Int32Array(count + 1);
  for (let i = 0; i < count; i++) start[i + 1] = start[i]! + rows[i]!.size;
  const column = new Int32Array(start[count]!);
  const value = new Float64Array(9 * column.length);
  for (const [i, row] of rows.entries()) {
    let at = start[i]!;
    for (const [j, block] of row) {
      column[at] = 3 * j;
      value.set(block, 9 * at++);
    }
  }
  return (x, y) => {
    for (let i = 0; i < count; i++) {
      let [s0, s1, s2] = [0, 0, 0];
      for (let at = start[i]!; at < start[i + 1]!; at++) {
        const j = column[at]!;
        const v = 9 * at;
        const [x0, x1, x2] = [x[j]!, x[j + 1]!, x[j + 2]!];
        s0 += value[v]! * x0 + value[v + 1]! * x1 + value[v + 2]! * x2;
        s1 += value[v + 3]! * x0 + value[v + 4]! * x1 + value[v + 5]! * x2;
        s2 += value[v + 6]! * x0 + value[v + 7]! * x1 + value[v + 8]! * x2;
      }
      y[3 * i] = s0;
      y[3 * i + 1] = s1;
      y[3 * i + 2] = s2;
    }
  };
}
