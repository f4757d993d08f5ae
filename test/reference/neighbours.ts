/** Slow and plain: every image of every atom within a radius, by looping over all lattice translations that could matter. */
import { cellGeometry, type Structure, type Vec3 } from '../../packages/core/src/structure/index.js';

/** Sorted distances (Å) of all images of all atoms within `radius` of `centre`, images closer than 0.01 Å counted once. */
export function neighbourDistances(structure: Structure, centre: Vec3, radius: number): number[] {
  const found: Vec3[] = [];
  const { toCartesian: A, toFractional: B, reciprocal } = cellGeometry(structure.cell!);
  const reach = reciprocal.map((r) => Math.ceil(radius * r) + 5); // + 5: atoms may be written some cells away;
  for (const atom of structure.atoms) {
    const f = [0, 1, 2].map((i) => B[3 * i]! * atom.position[0] + B[3 * i + 1]! * atom.position[1] + B[3 * i + 2]! * atom.position[2]);
    for (const { rotation: m, translation: t } of structure.operators) {
      const g = [0, 1, 2].map((i) => m[3 * i]! * f[0]! + m[3 * i + 1]! * f[1]! + m[3 * i + 2]! * f[2]! + t[i]!);
      for (let u = -reach[0]!; u <= reach[0]!; u++)
        for (let v = -reach[1]!; v <= reach[1]!; v++)
          for (let w = -reach[2]!; w <= reach[2]!; w++) {
            const h = [g[0]! + u, g[1]! + v, g[2]! + w];
            const r = [0, 1, 2].map((i) => A[3 * i]! * h[0]! + A[3 * i + 1]! * h[1]! + A[3 * i + 2]! * h[2]!) as unknown as Vec3;
            const near = (p: Vec3, limit: number) => Math.hypot(p[0] - r[0], p[1] - r[1], p[2] - r[2]) <= limit;
            if (near(centre, radius) && !found.some((p) => near(p, 0.01))) found.push(r);
          }
    }
  }
  return found.map((p) => Math.hypot(p[0] - centre[0], p[1] - centre[1], p[2] - centre[2])).sort((a, b) => a - b);
}
