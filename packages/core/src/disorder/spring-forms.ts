/**
 * Published general forms for the constants of a model Hessian, to choose among by test. Each takes the structure's own
 * distances as reference. Stretch in mdyn/Å (100 N/m), bend and torsion in mdyn Å/rad². Constants from memory of the papers.
 *
 *   order    n = 10^((r₁ − r)/0.6)                              Pauling, J. Am. Chem. Soc. 69, 542 (1947)
 *   UFF      k = 664.12 ZZ r⁻³, bend 664.12 ZZ r_ik⁻⁵ [3 r_ij r_jk sin²θ − r_ik² cosθ] kcal/mol
 *                                                              Rappé et al., J. Am. Chem. Soc. 114, 10024 (1992)
 *   Lindh    0.45 ρ, bend 0.15 ρρ, torsion 0.005 ρρρ hartree, ρ = e^{α(r_ref² − r²)}    Chem. Phys. Lett. 241, 423 (1995)
 *   Schlegel 1.734/(r − B)³, bend 0.25 (0.16 with hydrogen)    Theor. Chim. Acta 66, 333 (1984)
 *   Badger   1.86/(r − d)³                                     J. Chem. Phys. 2, 128 (1934); 3, 710 (1935)
 *   Gordy    1.67 n (χχ/r²)^¾ + 0.30                           J. Chem. Phys. 14, 305 (1946)
 *
 * **Fractional bonds.** The molecular forms are made for whole bonds. Where an atom shares its valence among many
 * neighbours, as in a metal or an ionic crystal, the constant falls with the bond order (Gordy: k ∝ n); Lindh's bends and
 * torsions fall with the product of the orders of their bonds. `orderedUff` joins the two: UFF constants times
 * min(1, n), for a bend the product of both, n lowered where an anion's valence is shared (spring-terms.ts). No number in it is fitted here; the scores stand in the spring tests.
 */

import { isMetal } from '../structure/bonding.js';
import { springConstantsOf } from './spring-parameters.js';

export interface SpringForm {
  readonly name: string;
  /** mdyn/Å. @param r Å @param order of the bond, ≤ 1 */
  stretch(a: string, b: string, r: number, order: number): number;
  /** mdyn Å/rad² at j of i–j–k. @param cosine of the angle @param orders product of the two bonds' orders */
  bend(i: string, j: string, k: string, rij: number, rjk: number, cosine: number, orders: number): number;
}

const MDYN_PER_KCAL = 1 / 143.9325; // kcal/mol/Å² → mdyn/Å, and kcal/mol → mdyn Å
const MDYN_PER_ATOMIC = 15.56893; // hartree/bohr² → mdyn/Å
const MDYN_ANGSTROM_PER_HARTREE = 4.359745;
const BOHR = 0.5291772;

/** Torsion constant of Lindh et al. for whole bonds, mdyn Å/rad². */
export const TORSION = 0.005 * MDYN_ANGSTROM_PER_HARTREE;

/** Pauling's bond order of a distance, not above 1: a whole bond. */
export function bondOrder(a: string, b: string, r: number): number {
  return Math.min(1, 10 ** ((springConstantsOf(a)[1] + springConstantsOf(b)[1] - r) / 0.6));
}

function uffStretch(a: string, b: string, r: number): number {
  return (664.12 * MDYN_PER_KCAL * springConstantsOf(a)[0] * springConstantsOf(b)[0]) / r ** 3;
}

function uffBend(i: string, k: string, rij: number, rjk: number, cosine: number): number {
  const rik2 = rij * rij + rjk * rjk - 2 * rij * rjk * cosine;
  const bracket = 3 * rij * rjk * (1 - cosine * cosine) - rik2 * cosine;
  return (664.12 * MDYN_PER_KCAL * springConstantsOf(i)[0] * springConstantsOf(k)[0] * Math.max(0, bracket)) / rik2 ** 2.5;
}

export const orderedUff: SpringForm = {
  name: 'Rappé et al. 1992, times Pauling bond order',
  stretch: (a, b, r, order) => uffStretch(a, b, r) * order,
  bend: (i, _j, k, rij, rjk, cosine, orders) => uffBend(i, k, rij, rjk, cosine) * orders,
};

export const plainUff: SpringForm = {
  name: 'Rappé et al. 1992',
  stretch: uffStretch,
  bend: (i, _j, k, rij, rjk, cosine) => uffBend(i, k, rij, rjk, cosine),
};

const FIRST = new Set(['H', 'He']);
const SECOND = new Set('Li Be B C N O F Ne'.split(' '));
const row = (element: string): 0 | 1 | 2 => (FIRST.has(element) ? 0 : SECOND.has(element) ? 1 : 2);
const LINDH_ALPHA = [
  [1, 0.3949, 0.3949],
  [0.3949, 0.28, 0.28],
  [0.3949, 0.28, 0.28],
];
const LINDH_REFERENCE = [
  [1.35, 2.1, 2.53],
  [2.1, 2.87, 3.4],
  [2.53, 3.4, 3.4],
];
function lindhRho(a: string, b: string, r: number): number {
  const [i, j] = [row(a), row(b)];
  return Math.exp(LINDH_ALPHA[i]![j]! * (LINDH_REFERENCE[i]![j]! ** 2 - (r / BOHR) ** 2));
}
export const lindh: SpringForm = {
  name: 'Lindh et al. 1995',
  stretch: (a, b, r) => 0.45 * MDYN_PER_ATOMIC * lindhRho(a, b, r),
  bend: (i, j, k, rij, rjk) => 0.15 * MDYN_ANGSTROM_PER_HARTREE * lindhRho(i, j, rij) * lindhRho(j, k, rjk),
};

const SCHLEGEL_B = [
  [-0.244, 0.352, 0.66],
  [0.352, 1.085, 1.522],
  [0.66, 1.522, 2.068],
];
export const schlegel: SpringForm = {
  name: 'Schlegel 1984',
  stretch: (a, b, r) => (1.734 * MDYN_PER_ATOMIC) / (r / BOHR - SCHLEGEL_B[row(a)]![row(b)]!) ** 3,
  bend: (i, _j, k) => (row(i) === 0 || row(k) === 0 ? 0.16 : 0.25) * MDYN_ANGSTROM_PER_HARTREE,
};

const BADGER_D = [
  [0.025, 0.335, 0.585],
  [0.335, 0.68, 0.94],
  [0.585, 0.94, 1.25],
];
/** Badger gives stretches only: bends as in `orderedUff`. */
export const badger: SpringForm = {
  name: 'Badger 1935',
  stretch: (a, b, r) => 1.86 / (r - BADGER_D[row(a)]![row(b)]!) ** 3,
  bend: orderedUff.bend,
};

/** No directed bonds among metal atoms: a bend of three metals has no constant. */
export const isBendable = (i: string, j: string, k: string): boolean => !(isMetal(i) && isMetal(j) && isMetal(k));
