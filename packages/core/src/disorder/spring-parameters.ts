/**
 * Element constants of the spring network; quoted from memory of the two papers, a few compared with printed tables.
 *
 * Z*: effective charges of Rappé, Casewit, Colwell, Goddard & Skiff, J. Am. Chem. Soc. 114, 10024 (1992), table 1.
 * r₁: single-bond covalent radii, Å, of Pyykkö & Atsumi, Chem. Eur. J. 15, 186 (2009).
 */
import { InputError } from '../errors.js';

/** symbol: [Z*, r₁ in Å]; the order of the periodic table. */
const TABLE: Readonly<Record<string, readonly [charge: number, radius: number]>> = {
  H: [0.712, 0.32],
  He: [0.098, 0.46],
  Li: [1.026, 1.33],
  Be: [1.565, 1.02],
  B: [1.755, 0.85],
  C: [1.912, 0.75],
  N: [2.544, 0.71],
  O: [2.3, 0.63],
  F: [1.735, 0.64],
  Ne: [0.194, 0.67],
  Na: [1.081, 1.55],
  Mg: [1.787, 1.39],
  Al: [1.792, 1.26],
  Si: [2.323, 1.16],
  P: [2.863, 1.11],
  S: [2.703, 1.03],
  Cl: [2.348, 0.99],
  Ar: [0.3, 0.96],
  K: [1.165, 1.96],
  Ca: [2.141, 1.71],
  Sc: [2.592, 1.48],
  Ti: [2.659, 1.36],
  V: [2.679, 1.34],
  Cr: [2.463, 1.22],
  Mn: [2.43, 1.19],
  Fe: [2.43, 1.16],
  Co: [2.43, 1.11],
  Ni: [2.43, 1.1],
  Cu: [1.756, 1.12],
  Zn: [1.308, 1.18],
  Ga: [1.821, 1.24],
  Ge: [2.789, 1.21],
  As: [2.864, 1.21],
  Se: [2.764, 1.16],
  Br: [2.519, 1.14],
  Kr: [0.452, 1.17],
  Rb: [1.592, 2.1],
  Sr: [2.449, 1.85],
  Y: [3.257, 1.63],
  Zr: [3.667, 1.54],
  Nb: [3.618, 1.47],
  Mo: [3.4, 1.38],
  Tc: [3.4, 1.28],
  Ru: [3.4, 1.25],
  Rh: [3.508, 1.25],
  Pd: [3.21, 1.2],
  Ag: [1.956, 1.28],
  Cd: [1.65, 1.36],
  In: [2.07, 1.42],
  Sn: [2.961, 1.4],
  Sb: [2.704, 1.4],
  Te: [2.882, 1.36],
  I: [2.65, 1.33],
  Xe: [0.556, 1.31],
  Cs: [1.573, 2.32],
  Ba: [2.727, 1.96],
  La: [3.3, 1.8],
  Ce: [3.3, 1.63],
  Pr: [3.3, 1.76],
  Nd: [3.3, 1.74],
  Pm: [3.3, 1.73],
  Sm: [3.3, 1.72],
  Eu: [3.3, 1.68],
  Gd: [3.3, 1.69],
  Tb: [3.3, 1.68],
  Dy: [3.3, 1.67],
  Ho: [3.416, 1.66],
  Er: [3.3, 1.65],
  Tm: [3.3, 1.64],
  Yb: [2.618, 1.7],
  Lu: [3.271, 1.62],
  Hf: [3.921, 1.52],
  Ta: [4.075, 1.46],
  W: [3.7, 1.37],
  Re: [3.7, 1.31],
  Os: [3.7, 1.29],
  Ir: [3.731, 1.22],
  Pt: [3.382, 1.23],
  Au: [2.625, 1.24],
  Hg: [1.75, 1.33],
  Tl: [2.068, 1.44],
  Pb: [2.846, 1.44],
  Bi: [2.47, 1.51],
  Po: [2.33, 1.45],
  At: [2.24, 1.47],
  Rn: [0.583, 1.42],
  Fr: [1.847, 2.23],
  Ra: [2.92, 2.01],
  Ac: [3.9, 1.86],
  Th: [4.202, 1.75],
  Pa: [3.9, 1.69],
  U: [3.9, 1.7],
};

const NONMETALS = new Set('H He B C N O F Ne Si P S Cl Ar Ge As Se Br Kr Sb Te I Xe At Rn'.split(' '));

/** Metals proper: no directed bonds among themselves. */
export const isMetal = (element: string): boolean => !NONMETALS.has(element);

/** @throws {InputError} no constants for this element */
export function springConstantsOf(element: string): readonly [charge: number, radius: number] {
  const found = TABLE[element];
  if (!found) throw new InputError(`spring network: no force constants for element "${element}" (H to U are known)`);
  return found;
}
