/**
 * Self-absorption of fluorescence in a thick, flat sample (Tröger, Arvanitis, Baberschke, Michaelis, Grimm & Zschech,
 * Phys. Rev. B 46, 3283 (1992), eq. 5):
 *
 *   chi = chi_measured / (1 − s(E)),    s(E) = μ_a(E) / (μ_total(E) + g μ_total(E_f)),    g = sin(in)/sin(out)
 *
 * μ_a is the absorber's shell, μ_total the whole sample at the incident and at the fluorescence energy. With s0 = s just above the edge and
 * all absorption falling alike, s(E)/s0 = a(E) / (a(E) (1 − f) + f), f the part of the denominator that does not depend on E.
 */

import { InputError } from '../errors.js';

export interface SelfAbsorption {
  /** Absorption of the absorber's shell just above the edge, any unit. */
  readonly absorber: number;
  /** Absorption of the whole sample just above the edge, the same unit. */
  readonly total: number;
  /** Absorption of the whole sample at the energy of the fluorescence, the same unit. */
  readonly atFluorescence: number;
  /** Degrees between beam and surface, and between surface and detector. Default 45, 45. */
  readonly angleIn?: number;
  readonly angleOut?: number;
}

/**
 * Factors by which the measured chi has to be multiplied (n).
 *
 * @param decay  a(E), fall of the absorption from its value at the edge (n)
 * @throws {InputError} absorptions not positive, or the absorber's above the total
 */
export function selfAbsorptionFactors(
  decay: Float64Array,
  { absorber, total, atFluorescence, angleIn = 45, angleOut = 45 }: SelfAbsorption,
): Float64Array {
  if (!(absorber > 0 && total >= absorber && atFluorescence > 0 && angleIn > 0 && angleIn <= 90 && angleOut > 0 && angleOut <= 90)) {
    throw new InputError(
      `self-absorption: 0 < absorber ≤ total, fluorescence > 0 and angles in (0, 90] are needed, got ${absorber}, ${total}, ${atFluorescence}, ${angleIn}°, ${angleOut}°`,
    );
  }
  const fixed = (Math.sin((angleIn * Math.PI) / 180) / Math.sin((angleOut * Math.PI) / 180)) * atFluorescence;
  return decay.map((a) => 1 / (1 - (a * absorber) / (a * total + fixed)));
}
