/** The k grid every chi lives on: k_n = n · 0.05 Å⁻¹. */

import { EV_PER_K_SQUARED } from '../constants.js';

/** Å⁻¹ */
export const K_STEP = 0.05;

/**
 * k_n = n·0.05 Å⁻¹, n = 0 … as far as kMax reaches.
 *
 * @param kMax  Å⁻¹
 * @throws {RangeError} kMax not positive and finite
 */
export function uniformKGrid(kMax: number): Float64Array {
  if (!(kMax > 0 && kMax < Infinity)) throw new RangeError(`uniformKGrid: kMax must be positive and finite, got ${kMax}`);
  const n = Math.floor(kMax / K_STEP + 1e-9) + 1;
  return Float64Array.from({ length: n }, (_, i) => i * K_STEP);
}

/** Wave number in Å⁻¹ of an electron `energyEv` above the edge; negative below it, so that the axis has no fold. */
export const kFromEnergyEv = (energyEv: number): number => Math.sign(energyEv) * Math.sqrt(Math.abs(energyEv) / EV_PER_K_SQUARED);

/** Energy above the edge in eV of wave number k in Å⁻¹. */
export const energyEvFromK = (k: number): number => Math.sign(k) * EV_PER_K_SQUARED * k * k;

/**
 * Step and index of the first point of a uniform grid whose points are whole multiples of the step.
 *
 * @throws {RangeError} fewer than two points, not uniform, or not through multiples of its step
 */
export function uniformGridOf(k: Float64Array): { readonly step: number; readonly first: number } {
  const n = k.length;
  if (n < 2) throw new RangeError(`k grid: at least two points are needed, got ${n}`);
  const step = (k[n - 1]! - k[0]!) / (n - 1);
  const first = Math.round(k[0]! / step);
  for (let i = 0; i < n; i++) {
    if (!(Math.abs(k[i]! - (first + i) * step) <= 1e-6)) {
      throw new RangeError(
        `k grid: points must be whole multiples of one step, got ${k[i]} at point ${i + 1} with step ${step.toFixed(5)}`,
      );
    }
  }
  return { step, first };
}
