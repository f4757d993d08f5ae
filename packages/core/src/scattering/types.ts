/**
 * The doors between the parts of the scattering room. Hartree atomic units inside; k tables that leave it say so.
 * Outgoing waves are h^(1) ~ e^{+iρ}; loss means Im V < 0 and Im p > 0.
 */
import type { Edge } from '../atom/types.js';

/** One muffin-tin sphere, energy-independent part. */
export interface Sphere {
  readonly element: string;
  readonly Z: number;
  readonly role: 'absorber' | 'scatterer';
  /** bohr */
  readonly muffinTinRadius: number;
  readonly normanRadius: number;
  /** Mesh ending exactly on the muffin-tin radius, bohr (n), logarithmic. */
  readonly r: Float64Array;
  /** r·V_coulomb of the overlapped atoms, hartree·bohr (n). */
  readonly rCoulomb: Float64Array;
  /** Overlapped density ρ(r), bohr⁻³ (n). */
  readonly density: Float64Array;
}

/** The overlapped muffin-tin potential of one site. */
export interface MuffinTin {
  /** spheres[0] is the absorber. */
  readonly spheres: readonly Sphere[];
  /** For each atom of the cluster the sphere that scatters there; −1 where none (hydrogen left out). */
  readonly sphereOfAtom: Int32Array;
  /** Coulomb part of the interstitial potential, hartree. */
  readonly interstitialCoulomb: number;
  /** Interstitial density, bohr⁻³. */
  readonly interstitialDensity: number;
  /** Fermi level μ, hartree: E = μ + k²/2. */
  readonly fermiLevel: number;
}

/**
 * Energy-dependent exchange-correlation potential of an electron gas of the local density, *including* the ground-state
 * v_xc: V(r,E) = V_coulomb + value. Losses that do not depend on the density (constant part, core-hole width) are included.
 */
export interface ExchangeCorrelation {
  readonly name: SelfEnergyName;
  /**
   * @param rho density, bohr⁻³ (n)
   * @param k   wave number above the Fermi level, bohr⁻¹, E = μ + k²/2
   * @param re, im  filled in place (n), hartree; im ≤ 0
   */
  evaluate(rho: Float64Array, k: number, re: Float64Array, im: Float64Array): void;
}

export type SelfEnergyName = 'mean' | 'hedin-lundqvist' | 'dirac-hara';

/** All that paths need to know of the potentials, on the scattering room's own coarse k grid. */
export interface ScatteringTable {
  readonly edge: Edge;
  /** Å⁻¹, measured from the Fermi level (nk). */
  readonly k: Float64Array;
  /** Complex interstitial momentum p(k), bohr⁻¹ (nk). */
  readonly pRe: Float64Array;
  readonly pIm: Float64Array;
  /** t_l = e^{iδ} sin δ of each sphere: row-major (nk, lMax + 1); orders above a sphere's own cut are 0. */
  readonly lMax: number;
  readonly spheres: readonly {
    readonly element: string;
    readonly tRe: Float64Array;
    readonly tIm: Float64Array;
  }[];
  /** Absorber channel(s) of the dipole transition: l0 and e^{2iδ_{l0}} (nk) each. */
  readonly channels: readonly {
    readonly l0: number;
    readonly weight: number;
    readonly re: Float64Array;
    readonly im: Float64Array;
  }[];
}
