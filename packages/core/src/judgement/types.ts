/**
 * The result of `judge`: plain objects and typed arrays, the same as the JSON of `ringtrue judge --json`.
 * Å, Å⁻¹, Å², eV, K. Signs: a shift is what is to be added to the structure's distances to meet the data's, so it is negative
 * when the structure is too long.
 */
import type { Edge } from '../atom/types.js';
import type { Diagnostic } from '../errors.js';
import type { Reduction } from '../evidence/index.js';
import type { PredictOptions } from '../predict/types.js';

export type FindingWord = 'consistent' | 'consistent-under-strain' | 'in-tension' | 'inconsistent' | 'undecided';

/** One measured spectrum and how it is to be compared. */
export interface Evidence {
  /** File names, for the result. */
  readonly file: string;
  readonly reduction: Reduction;
  /** Absorbing element, or one atom by its label. */
  readonly absorber: string;
  readonly edge?: Edge;
  /** K, of the sample. */
  readonly temperature?: number;
  /** Å⁻¹; default 3 to where the oscillations drown. */
  readonly kRange?: readonly [number, number];
  /** Å, of the transform; default 1 to 1 Å below the radius of the paths, at most 4. */
  readonly rRange?: readonly [number, number];
  /** Default 3. */
  readonly kWeight?: number;
}

export interface JudgeOptions extends Partial<Pick<PredictOptions, 'debyeTemperature' | 'selfEnergy' | 'radius' | 'maxLegs'>> {
  /** Default: the one suggested for the kind of structure. */
  readonly thermal?: PredictOptions['thermal'];
  /** Judge the rivals made from each candidate too. Default false. */
  readonly rivals?: boolean;
  /** Standard uncertainty of every distance, Å; default what the structure states. */
  readonly coordinateSd?: number;
  /** How much wider the sample may be than the coordinates: factor of the extra static σ². Default 1. */
  readonly sampleSpread?: number;
  /** Part of rms|χ(R)| that even the right structure is missed by; default MODEL_ERROR. */
  readonly modelError?: number;
  /** Compute prior and posterior bands. Default true. */
  readonly bands?: boolean;
  /** 'auto': where the posterior is not close to a Gaussian. Default 'auto'. */
  readonly sampling?: 'auto' | 'always' | 'never';
}

export interface FittedParameter {
  /** 'energy-origin', 'amplitude', 'thermal-scale', 'extra-static', 'class-shift', 'scatterer-shift'. */
  readonly name: string;
  /** What it belongs to, in words: "first shell", "O2 of Mn1"; '' for the whole spectrum. */
  readonly shell: string;
  readonly unit: string;
  readonly prior: { readonly mean: number; readonly sd: number };
  readonly value: number;
  /** Of the posterior. */
  readonly sd: number;
  /** (value − mean)/sd of the prior. */
  readonly strain: number;
}

export interface ShellStretch {
  readonly label: string;
  /** Å, mean distance of the structure. */
  readonly structureDistance: number;
  /** Å */
  readonly deltaR: number;
  /** Å: data, coordinates and theory together. */
  readonly sd: number;
  readonly z: number;
  /** Å: the change of this distance that the data would have shown (95 % confidence, 80 % power). */
  readonly detectable: number;
}

export interface Overlength {
  /** One common relative change of all distances; gain is the fall of X it brings. */
  readonly stretch: { readonly value: number; readonly sd: number; readonly z: number; readonly gain: number };
  readonly shells: readonly ShellStretch[];
  /** Fall of X with one free shift per shell, and the number of shifts set free. */
  readonly gain: number;
  readonly freed: number;
  readonly verdict: 'overlong' | 'too-short' | 'none' | 'not-detectable';
  /** One sentence, with the explanations in neutral order where something was found. */
  readonly sentence: string;
  /** Å, first shell: the smallest lengthening these data would have shown (95 % confidence, 80 % power). */
  readonly detectable: number;
}

export interface ValenceEntry {
  readonly oxidationState: number;
  readonly sum: number;
  readonly sd: number;
}

export interface SiteValence {
  readonly site: string;
  readonly asGiven: readonly ValenceEntry[];
  readonly rescaled: readonly ValenceEntry[];
  /** Oxidation states whose own sum comes back within 0.35 (as given; rescaled), lowest first. */
  readonly candidates: { readonly asGiven: readonly number[]; readonly rescaled: readonly number[] };
}

export interface RivalResult {
  /** "O4 removed from Mn1". */
  readonly label: string;
  readonly kind:
    | 'neighbour-removed'
    | 'neighbour-added'
    | 'light-heavy-exchange'
    | 'O-N-exchange'
    | 'metal-removed'
    | 'metal-metal'
    | 'stretch';
  readonly x: number;
  readonly p: number;
  /** ln Z of the rival less that of the candidate. */
  readonly logEvidence: number;
  readonly excluded: boolean;
}

/** Central 68 % and 95 % on one axis, and the best point or the prior mean. */
export interface Band {
  readonly low95: Float64Array;
  readonly low68: Float64Array;
  readonly middle: Float64Array;
  readonly high68: Float64Array;
  readonly high95: Float64Array;
}

/** What is needed to draw one data set against one candidate. */
export interface Comparison {
  readonly file: string;
  /** Å⁻¹ (nk): data, model at the best point, prediction before the data were seen; background treated alike. */
  readonly k: Float64Array;
  readonly data: Float64Array;
  readonly model: Float64Array;
  readonly prior: Float64Array;
  /** Å, not phase-corrected (nR), and moduli of the transforms in the window. */
  readonly R: Float64Array;
  readonly dataR: { readonly real: Float64Array; readonly imaginary: Float64Array };
  readonly modelR: { readonly real: Float64Array; readonly imaginary: Float64Array };
  readonly priorR: { readonly real: Float64Array; readonly imaginary: Float64Array };
  /** χ(k), and |χ(R)|; with `bands`. */
  readonly bands?: {
    readonly priorK: Band;
    readonly posteriorK: Band;
    readonly priorR: Band;
    readonly posteriorR: Band;
  };
}

export interface DisorderRow {
  readonly label: string;
  readonly count: number;
  readonly meanDistance: number;
  /** Å²: predicted, and what the data would want (thermal scale and extra static at the best point). */
  readonly thermal: number;
  readonly static: number;
  readonly wanted: number;
}

export interface CandidateJudgement {
  readonly file: string;
  readonly title: string;
  readonly finding: FindingWord;
  readonly sentence: string;
  /** X_data + X_prior at the best point. */
  readonly x: number;
  readonly xData: number;
  readonly xPrior: number;
  readonly independentPoints: number;
  /** P(chi² > X) with N_idp degrees of freedom. */
  readonly p: number;
  /** Probability that setting the distances free gains by chance what it gained; the finding takes the worse of both. */
  readonly pDistances: number;
  readonly rFactor: number;
  /** Power to reject a first shell off by 0.1 Å. */
  readonly power: number;
  readonly parameters: readonly FittedParameter[];
  /** What moved beyond two standard deviations of its prior. */
  readonly strained: readonly string[];
  readonly overlength: Overlength;
  readonly valence: readonly SiteValence[];
  readonly disorder: readonly DisorderRow[];
  readonly rivals: readonly RivalResult[];
  /** Labels of the rivals that the data do not exclude. */
  readonly notExcluded: readonly string[];
  /** Laplace approximation, up to a constant common to all candidates on the same data. */
  readonly logEvidence: number;
  /** How the posterior was found: 'gaussian' or 'sampled', with the reason. */
  readonly posterior: { readonly method: 'gaussian' | 'sampled'; readonly reason: string };
  readonly comparisons: readonly Comparison[];
  /** Where the structure's own uncertainty comes from, and the thermal model with its inputs. */
  readonly assumptions: readonly string[];
  readonly wouldChange: readonly string[];
  readonly cannotTell: readonly string[];
  readonly caution: string;
  readonly warnings: readonly Diagnostic[];
}

export interface EvidenceSummary {
  readonly file: string;
  readonly absorber: string;
  readonly edge: Edge;
  readonly temperature: number;
  readonly kRange: readonly [number, number];
  readonly rRange: readonly [number, number];
  readonly kWeight: number;
  readonly independentPoints: number;
  readonly independentPointsStern: number;
  /** Å */
  readonly resolution: number;
  readonly epsilonK: number;
  readonly epsilonR: number;
  readonly modelError: number;
}

export interface Judgement {
  readonly program: { readonly name: 'ringtrue'; readonly version: string };
  readonly evidence: readonly EvidenceSummary[];
  readonly candidates: readonly CandidateJudgement[];
  /** Candidates by evidence, best first; those of one group these data cannot tell apart. */
  readonly groups: readonly { readonly files: readonly string[]; readonly sentence: string }[];
  readonly warnings: readonly Diagnostic[];
  /** s */
  readonly timing: { readonly prediction: number; readonly judgement: number; readonly rivals: number; readonly total: number };
}
