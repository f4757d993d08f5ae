/** What a reduction takes and gives. */

import type { Edge } from '../atom/types.js';
import type { Diagnostic } from '../errors.js';
import type { Shift } from './align.js';
import type { Noise } from './noise.js';
import type { Glitch } from './point-noise.js';
import type { SelfAbsorption } from './self-absorption.js';

export interface ReduceOptions {
  readonly element?: string;
  readonly edge?: Edge;
  /** eV; default the steepest rise near the tabulated edge. */
  readonly e0?: number;
  /** eV relative to E0 */
  readonly pre?: readonly [number, number];
  readonly preForm?: 'line' | 'victoreen';
  readonly post?: readonly [number, number];
  /** Degree of the post-edge polynomial, 0 … 3. Default 2. */
  readonly postDegree?: number;
  /** 'atomic': chi in units of step · (E/E0)^−2.7. 'constant': in units of the step. Default 'atomic'. */
  readonly normalisation?: 'atomic' | 'constant';
  /** Å; default by the first strong peak. */
  readonly backgroundBelow?: number;
  /** k weight of the background's transform. Default 2. */
  readonly backgroundWeight?: number;
  /** Å⁻¹; default where the data end. */
  readonly kMax?: number;
  /** Corrects fluorescence of a thick sample. */
  readonly selfAbsorption?: SelfAbsorption;
  /** Leaves out the points that stick out; default they are kept and flagged. */
  readonly leaveOutFlagged?: boolean;
}

/** A value the reduction used, and why: given, or which default. */
export interface Choice {
  readonly what: string;
  readonly value: string;
  readonly why: string;
}

export interface Reduction {
  /** 0.05 Å⁻¹ grid (n) */
  readonly k: Float64Array;
  readonly chi: Float64Array;
  /** Standard deviation of chi (n) */
  readonly sigmaChi: Float64Array;
  /** eV; NaN when chi was ready. */
  readonly e0: number;
  /** Edge step, units of mu; NaN when chi was ready. */
  readonly edgeStep: number;
  readonly noise: Noise;
  readonly element?: string;
  readonly edge?: Edge;
  /** Merged absorption and the curves under it, on the energies of the first scan (m); empty when chi was ready. */
  readonly energyEv: Float64Array;
  readonly mu: Float64Array;
  readonly preEdge: { readonly range: readonly [number, number]; readonly form: string; readonly curve: Float64Array };
  readonly postEdge: { readonly range: readonly [number, number]; readonly degree: number; readonly curve: Float64Array };
  /** The background removed; given to `backgroundProjector(k, background)` it treats a prediction alike. */
  readonly background: {
    readonly rLow: number;
    readonly kWeight: number;
    readonly kMax: number;
    readonly coefficients: number;
    readonly curve: Float64Array;
  };
  readonly scans: readonly { readonly title: string; readonly shiftEv: Shift; readonly guess: string }[];
  /** Points that stick out, kept or left out as each says, by energy. */
  readonly flagged: readonly Glitch[];
  readonly choices: readonly Choice[];
  readonly warnings: readonly Diagnostic[];
}
