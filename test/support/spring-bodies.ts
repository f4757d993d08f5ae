import type { SpringBody } from '../../packages/core/src/disorder/index.js';
import type { Vec3 } from '../../packages/core/src/structure/types.js';

/** Standard atomic masses, u (IUPAC 2016, rounded). */
export const MASS: Readonly<Record<string, number>> = {
  H: 1.008,
  C: 12.011,
  N: 14.007,
  O: 15.999,
  Na: 22.99,
  Al: 26.982,
  S: 32.06,
  Cl: 35.45,
  Ti: 47.867,
  Cr: 51.996,
  Mn: 54.938,
  Fe: 55.845,
  Ni: 58.693,
  Cu: 63.546,
  Zn: 65.38,
  Ge: 72.63,
  Ag: 107.868,
  Pt: 195.084,
  Au: 196.967,
};

export const atomAt = (element: string, position: readonly number[]) => ({
  element,
  position: position as unknown as Vec3,
  mass: MASS[element]!,
});
const times = (v: readonly number[], f: number) => v.map((x) => x * f);

export const fcc = (a: number): [Vec3, Vec3, Vec3] => [
  [0, a / 2, a / 2],
  [a / 2, 0, a / 2],
  [a / 2, a / 2, 0],
];
const bcc = (a: number): [Vec3, Vec3, Vec3] => [
  [-a / 2, a / 2, a / 2],
  [a / 2, -a / 2, a / 2],
  [a / 2, a / 2, -a / 2],
];

/** Crystals by their primitive cells; lattice numbers of the handbooks, from memory. */
export const crystals = {
  fcc: (element: string, a: number): SpringBody => ({ atoms: [atomAt(element, [0, 0, 0])], lattice: fcc(a) }),
  bcc: (element: string, a: number): SpringBody => ({ atoms: [atomAt(element, [0, 0, 0])], lattice: bcc(a) }),
  zincblende: (m: string, x: string, a: number): SpringBody => ({
    atoms: [atomAt(m, [0, 0, 0]), atomAt(x, [a / 4, a / 4, a / 4])],
    lattice: fcc(a),
  }),
  rocksalt: (m: string, x: string, a: number): SpringBody => ({ atoms: [atomAt(m, [0, 0, 0]), atomAt(x, [a / 2, 0, 0])], lattice: fcc(a) }),
  corundum: (m: string, a: number, c: number, z: number, x: number): SpringBody => {
    const h = (a * Math.sqrt(3)) / 2;
    const cart = (f: readonly number[]): Vec3 => [a * (f[0]! - f[1]! / 2), h * f[1]!, c * f[2]!];
    const metals = [z, 0.5 - z, -z, 0.5 + z].map((f) => atomAt(m, cart([0, 0, f])));
    const oxygens = [
      [x, 0, 0.25],
      [0, x, 0.25],
      [-x, -x, 0.25],
      [-x, 0, 0.75],
      [0, -x, 0.75],
      [x, x, 0.75],
    ].map((f) => atomAt('O', cart(f)));
    return {
      atoms: [...metals, ...oxygens],
      lattice: [cart([2 / 3, 1 / 3, 1 / 3]), cart([-1 / 3, 1 / 3, 1 / 3]), cart([-1 / 3, -2 / 3, 1 / 3])],
    };
  },
  rutile: (m: string, a: number, c: number, u: number): SpringBody => ({
    atoms: [
      atomAt(m, [0, 0, 0]),
      atomAt(m, [a / 2, a / 2, c / 2]),
      ...[
        [u, u, 0],
        [-u, -u, 0],
        [0.5 + u, 0.5 - u, 0.5],
        [0.5 - u, 0.5 + u, 0.5],
      ].map((f) => atomAt('O', [f[0]! * a, f[1]! * a, f[2]! * c])),
    ],
    lattice: [
      [a, 0, 0],
      [0, a, 0],
      [0, 0, c],
    ],
  }),
};

const TETRAHEDRON = [
  [1, 1, 1],
  [1, -1, -1],
  [-1, 1, -1],
  [-1, -1, 1],
].map((v) => times(v, 1 / Math.sqrt(3)));
const OCTAHEDRON = [
  [1, 0, 0],
  [-1, 0, 0],
  [0, 1, 0],
  [0, -1, 0],
  [0, 0, 1],
  [0, 0, -1],
];

/** Molecules: gas-phase or crystal distances of the handbooks, from memory. */
export const molecules = {
  tetrahedral: (m: string, x: string, r: number): SpringBody => ({
    atoms: [atomAt(m, [0, 0, 0]), ...TETRAHEDRON.map((v) => atomAt(x, times(v, r)))],
  }),
  /** Ligands A or A–B straight on; `mass` in place of the first ligand atom's, for a ligand moving as a whole. */
  octahedral: (m: string, ligands: readonly (readonly [element: string, r: number])[], mass?: number): SpringBody => ({
    atoms: [
      atomAt(m, [0, 0, 0]),
      ...OCTAHEDRON.flatMap((v) => ligands.map(([x, r]) => ({ ...atomAt(x, times(v, r)), ...(mass === undefined ? {} : { mass }) }))),
    ],
  }),
  carbonDioxide: (): SpringBody => ({ atoms: [atomAt('C', [0, 0, 0]), atomAt('O', [1.162, 0, 0]), atomAt('O', [-1.162, 0, 0])] }),
  water: (): SpringBody => ({
    atoms: [atomAt('O', [0, 0, 0]), atomAt('H', [0.958, 0, 0]), atomAt('H', [0.958 * Math.cos(1.824), 0.958 * Math.sin(1.824), 0])],
  }),
};

/** Shells about the first atom of a crystal: one vector a shell and element, up to `reach` Å. */
export function shellsOf(body: SpringBody, reach: number): { element: string; r: number; position: Vec3 }[] {
  const [a, b, c] = body.lattice!;
  const origin = body.atoms[0]!.position;
  const found: { element: string; r: number; position: Vec3 }[] = [];
  for (let i = -4; i <= 4; i++)
    for (let j = -4; j <= 4; j++)
      for (let k = -4; k <= 4; k++)
        for (const { element, position: p } of body.atoms) {
          const position = [0, 1, 2].map((x) => p[x]! + i * a[x]! + j * b[x]! + k * c[x]!) as unknown as Vec3;
          const r = Math.hypot(...position.map((x, n) => x - origin[n]!));
          if (r > 0.1 && r < reach && !found.some((s) => s.element === element && Math.abs(s.r - r) < 0.005))
            found.push({ element, r, position });
        }
  return found.sort((s, t) => s.r - t.r);
}

/** The two-leg route from the body's first atom to a place. */
export function routeTo(body: SpringBody, element: string, position: Vec3) {
  const centre = body.atoms[0]!;
  return [
    { atom: 0, element: centre.element, position: centre.position, mass: centre.mass },
    { atom: 1, element, position, mass: MASS[element]! },
  ];
}
