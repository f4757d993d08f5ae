/**
 * Physical constants and the few unit conversions; they stand nowhere else.
 *
 * Source of every measured value: CODATA 2022 (Mohr, Newell, Taylor & Tiesinga, Rev. Mod. Phys. 97, 025002 (2025));
 * the relative standard uncertainty stands beside each. Exact SI values are marked exact.
 */

/** Hartree energy, eV (1.1e-12). */
export const HARTREE_EV = 27.211386245981;

/** Bohr radius, Å (1.6e-10). */
export const BOHR_ANGSTROM = 0.529177210544;

/** Speed of light in Hartree atomic units, the inverse fine-structure constant (1.6e-10). */
export const SPEED_OF_LIGHT = 137.035999177;

/** Boltzmann constant, eV/K (exact, k/e). */
export const BOLTZMANN_EV_PER_K = 8.617333262145179e-5;

/** Reduced Planck constant, J s (exact). */
export const HBAR_JS = 1.054571817646156e-34;

/** Elementary charge, C (exact); also J per eV. */
export const ELEMENTARY_CHARGE = 1.602176634e-19;

/** Atomic mass constant, kg (3.1e-10). */
export const ATOMIC_MASS_KG = 1.66053906892e-27;

/** Planck constant times the speed of light, eV Å (exact). */
export const HC_EV_ANGSTROM = 12398.419843320025;

/** ħ²/2m, eV Å²: E = 3.80998… k² with E in eV and k in Å⁻¹. */
export const EV_PER_K_SQUARED = 0.5 * HARTREE_EV * BOHR_ANGSTROM * BOHR_ANGSTROM;

export const bohrFromAngstrom = (angstrom: number): number => angstrom / BOHR_ANGSTROM;
export const angstromFromBohr = (bohr: number): number => bohr * BOHR_ANGSTROM;
export const hartreeFromEv = (ev: number): number => ev / HARTREE_EV;
export const evFromHartree = (hartree: number): number => hartree * HARTREE_EV;
/** Wave number in Å⁻¹ from bohr⁻¹. */
export const perAngstromFromPerBohr = (k: number): number => k / BOHR_ANGSTROM;
/** Wave number in bohr⁻¹ from Å⁻¹. */
export const perBohrFromPerAngstrom = (k: number): number => k * BOHR_ANGSTROM;
