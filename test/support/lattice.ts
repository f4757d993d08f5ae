import type { Site, SiteAtom, Vec3 } from '../../packages/core/src/structure/types.js';

/** A site cut from a lattice by hand, for tests that should not lean on the readers. */
export function latticeSite(
  cell: readonly [Vec3, Vec3, Vec3],
  basis: readonly { readonly element: string; readonly at: Vec3 }[],
  radius: number,
): Site {
  const atoms: SiteAtom[] = [];
  const cart = (f: Vec3): Vec3 => [0, 1, 2].map((i) => f[0] * cell[0][i]! + f[1] * cell[1][i]! + f[2] * cell[2][i]!) as unknown as Vec3;
  const origin = cart(basis[0]!.at);
  const n = Math.ceil(radius / Math.min(...cell.map((v) => Math.hypot(...v)))) + 2;
  for (let a = -n; a <= n; a++)
    for (let b = -n; b <= n; b++)
      for (let c = -n; c <= n; c++)
        basis.forEach(({ element, at }, source) => {
          const p = cart([at[0] + a, at[1] + b, at[2] + c]);
          const position: Vec3 = [p[0] - origin[0], p[1] - origin[1], p[2] - origin[2]];
          const distance = Math.hypot(...position);
          if (distance <= radius) atoms.push({ element, name: element, position, distance, occupancy: 1, source, symmetry: 'x,y,z' });
        });
  atoms.sort((p, q) => p.distance - q.distance);
  const [u, v, w] = cell;
  const volume = Math.abs(u[0] * (v[1] * w[2] - v[2] * w[1]) - u[1] * (v[0] * w[2] - v[2] * w[0]) + u[2] * (v[0] * w[1] - v[1] * w[0]));
  return {
    label: basis[0]!.element,
    element: basis[0]!.element,
    weight: 1,
    atoms,
    radius,
    periodic: true,
    atomDensity: basis.length / volume,
    diagnostics: [],
  };
}
