/** Iron between four cysteines: the site of the invented lanternweed redoxin. Å. */
import { type Model, settle } from './oxidase.js';
import { Draft } from './relax.js';
import { cysteine } from './residues.js';

const FE_S = [2.29, 2.305, 2.315, 2.33];
const TETRAHEDRON = [
  [1, 1, 1],
  [-1, -1, 1],
  [-1, 1, -1],
  [1, -1, -1],
] as const;

export function redoxin(seed = 1): Model {
  const draft = new Draft();
  const fe = draft.add({ name: 'FE', number: 101 }, 'FE', 'Fe', [0, 0, 0]);
  [6, 9, 39, 42].forEach((number, i) => {
    cysteine(draft, number, fe, FE_S[i]!, TETRAHEDRON[i]!);
  });
  const sulfurs = [6, 9, 39, 42].map((number) => draft.find(number, 'SG'));
  for (let a = 0; a < 4; a++) for (let b = 0; b < a; b++) draft.tie(sulfurs[a]!, sulfurs[b]!, 2.31 * Math.sqrt(8 / 3), 0.2);
  return settle(draft, seed);
}
