/**
 * The hidden ensemble: displaced copies of a structure. Its force field is a network of central springs of its own, not the
 * one Ringtrue predicts disorder with; every mode is drawn from the Gaussian of a quantum oscillator,
 *   ⟨q²⟩ = ħ/(2ω) coth(ħω/2k_BT),
 * so that displacements of neighbours are correlated; a small spread frozen in is added to every atom on its own.
 * Å, u, mdyn/Å, K.
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { meanSquare } from '../../packages/core/src/disorder/oscillator.js';
import { elementBySymbol } from '../../packages/core/src/elements/index.js';
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import { METALS } from './relax.js';

export interface Body {
  readonly atoms: readonly { readonly element: string; readonly position: Vec3 }[];
  /** Edges of an orthogonal box it repeats in, Å. */
  readonly box?: Vec3;
  /** Atoms tied to their place because the rest of the protein holds them. */
  readonly held?: ReadonlySet<number>;
}

/** K per √(mdyn/Å/u): 1302.79 cm⁻¹ times 1.438777 K cm. */
const THETA = 1302.79 * 1.438777;
const REACH = 4.5;
const HELD = 0.2;
const LOOSE = 0.01;

/** Spring of a pair in contact, mdyn/Å; 0 where it is no bond. */
function bondSpring(a: string, b: string, r: number): number {
  if (METALS.has(a) && METALS.has(b)) return r < 3 ? 0.6 : 0;
  const [metal, ligand] = METALS.has(a) ? [a, b] : [b, a];
  if (!METALS.has(metal)) return r < 1.95 ? 5 : 0;
  if (ligand === 'S') return r < 2.6 ? 1.4 : 0;
  if (r > 2.5) return 0;
  return (ligand === 'N' ? 1.3 : 1) * 2.6 * Math.exp(-(r - 1.8) / 0.26);
}

/** Draws frames: displacements (3n) in Å. */
export function ensemble(body: Body, temperature: number, frozenSpread: number, normal: () => number): () => Float64Array {
  const { atoms, box, held } = body;
  const n = atoms.length;
  const vector = (i: number, j: number): Vec3 =>
    [0, 1, 2].map((c) => {
      const d = atoms[j]!.position[c]! - atoms[i]!.position[c]!;
      return box ? d - box[c]! * Math.round(d / box[c]!) : d;
    }) as unknown as Vec3;
  const bonded: Set<number>[] = atoms.map(() => new Set());
  const pairs: { i: number; j: number; d: Vec3; r: number; k: number }[] = [];
  for (let i = 0; i < n; i++)
    for (let j = i + 1; j < n; j++) {
      const d = vector(i, j);
      const r = Math.hypot(...d);
      if (r > REACH) continue;
      const k = bondSpring(atoms[i]!.element, atoms[j]!.element, r);
      if (k > 0) {
        bonded[i]!.add(j);
        bonded[j]!.add(i);
      }
      pairs.push({ i, j, d, r, k });
    }
  const H = Matrix.zeros(3 * n, 3 * n);
  const root = atoms.map(({ element }) => Math.sqrt(elementBySymbol(element).mass));
  const addTo = (row: number, column: number, value: number): void => {
    H.set(row, column, H.get(row, column) + value);
  };
  for (const { i, j, d, r, k } of pairs) {
    const middle = [...bonded[i]!].find((m) => bonded[j]!.has(m));
    const angle = middle === undefined ? 0 : METALS.has(atoms[middle]!.element) ? 0.15 : 0.8;
    const spring = k || angle || 0.03 * (3 / r) ** 2;
    for (let a = 0; a < 3; a++)
      for (let b = 0; b < 3; b++) {
        const value = (spring * d[a]! * d[b]!) / (r * r);
        addTo(3 * i + a, 3 * i + b, value / (root[i]! * root[i]!));
        addTo(3 * j + a, 3 * j + b, value / (root[j]! * root[j]!));
        addTo(3 * i + a, 3 * j + b, -value / (root[i]! * root[j]!));
        addTo(3 * j + b, 3 * i + a, -value / (root[i]! * root[j]!));
      }
  }
  for (let i = 0; i < n; i++)
    for (let a = 0; a < 3; a++) addTo(3 * i + a, 3 * i + a, (held?.has(i) ? HELD : LOOSE) / (root[i]! * root[i]!));
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(H, { assumeSymmetric: true });
  const modes = eigenvectorMatrix.transpose().to2DArray();
  const amplitude = realEigenvalues.map((value) => Math.sqrt(meanSquare(1, THETA * Math.sqrt(Math.max(value, 1e-6)), temperature)));
  return () => {
    const u = new Float64Array(3 * n);
    modes.forEach((mode, s) => {
      const q = amplitude[s]! * normal();
      for (let m = 0; m < u.length; m++) u[m]! += q * mode[m]!;
    });
    for (let m = 0; m < u.length; m++) u[m] = u[m]! / root[Math.floor(m / 3)]! + frozenSpread * normal();
    return u;
  };
}
