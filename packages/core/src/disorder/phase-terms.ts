/**
 * What thermal motion does to the phase of a path, beside damping it by exp(−2σ²k²). Å, Å⁻¹, rad.
 *
 *   shift of the distribution seen through 1/R² and the mean free path:  −4 k σ² (1/R + 1/λ)
 *     (Bunker, Nucl. Instrum. Meth. 207, 437 (1983); Tranquada & Ingalls, Phys. Rev. B 28, 3520 (1983))
 *   third cumulant:  −(4/3) C₃ k³,  C₃ = (α/2)(3σ⁴ − 2σ₀⁴) for a Morse bond of exponent α
 *     (Frenkel & Rehr, Phys. Rev. B 48, 585 (1993))
 */

/** Morse exponent of a metal–metal bond, Å⁻¹: Girifalco & Weizer, Phys. Rev. 114, 687 (1959), copper 1.359; rounded. */
export const MORSE_EXPONENT = 1.4;

/**
 * Third cumulant of a first-shell bond, Å³; σ₀² is the zero-temperature value of σ².
 * Positive always, since σ² ≥ σ₀²; meant for the nearest neighbours only.
 */
export function morseThirdCumulant(sigma2: number, sigma2AtZero: number, exponent: number = MORSE_EXPONENT): number {
  return (exponent / 2) * (3 * sigma2 * sigma2 - 2 * sigma2AtZero * sigma2AtZero);
}

/** −4 k σ² (1/R + 1/λ), rad. @param k Å⁻¹ @param R half path length, Å @param lambda mean free path, Å (Infinity: none) */
export function distributionPhase(k: number, sigma2: number, R: number, lambda: number): number {
  return -4 * k * sigma2 * (1 / R + 1 / lambda);
}

/** −(4/3) C₃ k³, rad. @param k Å⁻¹ @param thirdCumulant Å³ */
export function thirdCumulantPhase(k: number, thirdCumulant: number): number {
  return (-4 / 3) * thirdCumulant * k * k * k;
}
