/** Paths in words a chemist reads: "Fe–C–N–Fe, straight on at C". */
import type { Site, Vec3 } from '../structure/types.js';

/** A scatterer passed with less than this turn, degrees, focuses the wave onto the next one. */
const FOCUSING = 20;

/**
 * @param vertices  indices into site.atoms, absorber first
 * @returns the elements along the route; for three legs and more the largest angle at a scatterer the electron passes through,
 *   and whether it focuses
 */
export function pathLabel(site: Site, vertices: readonly number[]): string {
  const names = [...vertices, vertices[0]!].map((vertex) => site.atoms[vertex]!.element).join('–');
  if (vertices.length === 2) return names;
  let smallestTurn = 180;
  let through = 0;
  for (let i = 1; i < vertices.length; i++) {
    const [a, b, c] = [vertices[i - 1]!, vertices[i]!, vertices[(i + 1) % vertices.length]!].map((vertex) => site.atoms[vertex]!.position);
    const turn = turnAt(a!, b!, c!);
    if (turn < smallestTurn) {
      smallestTurn = turn;
      through = vertices[i]!;
    }
  }
  const angle = `${(180 - smallestTurn).toFixed(0)}° at ${site.atoms[through]!.element}`;
  return smallestTurn <= FOCUSING ? `${names}, focusing (${angle})` : `${names} (${angle})`;
}

/** Change of direction at b, degrees: 0 straight on, 180 straight back. */
function turnAt(a: Vec3, b: Vec3, c: Vec3): number {
  const u = [b[0] - a[0], b[1] - a[1], b[2] - a[2]] as const;
  const v = [c[0] - b[0], c[1] - b[1], c[2] - b[2]] as const;
  const cosine = (u[0] * v[0] + u[1] * v[1] + u[2] * v[2]) / (Math.hypot(...u) * Math.hypot(...v));
  return (Math.acos(Math.max(-1, Math.min(1, cosine))) * 180) / Math.PI;
}
