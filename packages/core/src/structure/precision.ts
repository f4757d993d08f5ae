/**
 * How well the coordinates are known.
 *
 * Cruickshank, Acta Cryst. D55, 583 (1999), the diffraction-component precision index at the mean B:
 *   σ(x) = (N/n_obs)^½ C^(−⅓) R_free d_min,   or with R and p = n_obs − n_params in place of R_free and n_obs.
 * Blow, Acta Cryst. D58, 792 (2002), the same by the volume of the asymmetric unit: σ(x) = (2π/3)^⅓ N^½ V^⅓ n_obs^(−5/6) R_free.
 * Both papers are quoted from memory; a second constant, 0.65 in place of 1, is in circulation, 1 is the one Blow's 1.28 implies.
 * An atom of its own B: σ(x) (B/⟨B⟩)^½.
 */
import { cellGeometry } from './cell.js';
import type { RefinementStatistics, SiteAtom, Structure } from './types.js';

export interface DpiInput {
  /** Fully occupied atoms of the asymmetric unit. */
  readonly atoms: number;
  readonly reflections: number;
  /** Å */
  readonly resolution: number;
  /** Fraction 0 … 1. */
  readonly completeness: number;
}

/** σ(x) from R_free, Å. */
export const dpiFromRFree = ({ atoms, reflections, resolution, completeness }: DpiInput, rFree: number): number =>
  Math.sqrt(atoms / reflections) * completeness ** (-1 / 3) * rFree * resolution;

/** σ(x) from R and the number of parameters, Å; undefined when there are not more reflections than parameters. */
export function dpiFromR(input: DpiInput, r: number, parameters: number): number | undefined {
  const excess = input.reflections - parameters;
  return excess > 0 ? dpiFromRFree({ ...input, reflections: excess }, r) : undefined;
}

/** Blow's form: σ(x), Å, by the volume of the asymmetric unit, Å³. */
export const blowSigma = ({ atoms, reflections }: Pick<DpiInput, 'atoms' | 'reflections'>, volume: number, rFree: number): number =>
  Math.cbrt((2 * Math.PI) / 3) * Math.sqrt(atoms) * Math.cbrt(volume) * reflections ** (-5 / 6) * rFree;

export interface CoordinatePrecision {
  readonly method: 'cruickshank' | 'blow' | 'stated' | 'resolution' | 'assumed';
  /** σ(x) of an average atom along one axis, Å. */
  readonly sigma: number;
  /** In words, for the reader. */
  readonly origin: string;
  /** σ(x) of one atom of the file, Å. */
  readonly ofAtom: (source: number) => number;
}

/** The best statement on coordinate precision that a file allows, and where it comes from. Never absent: a default says it is one. */
export function coordinatePrecision(structure: Structure): CoordinatePrecision {
  if (structure.format === 'xyz')
    return flat('assumed', 0.015, 'a model without stated errors; 0.015 Å an axis is assumed (common practice, no source)');
  if (structure.format === 'cif') return ofCif(structure);
  const { statistics } = structure;
  const dpi = statistics && ofRefinement(structure, statistics);
  if (dpi) return scaledByB(structure, dpi);
  if (statistics?.resolution) {
    const sigma = 0.08 * statistics.resolution;
    return scaledByB(structure, {
      method: 'resolution',
      sigma,
      origin: `0.08 of the resolution of ${statistics.resolution} Å (rule of thumb, no source): R free or reflections are not stated`,
    });
  }
  return flat('assumed', 0.15, 'no refinement statistics in the file; 0.15 Å an axis is assumed, as at 2 Å resolution');
}

/** Standard uncertainty of a neighbour's distance from the absorber, Å; the two atoms' errors taken independent. */
export function distanceSd(precision: CoordinatePrecision, absorber: SiteAtom, neighbour: SiteAtom): number {
  if (absorber.source === neighbour.source) return precision.ofAtom(absorber.source);
  return Math.hypot(precision.ofAtom(absorber.source), precision.ofAtom(neighbour.source));
}

type Sigma = Omit<CoordinatePrecision, 'ofAtom'>;

const flat = (method: CoordinatePrecision['method'], sigma: number, origin: string): CoordinatePrecision => ({
  method,
  sigma,
  origin,
  ofAtom: () => sigma,
});

function ofRefinement(structure: Structure, { resolution, rFree, completeness, reflections }: RefinementStatistics): Sigma | undefined {
  if (!rFree || !reflections) return undefined;
  const atoms = structure.atoms.reduce((sum, atom) => sum + (atom.element === 'H' ? 0 : atom.occupancy), 0);
  if (resolution && completeness) {
    return {
      method: 'cruickshank',
      sigma: dpiFromRFree({ atoms, reflections, resolution, completeness }, rFree),
      origin: `Cruickshank's index from R free ${rFree}, ${reflections} reflections, ${resolution} Å, completeness ${(100 * completeness).toFixed(0)} %`,
    };
  }
  if (!structure.cell) return undefined;
  const volume = cellGeometry(structure.cell).volume / structure.operators.length;
  return {
    method: 'blow',
    sigma: blowSigma({ atoms, reflections }, volume, rFree),
    origin: `Blow's form of Cruickshank's index from R free ${rFree}, ${reflections} reflections and the cell`,
  };
}

function scaledByB(structure: Structure, sigma: Sigma): CoordinatePrecision {
  const known = structure.atoms.filter(({ uIso, element }) => uIso !== undefined && uIso > 0 && element !== 'H');
  const mean = known.reduce((sum, { uIso }) => sum + uIso!, 0) / known.length;
  return {
    ...sigma,
    ofAtom: (source) => {
      const uIso = structure.atoms[source]!.uIso;
      return uIso !== undefined && uIso > 0 && mean > 0 ? sigma.sigma * Math.sqrt(uIso / mean) : sigma.sigma;
    },
  };
}

function ofCif({ atoms }: Structure): CoordinatePrecision {
  const stated = atoms.filter(({ positionSu }) => positionSu);
  if (stated.length === 0)
    return flat('assumed', 0.005, 'the CIF states no uncertainties; 0.005 Å an axis is assumed (common practice, no source)');
  const rms = (su: readonly number[]) => Math.hypot(...su) / Math.sqrt(3);
  return {
    method: 'stated',
    sigma: stated.reduce((sum, { positionSu }) => sum + rms(positionSu!), 0) / stated.length,
    origin: 'standard uncertainties of the CIF; coordinates without one are fixed by symmetry',
    ofAtom: (source) => (atoms[source]!.positionSu ? rms(atoms[source]!.positionSu!) : 0),
  };
}
