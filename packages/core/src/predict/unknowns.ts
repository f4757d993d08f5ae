/**
 * All that a prediction does not know exactly, and what is expected of it before any data are seen: the priors of the bands and of
 * the judgement. Å, Å⁻¹, Å², eV.
 *
 * | unknown                                            | expected                                | origin |
 * |----------------------------------------------------|-----------------------------------------|--------|
 * | energy origin above the measured inflection        | Normal(3, 4 eV); where that sits on a   | k = 0 is conventional; metals gave 0 to 8 eV, compounds |
 * |                                                    | white line or is not known, (0, 6 eV)   | anywhere within 10 eV on a white line |
 * | ln S0²                                             | Normal(ln 0.82, 0.13)                   | passive electrons, edge step |
 * | ln thermal scale, per class of path                | Normal(0, 0.45)                         | common practice: predicted thermal factors are off by 30 to 140 % |
 * | extra static σ², per class                         | half-Normal(0.0015 Å²)                  | the structure is one average, the sample an ensemble |
 * | radial error of every scatterer, alike ones as one | Normal(0, s of the structure)           | structure/precision.ts |
 * | length, per class                                  | Normal(0, 0.3 % of R; 0.4 % with N)     | error of the phases against measured standards |
 *
 * Classes: nearest neighbours, metal–metal, other single scattering, multiple scattering.
 */
import { isMetal } from '../structure/index.js';
import type { Site, Vec3 } from '../structure/types.js';

/** eV */
export interface EnergyOrigin {
  readonly mean: number;
  readonly sd: number;
}
export const ENERGY_ORIGIN: EnergyOrigin = { mean: 3, sd: 4 };
export const ENERGY_ORIGIN_UNSURE: EnergyOrigin = { mean: 0, sd: 6 };
export const LN_AMPLITUDE = { mean: Math.log(0.82), sd: 0.13 } as const;
export const LN_THERMAL_SD = 0.45;
/** Scale of the half-normal, Å². */
export const EXTRA_STATIC = 0.0015;
const LENGTH_SD = 0.003;
const LENGTH_SD_NITROGEN = 0.004;

export const PATH_CLASSES = ['nearest', 'metal', 'beyond', 'multiple'] as const;
export type PathClass = (typeof PATH_CLASSES)[number];

/** What an unknown of a class is called where people read it. */
export const CLASS_NAMES: Readonly<Record<PathClass, string>> = {
  nearest: 'first shell',
  metal: 'metal–metal',
  beyond: 'beyond the first shell',
  multiple: 'multiple scattering',
};

/** Å: how far a second metal is looked for, and how much farther than the nearest one its like may be. */
const METAL_REACH = 4.2;
const METAL_SPREAD = 0.5;

/**
 * The class of every atom of a site as a single scatterer; metal–metal is the nearest shell of metals behind the first shell.
 *
 * @param nearest  atoms of the first shell, indices into site.atoms
 */
export function atomClasses({ atoms }: Site, nearest: ReadonlySet<number>): readonly PathClass[] {
  const isMetalBehind = (i: number): boolean => i > 0 && !nearest.has(i) && isMetal(atoms[i]!.element);
  const first = atoms.findIndex((_, i) => isMetalBehind(i));
  const reach = first < 0 ? 0 : Math.min(METAL_REACH, atoms[first]!.distance + METAL_SPREAD);
  return atoms.map(({ distance }, i) => (nearest.has(i) ? 'nearest' : isMetalBehind(i) && distance <= reach ? 'metal' : 'beyond'));
}

/** The class of a path: its scatterer's, or 'multiple'. */
export const pathClass = (vertices: readonly number[], classes: readonly PathClass[]): PathClass =>
  vertices.length > 2 ? 'multiple' : classes[vertices[1]!]!;

/** Standard deviation of the theory's error in a half path length, Å, for the elements on the way. */
export const lengthSd = (halfLength: number, elements: readonly string[]): number =>
  halfLength * (elements.includes('N') ? LENGTH_SD_NITROGEN : LENGTH_SD);

/** How the half length of a route changes when one of its atoms moves away from the absorber. */
export interface Pull {
  /** Index into Site.atoms. */
  readonly atom: number;
  /** d(half length)/d(radial displacement): 1 for single scattering, 0 for an atom passed on a straight line. */
  readonly pull: number;
}

/** Pulls of a route (vertices as indices into site.atoms, absorber first), one entry per visit. */
export function radialPulls(site: Site, vertices: readonly number[]): Pull[] {
  const centre = site.atoms[0]!.position;
  return vertices.flatMap((atom, i) => {
    if (atom === 0) return [];
    const here = site.atoms[atom]!.position;
    const before = site.atoms[vertices[i - 1]!]!.position;
    const after = site.atoms[vertices[(i + 1) % vertices.length]!]!.position;
    const outward = direction(centre, here);
    return [{ atom, pull: 0.5 * (dot(direction(before, here), outward) - dot(direction(here, after), outward)) }];
  });
}

function direction(from: Vec3, to: Vec3): Vec3 {
  const [x, y, z] = [to[0] - from[0], to[1] - from[1], to[2] - from[2]];
  const length = Math.hypot(x, y, z);
  return [x / length, y / length, z / length];
}

const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
