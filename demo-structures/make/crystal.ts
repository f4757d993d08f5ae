/** Puts a model into an orthorhombic cell of P 21 21 21 and moves its atoms by the precision its statistics stand for. Å, Å². */
import { dpiFromRFree } from '../../packages/core/src/structure/index.js';
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import type { Model } from './oxidase.js';
import { METALS } from './relax.js';
import type { Crystal, WrittenAtom } from './write.js';

/** The three screw axes of P 21 21 21, fractional. */
const SCREWS: readonly ((f: Vec3) => Vec3)[] = [
  ([x, y, z]) => [x + 0.5, -y + 0.5, -z],
  ([x, y, z]) => [-x, y + 0.5, -z + 0.5],
  ([x, y, z]) => [-x + 0.5, -y, z + 0.5],
];

/** Where in the cell the model's copies keep farthest from it: tried on a mesh of an eighth of the cell's edges. */
function roomiest(positions: readonly Vec3[], cell: Vec3): Vec3 {
  const mean = [0, 1, 2].map((c) => positions.reduce((sum, p) => sum + p[c]!, 0) / positions.length);
  let best: { shift: Vec3; clearance: number } = { shift: [0, 0, 0], clearance: 0 };
  for (let m = 0; m < 512; m++) {
    const shift = [m % 8, Math.floor(m / 8) % 8, Math.floor(m / 64)].map((s, c) => (s / 8) * cell[c]! - mean[c]!) as unknown as Vec3;
    const moved = positions.map((p) => p.map((x, c) => x + shift[c]!) as unknown as Vec3);
    let clearance = 9;
    for (const screw of SCREWS) {
      for (const p of moved) {
        const image = screw(p.map((x, c) => x / cell[c]!) as unknown as Vec3);
        for (const q of moved) {
          const d = [0, 1, 2].map((c) => {
            const f = image[c]! - q[c]! / cell[c]!;
            return (f - Math.round(f)) * cell[c]!;
          });
          clearance = Math.min(clearance, Math.hypot(...d));
        }
        if (clearance < best.clearance) break;
      }
    }
    if (clearance > best.clearance) best = { shift, clearance };
  }
  if (best.clearance < 3.2) throw new Error(`demo structure: copies come within ${best.clearance.toFixed(2)} Å; a larger cell is wanted`);
  return best.shift;
}

export interface CrystalWish extends Omit<Crystal, 'reflections'> {
  /** Isotropic U of the metal, Å²; ligands have 1.4, the others 2 times as much. */
  readonly metalU: number;
  /** Displacement ellipsoids, long along the bonds to the metal. */
  readonly anisotropic: boolean;
  /** Metal and first shell stand as built; else they too are moved by the precision. */
  readonly holdShell: boolean;
}

/** Length of an ellipsoid's long axis over its mean, less one. */
const STRETCH = 0.8;

export function crystallise(model: Model, wish: CrystalWish, normal: () => number): { atoms: WrittenAtom[]; crystal: Crystal } {
  const { cell, resolution, rFree, completeness, metalU } = wish;
  const positions = model.atoms.map(({ position }) => position);
  const shift = roomiest(positions, cell);
  // Reciprocal points of one hemisphere, shared out over the four operations' octants: V_asu (2π/3)/d³.
  const volume = (cell[0] * cell[1] * cell[2]) / 4;
  const reflections = Math.round((((2 * Math.PI) / 3) * volume * completeness) / 100 / resolution ** 3);
  const sigma = dpiFromRFree({ atoms: model.atoms.length, reflections, resolution, completeness: completeness / 100 }, rFree);
  const metals = positions.filter((_, i) => METALS.has(model.atoms[i]!.element));
  const drafts = model.atoms.map((atom, i) => {
    const near = metals.map((m) => atom.position.map((x, c) => m[c]! - x) as unknown as Vec3).filter((d) => Math.hypot(...d) > 0.1);
    // A lone metal has no bond to lean on; nothing here gives it an ellipsoid.
    const nearest: Vec3 = near.sort((a, b) => Math.hypot(...a) - Math.hypot(...b))[0] ?? [9, 0, 0];
    const isMetal = METALS.has(atom.element);
    const isShell = !isMetal && Math.hypot(...nearest) < 2.5;
    return { atom, i, nearest, isMetal, isShell, u: metalU * (isMetal ? 1 : isShell ? 1.4 : 2) };
  });
  const meanU = drafts.reduce((sum, { u }) => sum + u, 0) / drafts.length;
  const atoms = drafts.map(({ atom, nearest, isMetal, isShell, u }): WrittenAtom => {
    const move = [normal(), normal(), normal()];
    const scale = wish.holdShell && (isMetal || isShell) ? 0 : sigma * Math.sqrt(u / meanU);
    const position = atom.position.map((x, c) => x + shift[c]! + scale * move[c]!) as unknown as Vec3;
    const r = Math.hypot(...nearest);
    const at = (a: number, b: number) => u * ((a === b ? 1 - STRETCH / 3 : 0) + (STRETCH * nearest[a]! * nearest[b]!) / (r * r));
    return {
      ...atom,
      position,
      u,
      ...(wish.anisotropic ? { anisotropic: [at(0, 0), at(1, 1), at(2, 2), at(0, 1), at(0, 2), at(1, 2)] } : {}),
    };
  });
  return { atoms, crystal: { ...wish, reflections } };
}
