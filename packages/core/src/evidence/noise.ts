/**
 * Noise of chi(k) as the transform sees it: the rms between 15 and 25 Å, where no shell reaches (Newville, Boyanov & Sayers,
 * J. Synchrotron Rad. 6, 264 (1999)).
 *
 * The averaging onto the k grid passes noise at 20 Å less well than at 3 Å. As that averaging is a known linear map, the ratio is
 * computed and the estimate corrected by it. ε_R is per real or imaginary part; with F as in spectrum/transform.ts,
 * ε_R² = (dk²/2π) ε_k² Σ (W kʷ)².
 */

import { backTransform, fourierTransform, K_STEP, type TransformSettings, transformPlan } from '../spectrum/index.js';
import { mapUncertainty, type SparseMap } from './local-fit.js';

const NOISE_RANGE = [15, 25] as const;
const SIGNAL_RANGE = [1, 5] as const;

export interface Noise {
  /** Standard deviation of one point of chi on the 0.05 Å⁻¹ grid. */
  readonly epsilonK: number;
  /** Standard deviation of the real or imaginary part of the transform, Å^−(kWeight + 1). */
  readonly epsilonR: number;
  /** ε_R from 15 to 25 Å alone. */
  readonly epsilonRHigh: number;
  /** ε_R from the scatter between repeated scans; absent for one scan. */
  readonly epsilonRRepeats?: number;
  /** ε_R that the points' own standard deviations imply; absent for ready chi. */
  readonly epsilonRPoints?: number;
  /** Å⁻¹: beyond it the oscillations drown. */
  readonly kMaxUseful: number;
  readonly kWeight: number;
  readonly kRange: readonly [number, number];
}

/** Mean variance of the transform's parts over R that independent points of standard deviation sigma bring through the map. */
function mappedVariance(
  map: SparseMap,
  sigma: Float64Array,
  k: Float64Array,
  weight: Float64Array,
  [from, to]: readonly [number, number],
): number {
  const re = new Float64Array(sigma.length);
  const im = new Float64Array(sigma.length);
  const POINTS = 11;
  let total = 0;
  for (let m = 0; m < POINTS; m++) {
    const R = from + ((to - from) * m) / (POINTS - 1);
    re.fill(0);
    im.fill(0);
    for (let i = 0; i < map.rows; i++) {
      if (weight[i] === 0) continue;
      const cos = weight[i]! * Math.cos(2 * k[i]! * R);
      const sin = weight[i]! * Math.sin(2 * k[i]! * R);
      const offset = map.first[i]! - map.start[i]!;
      for (let j = map.start[i]!; j < map.start[i + 1]!; j++) {
        re[offset + j]! += cos * map.weights[j]!;
        im[offset + j]! += sin * map.weights[j]!;
      }
    }
    for (let p = 0; p < sigma.length; p++) total += 0.5 * sigma[p]! ** 2 * (re[p]! ** 2 + im[p]! ** 2);
  }
  return (total * K_STEP * K_STEP) / (Math.PI * POINTS);
}

/**
 * Noise of a reduced spectrum.
 *
 * @param k       0.05 Å⁻¹ grid (n)
 * @param chi     (n)
 * @param settings window in which the noise is wanted, as the comparison will use it
 * @param origin  the map that made chi from points, and the points' standard deviations in units of chi; absent for ready chi.
 *                `repeated` says that these come from the scatter between scans.
 */
export function estimateNoise(
  k: Float64Array,
  chi: Float64Array,
  settings: TransformSettings,
  origin?: { readonly map: SparseMap; readonly sigma: Float64Array; readonly repeated: boolean },
): Noise {
  const { R, real, imaginary } = fourierTransform({ k, chi, ...settings });
  const { weight } = transformPlan(k, settings);
  let power = 0;
  let count = 0;
  for (let m = 0; m < R.length; m++) {
    if (R[m]! < NOISE_RANGE[0] || R[m]! > NOISE_RANGE[1]) continue;
    power += real[m]! ** 2 + imaginary[m]! ** 2;
    count += 2;
  }
  let high = Math.sqrt(power / count);
  let passage = 1;
  let points: number | undefined;
  if (origin) {
    const low = mappedVariance(origin.map, origin.sigma, k, weight, SIGNAL_RANGE);
    passage = Math.sqrt(low / mappedVariance(origin.map, origin.sigma, k, weight, NOISE_RANGE));
    high *= passage;
    points = Math.sqrt(low);
  }
  const repeats = origin?.repeated ? points : undefined;
  const epsilonR = Math.max(high, repeats ?? 0);
  const sum = weight.reduce((total, w) => total + w * w, 0);
  return {
    epsilonK: epsilonR * Math.sqrt((2 * Math.PI) / (K_STEP * K_STEP * sum)),
    epsilonR,
    epsilonRHigh: high,
    ...(repeats === undefined ? {} : { epsilonRRepeats: repeats }),
    ...(points === undefined ? {} : { epsilonRPoints: points }),
    kMaxUseful: largestUsefulK(k, chi, passage),
    kWeight: settings.kWeight,
    kRange: [settings.kMin, settings.kMax],
  };
}

/**
 * Where the oscillations between 1 and 5 Å, as rms over ±1.5 Å⁻¹, fall below the noise expected in the same stretch of R (4/10 of the power
 * between 15 and 25 Å, over ±3 Å⁻¹: some 20 and 40 independent values). One weight of k, so that each k is judged nearly on its own.
 */
function largestUsefulK(k: Float64Array, chi: Float64Array, passage: number): number {
  const kMax = k.at(-1)!;
  const whole = fourierTransform({ k, chi, kWeight: 1, kMin: k[0]!, kMax, sill: 0.5 });
  const part = ([from, to]: readonly [number, number]) => {
    const { real, imaginary } = backTransform(whole, { window: 'hann', kMin: from, kMax: to, sill: 0.2 }, kMax);
    return real.map((re, i) => re * re + imaginary[i]! ** 2);
  };
  const signal = part(SIGNAL_RANGE);
  const noise = part(NOISE_RANGE).map((p) => 0.4 * passage * passage * p);
  const offset = Math.round(k[0]! / K_STEP);
  const mean = (x: Float64Array, i: number, width: number) => {
    const half = Math.round(width / K_STEP);
    let sum = 0;
    let n = 0;
    for (let j = Math.max(offset, i - half); j <= Math.min(x.length - 1, i + half); j++, n++) sum += x[j]!;
    return sum / n;
  };
  for (let i = Math.round(3 / K_STEP); i < signal.length; i++) if (mean(signal, i, 1.5) < 2 * mean(noise, i, 3)) return i * K_STEP;
  return kMax;
}

/** Noise in the window a comparison would use, and σ of each point scaled so that both speak of the same noise. */
export function noiseOf(
  k: Float64Array,
  chi: Float64Array,
  origin: { readonly map: SparseMap; readonly sigma: Float64Array; readonly repeated: boolean },
) {
  const last = k.at(-1)!;
  const settings = { kWeight: 2, kMin: Math.min(3, last / 3), kMax: last };
  const noise = estimateNoise(k, chi, settings, origin);
  const sigma = mapUncertainty(origin.map, origin.sigma);
  // How the noise runs along k is the points' to say, how large it is the transform's
  const level = noise.epsilonRPoints ? noise.epsilonR / noise.epsilonRPoints : 1;
  return { noise, sigmaChi: sigma.map((s) => s * level) };
}
