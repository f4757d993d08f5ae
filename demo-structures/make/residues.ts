/** Side chains and backbone pieces as ties between their atoms. Bond lengths and angles of organic chemistry, rounded, from memory. Å. */
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import { along, type Draft, METAL_BOND } from './relax.js';

type Planar = Readonly<Record<string, readonly [x: number, y: number]>>;

const RING = 1.157; // regular pentagon of side 1.36
const onRing = (degrees: number, r = RING): [number, number] => [
  r * Math.cos((degrees * Math.PI) / 180),
  r * Math.sin((degrees * Math.PI) / 180),
];

/** Imidazole with CB and with the metal at `r` from NE2, straight out. */
const imidazole = (r: number): Planar => ({
  CG: onRing(90),
  ND1: onRing(162),
  CE1: onRing(234),
  NE2: onRing(306),
  CD2: onRing(18),
  CB: onRing(90, RING + 1.5),
  metal: onRing(306, RING + r),
});

/** Carboxylate: carbon, two oxygens, the carbon it hangs on. */
const carboxylate = (names: readonly [c: string, o1: string, o2: string, tail: string]): Planar => ({
  [names[0]]: [0, 0],
  [names[1]]: [0.582, 1.118],
  [names[2]]: [0.582, -1.118],
  [names[3]]: [-1.52, 0],
});

const GUANIDINIUM: Planar = {
  CZ: [0, 0],
  NE: [-1.33, 0],
  NH1: [0.665, 1.152],
  NH2: [0.665, -1.152],
  CD: [-2.146, 1.21],
};

/** Ties of every pair of a planar group. */
function tiePlanar(draft: Draft, planar: Planar, indexOf: (name: string) => number | undefined): void {
  const names = Object.keys(planar);
  for (let a = 0; a < names.length; a++)
    for (let b = 0; b < a; b++) {
      const [i, j] = [indexOf(names[a]!), indexOf(names[b]!)];
      if (i === undefined || j === undefined) continue;
      const [p, q] = [planar[names[a]!]!, planar[names[b]!]!];
      // The metal's place on the ring's axis is a wish, its distance a demand of its own.
      const isWish = names[a] === 'metal' || names[b] === 'metal';
      draft.tie(i, j, Math.hypot(p[0] - q[0], p[1] - q[1]), isWish ? 0.1 : 1);
    }
}

const ELEMENT = /^[CNOS]/;

interface Planted {
  readonly number: number;
  readonly at: (name: string) => number;
}

/** Adds a residue's atoms in a line outwards from its first, the one that binds; ties come from the caller. */
function plant(draft: Draft, name: string, number: number, names: readonly string[], from: Vec3, direction: Vec3): Planted {
  const indices = new Map<string, number>();
  names.forEach((atom, i) => {
    // A little to the side in turn, so that no three start in a line.
    const side: Vec3 = [((i * 7) % 3) - 1, ((i * 5) % 3) - 1, ((i * 4) % 3) - 1];
    const place = along(from, direction, 1.1 * i);
    indices.set(
      atom,
      draft.add({ name, number }, atom, ELEMENT.exec(atom)![0], [
        place[0] + 0.4 * side[0],
        place[1] + 0.4 * side[1],
        place[2] + 0.4 * side[2],
      ]),
    );
  });
  return { number, at: (atom) => indices.get(atom)! };
}

/** CA with N, C, O behind a CB, of the L hand. */
function tieBackbone(draft: Draft, { at }: Planted, beyondBeta: string, betaToGamma: number): void {
  const pairs: [string, string, number][] = [
    ['CB', 'CA', 1.53],
    ['CA', beyondBeta, betaToGamma],
    ['N', 'CA', 1.46],
    ['CA', 'C', 1.525],
    ['C', 'O', 1.23],
    ['CA', 'O', 2.4],
    ['N', 'C', 2.46],
    ['N', 'CB', 2.46],
    ['C', 'CB', 2.5],
  ];
  for (const [a, b, d] of pairs) draft.tie(at(a), at(b), d);
  draft.chirals.push({ atoms: [at('CA'), at('N'), at('C'), at('CB')], volume: 2.5 });
}

const BACKBONE = ['CA', 'C', 'N', 'O'];

/** A histidine whose NE2 binds `metal` at `r`. */
export function histidine(draft: Draft, number: number, metal: number, r: number, direction: Vec3): void {
  const names = ['NE2', 'CE1', 'CD2', 'ND1', 'CG', 'CB', ...BACKBONE];
  const planted = plant(draft, 'HIS', number, names, along(draft.place(metal), direction, r), direction);
  tiePlanar(draft, imidazole(r), (name) => (name === 'metal' ? metal : planted.at(name)));
  draft.tie(metal, planted.at('NE2'), r, METAL_BOND);
  tieBackbone(draft, planted, 'CG', 2.53);
}

/** An aspartate whose OD1 binds `metal` at `r`. */
export function aspartate(draft: Draft, number: number, metal: number, r: number, direction: Vec3): void {
  const planted = plant(draft, 'ASP', number, ['OD1', 'CG', 'OD2', 'CB', ...BACKBONE], along(draft.place(metal), direction, r), direction);
  tiePlanar(draft, carboxylate(['CG', 'OD1', 'OD2', 'CB']), planted.at);
  draft.tie(metal, planted.at('OD1'), r, METAL_BOND);
  draft.tie(metal, planted.at('CG'), 2.9, 0.1);
  tieBackbone(draft, planted, 'CG', 2.53);
}

/** A glutamate that binds one or two metals by its two oxygens. */
export function glutamate(
  draft: Draft,
  number: number,
  bonds: readonly (readonly [metal: number, r: number])[],
  from: Vec3,
  direction: Vec3,
): void {
  const planted = plant(draft, 'GLU', number, ['OE1', 'OE2', 'CD', 'CG', 'CB', ...BACKBONE], from, direction);
  tiePlanar(draft, carboxylate(['CD', 'OE1', 'OE2', 'CG']), planted.at);
  bonds.forEach(([metal, r], i) => {
    draft.tie(metal, planted.at(`OE${i + 1}`), r, METAL_BOND);
    draft.tie(metal, planted.at('CD'), 2.9, 0.1);
  });
  draft.tie(planted.at('CG'), planted.at('CB'), 1.53);
  draft.tie(planted.at('CD'), planted.at('CB'), 2.53);
  tieBackbone(draft, planted, 'CG', 2.55);
}

/** A cysteine whose SG binds `metal` at `r`; Fe–S–C about 105°. */
export function cysteine(draft: Draft, number: number, metal: number, r: number, direction: Vec3): void {
  const planted = plant(draft, 'CYS', number, ['SG', 'CB', ...BACKBONE], along(draft.place(metal), direction, r), direction);
  draft.tie(metal, planted.at('SG'), r, METAL_BOND);
  draft.tie(planted.at('SG'), planted.at('CB'), 1.82);
  draft.tie(metal, planted.at('CB'), Math.sqrt(r * r + 1.82 ** 2 - 2 * r * 1.82 * Math.cos((105 * Math.PI) / 180)), 1);
  tieBackbone(draft, planted, 'SG', 2.8);
}

/** Guanidinium end of an arginine whose NH1 lies 2.85 Å from `partner`. */
export function arginineEnd(draft: Draft, number: number, partner: number, direction: Vec3): void {
  const planted = plant(draft, 'ARG', number, ['NH1', 'CZ', 'NH2', 'NE', 'CD'], along(draft.place(partner), direction, 2.85), direction);
  tiePlanar(draft, GUANIDINIUM, planted.at);
  draft.tie(partner, planted.at('NH1'), 2.85, 1);
}

/** End of a lysine whose NZ lies 2.85 Å from `partner`. */
export function lysineEnd(draft: Draft, number: number, partner: number, direction: Vec3): void {
  const planted = plant(draft, 'LYS', number, ['NZ', 'CE', 'CD'], along(draft.place(partner), direction, 2.85), direction);
  draft.tie(planted.at('NZ'), planted.at('CE'), 1.49);
  draft.tie(planted.at('CE'), planted.at('CD'), 1.53);
  draft.tie(planted.at('NZ'), planted.at('CD'), 2.49);
  draft.tie(partner, planted.at('NZ'), 2.85, 1);
}

/** The oxygen of a water at `r` from `partner`; a bond to a metal is a demand. */
export function water(draft: Draft, number: number, partner: number, r: number, direction: Vec3, isBond: boolean): void {
  const i = draft.add({ name: 'HOH', number }, 'O', 'O', along(draft.place(partner), direction, r));
  draft.tie(partner, i, r, isBond ? METAL_BOND : 1);
}
