/** How far two spectra lie apart, as the complex transform sees it. */

import { type TransformSettings, transformPlan } from './transform.js';

export interface ComparisonInR {
  /** Σ|data − model|²/Σ|data|² over complex chi(R) in the R range. */
  readonly rFactor: number;
  /** Number of complex points compared. */
  readonly points: number;
  /** Å */
  readonly R: Float64Array;
  readonly data: { readonly real: Float64Array; readonly imaginary: Float64Array };
  readonly model: { readonly real: Float64Array; readonly imaginary: Float64Array };
}

/**
 * R-factor between two chi(k) on the same grid, on complex chi(R) between rMin and rMax.
 *
 * Pass both through the same background projection first, or the comparison charges the model with what the reduction took away.
 *
 * @param k      uniform grid, Å⁻¹ (n)
 * @param data   measured chi (n)
 * @param model  predicted chi (n)
 * @throws {RangeError} grids or ranges unusable
 */
export function compareInR({
  k,
  data,
  model,
  rMin,
  rMax,
  ...settings
}: Omit<TransformSettings, 'rMax'> & {
  readonly k: Float64Array;
  readonly data: Float64Array;
  readonly model: Float64Array;
  readonly rMin: number;
  readonly rMax: number;
}): ComparisonInR {
  const plan = transformPlan(k, { ...settings, rMax });
  const first = plan.R.findIndex((r) => r >= rMin - 1e-9);
  if (!(rMax > rMin) || first < 0) throw new RangeError(`compareInR: the R range must not be empty, got ${rMin} to ${rMax} Å`);
  const n = plan.R.length;
  const transformed = (chi: Float64Array) => {
    const real = new Float64Array(n);
    const imaginary = new Float64Array(n);
    plan.apply(chi, real, imaginary);
    return { real: real.slice(first), imaginary: imaginary.slice(first) };
  };
  const d = transformed(data);
  const m = transformed(model);
  let difference = 0;
  let power = 0;
  for (let i = 0; i < n - first; i++) {
    difference += (d.real[i]! - m.real[i]!) ** 2 + (d.imaginary[i]! - m.imaginary[i]!) ** 2;
    power += d.real[i]! ** 2 + d.imaginary[i]! ** 2;
  }
  return { rFactor: difference / power, points: n - first, R: plan.R.slice(first), data: d, model: m };
}
