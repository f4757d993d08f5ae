/**
 * The binuclear manganese site of the invented lanternweed oxidase, built from ligands and wished-for distances. Å.
 * The metals lie on x, the two oxygen bridges on y, the bridging carboxylate on +z, a water of each metal on −z.
 */

import type { Vec3 } from '../../packages/core/src/structure/types.js';
import { seededRandom } from '../../test/support/random.js';
import { Draft, type DraftAtom, METAL_BOND, relax } from './relax.js';
import { arginineEnd, aspartate, cysteine, glutamate, histidine, lysineEnd, water } from './residues.js';

/** Distances of one form of the site. Pairs are those of Mn1 and Mn2. */
export interface OxidaseDistances {
  readonly metals: number;
  readonly bridge1: readonly [number, number];
  readonly bridge2: readonly [number, number];
  readonly carboxylate: readonly [number, number];
  readonly water: readonly [number, number];
  readonly aspartate: readonly [number, number];
  readonly histidine: readonly [number, number];
}

/** What the measured sample is made of. */
export const TRUE_DISTANCES: OxidaseDistances = {
  metals: 2.7,
  bridge1: [1.86, 1.8],
  bridge2: [1.84, 1.82],
  carboxylate: [2.02, 1.98],
  water: [2.18, 2.1],
  aspartate: [1.95, 1.92],
  histidine: [2.1, 2.06],
};

/** An optimisation of the true topology: nowhere 0.02 Å off. */
export const OPTIMISED_DISTANCES: OxidaseDistances = {
  metals: 2.71,
  bridge1: [1.855, 1.81],
  bridge2: [1.85, 1.825],
  carboxylate: [2.03, 1.97],
  water: [2.185, 2.105],
  aspartate: [1.94, 1.93],
  histidine: [2.11, 2.055],
};

/** After reduction in the beam: every bond 0.08 to 0.15 Å longer. */
export const REDUCED_DISTANCES: OxidaseDistances = {
  metals: 2.82,
  bridge1: [1.97, 1.91],
  bridge2: [1.96, 1.92],
  carboxylate: [2.13, 2.09],
  water: [2.33, 2.25],
  aspartate: [2.05, 2.02],
  histidine: [2.2, 2.15],
};

/** 'exchanged': both histidines bind Mn1, both aspartates Mn2. */
export type OxidaseTopology = 'true' | 'exchanged';

export interface Model {
  readonly atoms: readonly (DraftAtom & { readonly position: Vec3 })[];
}

const PLANE: readonly Vec3[] = [
  [-1, 0.85, 0],
  [-1, -0.85, 0],
  [1, -0.85, 0],
  [1, 0.85, 0],
];

export function oxidase(distances: OxidaseDistances, topology: OxidaseTopology = 'true', seed = 1): Model {
  const draft = new Draft();
  const half = distances.metals / 2;
  const cluster = { name: 'MNC', number: 301 };
  const mn1 = draft.add(cluster, 'MN1', 'Mn', [-half, 0, 0]);
  const mn2 = draft.add(cluster, 'MN2', 'Mn', [half, 0, 0]);
  draft.tie(mn1, mn2, distances.metals, METAL_BOND);
  const bridges = [distances.bridge1, distances.bridge2].map(([r1, r2], i) => {
    const o = draft.add(cluster, `O${i + 1}`, 'O', [0, i === 0 ? 1.2 : -1.2, 0]);
    draft.tie(mn1, o, r1, METAL_BOND);
    draft.tie(mn2, o, r2, METAL_BOND);
    return o;
  });
  draft.tie(bridges[0]!, bridges[1]!, 2 * Math.sqrt(1.83 ** 2 - 1.35 ** 2), 0.3);

  glutamate(
    draft,
    64,
    [
      [mn1, distances.carboxylate[0]],
      [mn2, distances.carboxylate[1]],
    ],
    [0, 0, 2],
    [0, 0, 1],
  );
  const [his1, his2] = distances.histidine;
  const [asp1, asp2] = distances.aspartate;
  histidine(draft, 92, mn1, his1, PLANE[0]!);
  if (topology === 'true') {
    aspartate(draft, 37, mn1, asp1, PLANE[1]!);
    histidine(draft, 155, mn2, his2, PLANE[2]!);
  } else {
    histidine(draft, 155, mn1, his2, PLANE[1]!);
    aspartate(draft, 37, mn2, asp1, PLANE[2]!);
  }
  aspartate(draft, 128, mn2, asp2, PLANE[3]!);
  water(draft, 401, mn1, distances.water[0], [0, 0, -1], true);
  water(draft, 402, mn2, distances.water[1], [0, 0, -1], true);
  octahedron(draft, mn1);
  octahedron(draft, mn2);

  arginineEnd(draft, 71, draft.find(37, 'OD2'), topology === 'true' ? [-1, -2, -0.5] : [1, -2, -0.5]);
  lysineEnd(draft, 189, bridges[1]!, [0, -1, 0.3]);
  water(draft, 403, bridges[0]!, 2.75, [0, 1, -0.4], false);
  water(draft, 404, draft.find(401, 'O'), 2.75, [-0.5, 0.5, -1], false);
  water(draft, 405, draft.find(402, 'O'), 2.75, [0.5, -0.5, -1], false);
  return settle(draft, seed);
}

/** The wrong one: a single metal, a thiolate in place of the second half of the site. */
export function mononuclear(seed = 1): Model {
  const draft = new Draft();
  const mn = draft.add({ name: 'MN', number: 301 }, 'MN', 'Mn', [0, 0, 0]);
  glutamate(draft, 64, [[mn, 2.05]], [0, 0, 2], [0, 0, 1]);
  histidine(draft, 92, mn, 2.12, [-1, 1, 0]);
  aspartate(draft, 37, mn, 1.98, [-1, -1, 0]);
  cysteine(draft, 155, mn, 2.36, [1, -1, 0]);
  water(draft, 401, mn, 2.18, [0, 0, -1], true);
  water(draft, 402, mn, 2.1, [1, 1, 0], true);
  octahedron(draft, mn);
  arginineEnd(draft, 71, draft.find(37, 'OD2'), [-1, -2, -0.5]);
  lysineEnd(draft, 189, draft.find(402, 'O'), [1, 1, 1]);
  water(draft, 403, draft.find(402, 'O'), 2.75, [1, 1, -0.5], false);
  water(draft, 404, draft.find(401, 'O'), 2.75, [-0.5, 0.5, -1], false);
  return settle(draft, seed);
}

/** Neighbours of a metal keep about 90° or 180° from each other, as they were planted. */
function octahedron(draft: Draft, metal: number): void {
  const bonds = draft.ties.flatMap(({ i, j, d, w }) =>
    w === METAL_BOND && (i === metal || j === metal) ? [{ other: i === metal ? j : i, d }] : [],
  );
  const ligands = bonds.filter(({ other }) => draft.atoms[other]!.element !== 'Mn');
  const centre = draft.place(metal);
  for (let a = 0; a < ligands.length; a++)
    for (let b = 0; b < a; b++) {
      const [p, q] = [ligands[a]!, ligands[b]!];
      const [u, v] = [p, q].map(({ other }) => draft.place(other).map((x, c) => x - centre[c]!));
      const cosine = u!.reduce((sum, x, c) => sum + x * v![c]!, 0) / (Math.hypot(...u!) * Math.hypot(...v!));
      const ideal = cosine < -0.6 ? -0.97 : -0.02;
      draft.tie(p.other, q.other, Math.sqrt(p.d ** 2 + q.d ** 2 - 2 * p.d * q.d * ideal), 0.2);
    }
}

export function settle(draft: Draft, seed: number): Model {
  const { positions, worst, worstBond } = relax(draft, seededRandom(seed));
  if (worst > 0.15 || worstBond > 0.01)
    throw new Error(
      `demo structure: distances are missed by up to ${worst.toFixed(3)} Å, at metals ${worstBond.toFixed(3)} Å; try another seed`,
    );
  return { atoms: draft.atoms.map((atom, i) => ({ ...atom, position: positions[i]! })) };
}
