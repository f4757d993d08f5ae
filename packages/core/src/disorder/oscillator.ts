/**
 * One quantum harmonic oscillator. ⟨Q²⟩ = ħ/(2 m ω) coth(ħω / 2 k_B T), Å² with m in u and ħω as a temperature
 * θ = ħω/k_B in K: ⟨Q²⟩ = (ħ²/u k_B) / (2 m θ) · coth(θ / 2T).
 */
import { ATOMIC_MASS_KG, BOLTZMANN_EV_PER_K, ELEMENTARY_CHARGE, HBAR_JS, HC_EV_ANGSTROM } from '../constants.js';

/** ħ² / (u k_B), Å² K u: 48.5087… */
export const HBAR2_PER_U_KB = (HBAR_JS * HBAR_JS * 1e20) / (ATOMIC_MASS_KG * BOLTZMANN_EV_PER_K * ELEMENTARY_CHARGE);

/** hc/k_B: K per cm⁻¹, 1.438777… */
export const KELVIN_PER_WAVENUMBER = (HC_EV_ANGSTROM * 1e-8) / BOLTZMANN_EV_PER_K;

/**
 * coth(θ/2T) = 1 + 2/(e^{θ/T} − 1): the thermal occupation factor, 1 at T = 0.
 * Through expm1, so neither the classical limit nor T → 0 loses digits.
 */
export function occupation(theta: number, temperature: number): number {
  return temperature === 0 ? 1 : 1 + 2 / Math.expm1(theta / temperature);
}

/** Mean square displacement of an oscillator, Å². @param mass u @param theta ħω/k_B, K @param temperature K, ≥ 0 */
export function meanSquare(mass: number, theta: number, temperature: number): number {
  return (HBAR2_PER_U_KB / (2 * mass * theta)) * occupation(theta, temperature);
}
