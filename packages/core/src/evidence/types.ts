/** The objects of the evidence room. */

import type { Edge } from '../atom/types.js';
import type { Diagnostic } from '../errors.js';

/** Numbers in columns, as a file holds them, with the line each row came from. */
export interface DataTable {
  /** One word a column; '' where the file gives none. */
  readonly names: readonly string[];
  /** Unit of each column as the file states it; '' where it does not. */
  readonly units: readonly string[];
  /** Each (rows). */
  readonly columns: readonly Float64Array[];
  /** Source line of each row, from 1 (rows). */
  readonly lines: Int32Array;
}

/** Which column is what, counted from 1. Either an energy (or angle) with intensities or absorption, or k with chi. */
export interface ColumnRoles {
  readonly energy?: number;
  readonly angle?: number;
  readonly k?: number;
  /** Ready absorption: any constant factor and offset will do. */
  readonly mu?: number;
  readonly i0?: number;
  readonly transmitted?: number;
  /** Channels that are summed. */
  readonly fluorescence?: readonly number[];
  /** Intensity behind the reference foil. */
  readonly reference?: number;
  readonly chi?: number;
}

export type EnergyUnit = 'eV' | 'keV' | 'degrees' | 'radians';

/** What the user states about a file; anything left out is guessed, and the guess is shown. */
export interface ReadOptions {
  readonly columns?: ColumnRoles;
  readonly energyUnit?: EnergyUnit;
  /** Å, of the monochromator's reflection; needed for angles. */
  readonly dSpacing?: number;
  /** The chi column holds kⁿ chi with this n. Default 0. */
  readonly chiWeight?: number;
  readonly element?: string;
  readonly edge?: Edge;
}

interface ScanHead {
  readonly title: string;
  readonly element?: string;
  readonly edge?: Edge;
  readonly columns: ColumnRoles;
  /** What was guessed about the columns, in words; '' when all was stated. */
  readonly guess: string;
  readonly diagnostics: readonly Diagnostic[];
}

/** One absorption spectrum, energies rising. */
export interface AbsorptionScan extends ScanHead {
  readonly kind: 'absorption';
  readonly detection: 'transmission' | 'fluorescence' | 'ready';
  /** eV (n) */
  readonly energyEv: Float64Array;
  /** Absorption, arbitrary units (n) */
  readonly mu: Float64Array;
  /** Absorption of the reference foil (n) */
  readonly reference?: Float64Array;
  /** Source line of each point (n) */
  readonly lines: Int32Array;
}

/** A ready chi(k), unweighted, k rising. */
export interface ChiScan extends ScanHead {
  readonly kind: 'chi';
  /** Å⁻¹ (n) */
  readonly k: Float64Array;
  readonly chi: Float64Array;
  readonly lines: Int32Array;
}

export type MeasuredScan = AbsorptionScan | ChiScan;
