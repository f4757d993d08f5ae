/**
 * Scans laid over each other. Around the edge a scan is, to first order,
 *
 *   μ_s(E + δ) = g μ(E) + o + s (E − E0)
 *
 * the shift δ found by least squares with gain, offset and slope free (Gauss–Newton in δ). All points of the edge share in it, so that it is
 * far more precise than the place of the largest slope, and it needs no model of the edge.
 */

import { leastSquares, softRange } from './least-squares.js';
import { applyMap, interpolate, localFit, localSpacing } from './local-fit.js';

/** eV around the edge in which scans are compared. */
const EDGE_REGION = [-30, 60] as const;

export interface Shift {
  /** eV: the scan's edge lies this much above the target's. */
  readonly value: number;
  /** eV, from the scatter about the fit (the larger of it and noise alone, by construction). */
  readonly sd: number;
}

/**
 * Shift of one scan against a target.
 *
 * @param targetEnergy  eV (n), with `target` (n)
 * @param energyEv      eV (m), with `mu` (m)
 * @param e0            eV, edge of the target
 */
export function edgeShift(targetEnergy: Float64Array, target: Float64Array, energyEv: Float64Array, mu: Float64Array, e0: number): Shift {
  const inside = Array.from(targetEnergy.keys()).filter(
    (i) => targetEnergy[i]! > e0 + EDGE_REGION[0] && targetEnergy[i]! < e0 + EDGE_REGION[1],
  );
  const at = Float64Array.from(inside, (i) => targetEnergy[i]!);
  const y = Float64Array.from(inside, (i) => target[i]!);
  if (at.length < 12)
    throw new RangeError(
      `edgeShift: 12 points are needed between ${EDGE_REGION[0]} and ${EDGE_REGION[1]} eV of the edge, found ${at.length}`,
    );
  const slope = applyMap(localFit(targetEnergy, at, 1, 1), target);
  const weight = at.map((e) => softRange(e - e0, EDGE_REGION[0], EDGE_REGION[1], 10));
  const columns = [y, at.map(() => 1), at.map((e) => (e - e0) / 100), slope];
  let shift = 0;
  let sd = Number.POSITIVE_INFINITY;
  for (let pass = 0; pass < 6; pass++) {
    const moved = interpolate(
      energyEv,
      mu,
      at.map((e) => e + shift),
    );
    const { coefficients, inverse, residual } = leastSquares(columns, moved, weight);
    const step = -coefficients[3]! / coefficients[0]!; // μ_s(E + δ) − gμ ≈ g (δ_guess − δ) μ′
    shift += step;
    let freedom = -4;
    for (const w of weight) freedom += w;
    sd = Math.sqrt((residual / Math.max(1, freedom)) * inverse[15]!) / Math.abs(coefficients[0]!);
    if (Math.abs(step) < 1e-5) break;
  }
  return { value: shift, sd };
}

export interface Merged {
  readonly energyEv: Float64Array;
  readonly mu: Float64Array;
  /** Points of the first scan left out at its beginning, where another has none. */
  readonly skipped: number;
  /** Standard error of each point from the scatter between the scans, smoothed over 31 points; absent for one scan (n). */
  readonly standardError?: Float64Array;
  /** eV, subtracted from each scan's energies. */
  readonly shifts: readonly Shift[];
}

interface MergeInput {
  readonly energyEv: Float64Array;
  readonly mu: Float64Array;
  readonly reference?: Float64Array;
}

/**
 * Scans aligned with the first and averaged on its energies with equal weights, gain, offset and slope of each brought to the mean.
 *
 * The energy scale is fixed by the reference channel when every scan has one, else by the edge itself.
 *
 * @param e0  eV, edge of the first scan
 */
export function mergeScans(scans: readonly MergeInput[], e0: number): Merged {
  const first = scans[0]!;
  if (scans.length === 1) return { energyEv: first.energyEv, mu: first.mu, skipped: 0, shifts: [{ value: 0, sd: 0 }] };
  const channel = scans.every((scan) => scan.reference) ? (scan: MergeInput) => scan.reference! : (scan: MergeInput) => scan.mu;
  const shifts = scans.map((scan, s) =>
    s === 0 ? { value: 0, sd: 0 } : edgeShift(first.energyEv, channel(first), scan.energyEv, channel(scan), e0),
  );
  const from = Math.max(...scans.map((scan, s) => scan.energyEv[0]! - shifts[s]!.value));
  const to = Math.min(...scans.map((scan, s) => scan.energyEv.at(-1)! - shifts[s]!.value));
  const energyEv = first.energyEv.filter((e) => e >= from && e <= to);
  const moved = scans.map((scan, s) =>
    interpolate(
      scan.energyEv,
      scan.mu,
      energyEv.map((e) => e + shifts[s]!.value),
    ),
  );
  const n = energyEv.length;
  const mean = new Float64Array(n);
  for (const scan of moved) for (let i = 0; i < n; i++) mean[i]! += scan[i]! / scans.length;
  const spacing = localSpacing(energyEv);
  const line = energyEv.map((e) => (e - e0) / 1000);
  const basis = [mean, mean.map(() => 1), line, line.map((x) => x * x)];
  const variance = new Float64Array(n);
  for (const scan of moved) {
    const { coefficients } = leastSquares(basis, scan, spacing);
    for (let i = 0; i < n; i++) {
      let r = scan[i]!;
      for (let b = 0; b < 4; b++) r -= coefficients[b]! * basis[b]![i]!;
      variance[i]! += (r / coefficients[0]!) ** 2 / (scans.length - 1) / scans.length;
    }
  }
  const standardError = variance.map((_, i) => {
    let sum = 0;
    let count = 0;
    for (let j = Math.max(0, i - 15); j <= Math.min(n - 1, i + 15); j++, count++) sum += variance[j]!;
    return Math.sqrt(sum / count);
  });
  return { energyEv, mu: mean, skipped: first.energyEv.findIndex((e) => e >= from), standardError, shifts };
}
