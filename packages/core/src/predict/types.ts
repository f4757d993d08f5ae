/**
 * The result of `predict`: plain objects and typed arrays, the same as the JSON of `ringtrue predict --json`.
 * Units at this door: Å, Å⁻¹, Å², eV, K, s.
 */

import type { Edge } from '../atom/types.js';
import type { Cumulants, ThermalModel, ThermalSuggestion } from '../disorder/index.js';
import type { Diagnostic } from '../errors.js';
import type { SelfEnergyName } from '../scattering/types.js';
import type { Vec3 } from '../structure/types.js';

export interface PredictOptions {
  /** Element symbol, or one atom by its label. */
  readonly absorber: string;
  readonly edge: Edge;
  /** K */
  readonly temperature: number;
  /** K; absent: the stated default of the Debye model, with a warning. */
  readonly debyeTemperature?: number;
  readonly thermal: 'debye' | 'einstein' | 'springs' | 'none';
  readonly selfEnergy: SelfEnergyName;
  /** Longest half path length, Å. */
  readonly radius: number;
  readonly maxLegs: number;
  /** Which atoms share a muffin-tin sphere: those of an element, or those of an element in like surroundings. */
  readonly spheres: 'element' | 'surroundings';
  /** Electric vector of the light in the file's Cartesian axes, any length; absent: averaged over all directions. */
  readonly electricVector?: Vec3;
  /** Å⁻¹ */
  readonly kMax: number;
  readonly s02: number;
  /** Shift of the energy origin, eV: k_theory² = k² − e0/3.81. */
  readonly e0: number;
  /** Keep every path's own amplitude and phase in the result. */
  readonly pathSignals: boolean;
  /** Compute the prior bands too. */
  readonly bands: boolean;
}

export interface PredictedPath {
  /** "Cu–Cu–Cu", as a chemist reads it. */
  readonly label: string;
  readonly legs: number;
  readonly degeneracy: number;
  /** Å */
  readonly halfLength: number;
  readonly atoms: readonly string[];
  /** Å²; `from` says which model, or which oscillator of it, the thermal part comes from. */
  readonly sigma2: { readonly thermal: number; readonly static: number; readonly from: string };
  /** Of the half length over the frames, where an ensemble was averaged: Å, Å², Å³, Å⁴. */
  readonly cumulants?: Cumulants;
  /** Part of ∫|k³χ|, all paths' shares summing to 1. */
  readonly share: number;
  /** With `pathSignals`: Å⁻¹ grid, |f_eff| in Å, phase in rad. */
  readonly k?: Float64Array;
  readonly amplitude?: Float64Array;
  readonly phase?: Float64Array;
}

/** Single-scattering paths of like scatterers whose half lengths lie within the resolution of the data. */
export interface PredictedShell {
  readonly label: string;
  readonly element: string;
  readonly count: number;
  /** Å */
  readonly meanDistance: number;
  /** Å² */
  readonly sigma2: { readonly thermal: number; readonly static: number; readonly total: number };
  /** Third cumulant of the whole shell, Å³. */
  readonly thirdCumulant: number;
  /** What one Gaussian shell of the same N, mean R and total σ² would hide: rms of its k³χ against the explicit sum, relative. */
  readonly hiddenByOneShell: number;
  /** From the B factors of both atoms taken as independent, Å²: an upper bound of the total σ², never added to it. */
  readonly bFactorBound?: number;
  readonly share: number;
}

/** Where the thermal σ² of one site come from. */
export interface PredictedThermal {
  readonly model: ThermalModel['name'] | 'ensemble';
  /** K; absent where frames brought their own motion. */
  readonly temperature?: number;
  /** What the model assumed, in words and numbers. */
  readonly inputs: Readonly<Record<string, number | string>>;
  /** What this kind of structure would be given, and why. */
  readonly suggested: ThermalSuggestion;
}

export interface PredictedNeighbour {
  readonly label: string;
  readonly element: string;
  /** Å */
  readonly distance: number;
}

/** What the prediction spans before it meets data (bands.ts says from which unknowns). */
export interface Bands {
  /** Å⁻¹, 0.1-spaced. */
  readonly k: Float64Array;
  /** Central 95 % and 68 % of χ. */
  readonly low95: Float64Array;
  readonly low68: Float64Array;
  readonly high68: Float64Array;
  readonly high95: Float64Array;
}

/** A part of χ(k), on the grid of the prediction, S0² and damping included. */
export interface ChiPart {
  readonly label: string;
  readonly chi: Float64Array;
}

/** What was averaged, and how well. */
export interface EnsembleSummary {
  readonly frames: number;
  /** Standard error of χ at each k, from the spread of `parts` successive parts of the frames. */
  readonly chiError: Float64Array;
  readonly parts: number;
  /** How multiple-scattering amplitudes followed the geometry. */
  readonly multipleScattering: 'none' | 'exact' | 'expanded';
  /** Expanded against exact, rms of k²χ of a single frame relative to the whole, and the test frames it comes from; 0 when exact. */
  readonly expansionError: number;
  readonly testFrames: number;
  /** rms of k²(χ − the Gaussian sum of mean half lengths and variances over the mean surroundings), relative to χ. */
  readonly beyondGaussian: number;
  /** Phase shifts and paths renewed every so many frames; the change it made, rms of k²χ relative to those of the mean of all. */
  readonly renewed?: { readonly every: number; readonly change: number };
}

export interface Prediction {
  readonly program: { readonly name: 'ringtrue'; readonly version: string };
  readonly structure: { readonly file: string; readonly format: string; readonly atoms: number; readonly title: string };
  readonly options: PredictOptions;
  readonly absorbers: readonly {
    readonly label: string;
    readonly element: string;
    readonly weight: number;
    readonly neighbours: readonly PredictedNeighbour[];
    readonly thermal: PredictedThermal;
  }[];
  readonly scattering: {
    /** bohr */
    readonly atoms: readonly {
      readonly element: string;
      readonly role: 'absorber' | 'scatterer';
      readonly muffinTinRadius: number;
      readonly normanRadius: number;
    }[];
    readonly interstitialPotentialEv: number;
    readonly fermiLevelEv: number;
    /** Å⁻¹ and Å */
    readonly k: Float64Array;
    readonly meanFreePath: Float64Array;
  };
  /** 0.05-spaced, Å⁻¹, and the prediction on it. */
  readonly k: Float64Array;
  readonly chi: Float64Array;
  readonly paths: readonly PredictedPath[];
  readonly shells: readonly PredictedShell[];
  /** Where frames were averaged. */
  readonly ensemble?: EnsembleSummary;
  /** With `bands`. */
  readonly bands?: Bands;
  /** With `bands`: the parts χ is the sum of. By shell: the strongest ones, other shells, multiple scattering. By order: number of legs. */
  readonly contributions?: { readonly byShell: readonly ChiPart[]; readonly byOrder: readonly ChiPart[] };
  readonly transform: {
    readonly R: Float64Array;
    readonly real: Float64Array;
    readonly imaginary: Float64Array;
    readonly window: {
      readonly name: string;
      readonly kMin: number;
      readonly kMax: number;
      readonly sill: number;
      readonly kWeight: number;
    };
  };
  /** Bound on the share of the signal left out by path pruning. */
  readonly neglected: number;
  readonly warnings: readonly Diagnostic[];
  /** s */
  readonly timing: {
    readonly atoms: number;
    readonly potentials: number;
    readonly phases: number;
    readonly paths: number;
    readonly total: number;
  };
}
