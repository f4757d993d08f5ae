/**
 * Does the sample change under the beam? Repeated scans, in the order they were taken.
 *
 * Edge energy: each scan's shift against the mean of all (align.ts), which uses every point of the edge. Drift: a straight line through these
 * against the scan's number, its error from their scatter (Student's t, n − 2 degrees of freedom), called a drift beyond the
 * two-sided 99 % point, so that one still series in a hundred is called one. Components: singular values of the normalised scans
 * around the edge above the level of noise after Gavish & Donoho, IEEE Trans. Inf. Theory 60, 5040 (2014), with unknown noise.
 */

import { Matrix, SVD } from 'ml-matrix';
import { type Diagnostic, InputError } from '../errors.js';
import { kFromEnergyEv, uniformKGrid } from '../spectrum/index.js';
import { edgeShift, type Shift } from './align.js';
import { backgroundProjector } from './background.js';
import { findEdge, rangesFor } from './edge.js';
import { leastSquares } from './least-squares.js';
import { AVERAGING, applyMap, interpolate, localFit } from './local-fit.js';
import { atomicDecay, normalise } from './normalise.js';
import type { Choice, ReduceOptions } from './reduction.js';
import type { AbsorptionScan, MeasuredScan } from './types.js';

export interface DoseReport {
  /** eV, in order. Energies are comparable within the series; the absolute value is that of the steepest rise of the mean. */
  readonly edgeEnergy: readonly { readonly scan: string; readonly value: number; readonly sd: number }[];
  /** eV per scan; sd is Infinity for two scans, whose scatter is not known. */
  readonly driftPerScan: Shift;
  /** eV per scan that would have been called a drift in 80 % of such series. */
  readonly detectableDrift: number;
  readonly drift: boolean;
  /** Spectra of which the scans are mixtures; null below four scans. */
  readonly components: number | null;
  /** Of the normalised scans around the edge, falling. */
  readonly singularValues: readonly number[];
  /** Relative change of the amplitude of chi (k 3 … 10 Å⁻¹, k²) per scan, and each scan's amplitude against the mean. */
  readonly chiAmplitude: { readonly values: readonly number[]; readonly trendPerScan: Shift };
  /** Largest difference between the last and the first scan around the edge, part of the edge step. */
  readonly edgeDifference: number;
  /** Numbers of the scans to keep, from 1. */
  readonly keep: readonly number[];
  /** What was found, in plain words. */
  readonly sentence: string;
  readonly choices: readonly Choice[];
  readonly warnings: readonly Diagnostic[];
}

/** Student's t for a one-sided probability, by Hill's asymptotic expansion through the normal quantile (Commun. ACM 13, 619 (1970)); exact for 1 and 2. */
export function studentT(probability: number, freedom: number): number {
  if (freedom === 1) return Math.tan(Math.PI * (probability - 0.5));
  if (freedom === 2) return (2 * probability - 1) * Math.sqrt(2 / (1 - (2 * probability - 1) ** 2));
  const z = normalQuantile(probability);
  const z2 = z * z;
  const g1 = (z2 + 1) / 4;
  const g2 = ((5 * z2 + 16) * z2 + 3) / 96;
  const g3 = (((3 * z2 + 19) * z2 + 17) * z2 - 15) / 384;
  const g4 = ((((79 * z2 + 776) * z2 + 1482) * z2 - 1920) * z2 - 945) / 92160;
  return z * (1 + (g1 + (g2 + (g3 + g4 / freedom) / freedom) / freedom) / freedom);
}

/** Abramowitz & Stegun 26.2.23, error below 4.5e-4. */
function normalQuantile(p: number): number {
  const t = Math.sqrt(-2 * Math.log(Math.min(p, 1 - p)));
  const z = t - (2.515517 + t * (0.802853 + t * 0.010328)) / (1 + t * (1.432788 + t * (0.189269 + t * 0.001308)));
  return p < 0.5 ? -z : z;
}

/** Slope of y against its number, and its error from the scatter. */
function trend(y: readonly number[]): Shift {
  const n = y.length;
  const middle = (n - 1) / 2;
  const mean = y.reduce((sum, v) => sum + v, 0) / n;
  let sxx = 0;
  let sxy = 0;
  for (let i = 0; i < n; i++) {
    sxx += (i - middle) ** 2;
    sxy += (i - middle) * (y[i]! - mean);
  }
  const value = sxy / sxx;
  const residual = y.reduce((sum, v, i) => sum + (v - mean - value * (i - middle)) ** 2, 0);
  return { value, sd: n > 2 ? Math.sqrt(residual / (n - 2) / sxx) : Number.POSITIVE_INFINITY };
}

/**
 * Looks for change along a series of scans of one spot.
 *
 * @param scans  absorption, two or more, in the order they were taken
 * @param names  how to call them, one each
 * @throws {InputError} fewer than two scans, ready chi(k), or no edge
 */
export function dose(scans: readonly MeasuredScan[], names: readonly string[], options: ReduceOptions = {}): DoseReport {
  const series = scans.filter((scan) => scan.kind === 'absorption');
  if (series.length !== scans.length) throw new InputError('dose: absorption spectra are needed, chi(k) carries no edge');
  if (series.length < 2) throw new InputError(`dose: two scans or more are needed, got ${series.length}`);
  const choices: Choice[] = [];
  const first = series[0]!;
  const element = options.element ?? first.element;
  const edge = options.edge ?? first.edge ?? 'K';
  const e0 = options.e0 ?? findEdge(first, element, edge, choices);
  const warnings: Diagnostic[] = series.flatMap((scan) => scan.diagnostics);

  const curves = normalisedSeries(series, e0, (scan) => rangesFor(scan, e0, options, element, edge, []));
  const { energyEv, mu } = curves;
  const mean = energyEv.map((_, i) => mu.reduce((sum, scan) => sum + scan[i]!, 0) / mu.length);
  // With a reference foil in every scan the monochromator's own wandering is taken out
  const reference = series.every((scan) => scan.reference);
  if (reference) choices.push({ what: 'energy scale', value: 'reference channel', why: 'every scan carries one; its shift is subtracted' });
  else {
    warnings.push({
      code: 'no-reference-channel',
      message:
        'without a reference channel a drift of the monochromator looks like a drift of the sample, and absolute edge energies mean nothing',
    });
  }
  if (series.length < 5) {
    warnings.push({
      code: 'few-scans',
      message: `from ${series.length} scans their own scatter is hardly known; each further one sharpens the smallest drift that can be seen`,
    });
  }
  const shifts = series.map((scan, s) => {
    const own = edgeShift(energyEv, mean, energyEv, mu[s]!, e0);
    if (!reference) return own;
    const foil = edgeShift(first.energyEv, first.reference!, scan.energyEv, scan.reference!, e0);
    return { value: own.value - foil.value, sd: Math.hypot(own.sd, foil.sd) };
  });
  const values = shifts.map((shift) => shift.value);
  const driftPerScan = trend(values);
  const n = series.length;
  const freedom = n - 2;
  const drift =
    freedom > 0
      ? Math.abs(driftPerScan.value) > studentT(0.995, freedom) * driftPerScan.sd
      : Math.abs(values[1]! - values[0]!) > 3 * Math.hypot(shifts[0]!.sd, shifts[1]!.sd);
  const detectableDrift =
    freedom > 0 ? (studentT(0.995, freedom) + studentT(0.8, freedom)) * driftPerScan.sd : 3.84 * Math.hypot(shifts[0]!.sd, shifts[1]!.sd);
  const keep = drift ? keepBefore(values, driftPerScan.value) : series.map((_, s) => s + 1);
  const { singularValues, components } = countComponents(energyEv, mu, e0);
  let edgeDifference = 0;
  for (let i = 0; i < energyEv.length; i++)
    if (Math.abs(energyEv[i]! - e0) < 50) edgeDifference = Math.max(edgeDifference, Math.abs(mu[n - 1]![i]! - mu[0]![i]!));
  const edgeEnergy = shifts.map(({ value, sd }, s) => ({ scan: names[s] ?? `scan ${s + 1}`, value: e0 + value, sd }));
  const report = { edgeEnergy, driftPerScan, detectableDrift, drift, components, singularValues, edgeDifference, keep, choices, warnings };
  return { ...report, chiAmplitude: amplitudeTrend(energyEv, mu, e0), sentence: sentenceOf(report, n) };
}

/** Scans in units of their edge step, pre-edge off, on the energies of the first. */
function normalisedSeries(series: readonly AbsorptionScan[], e0: number, ranges: (scan: AbsorptionScan) => ReturnType<typeof rangesFor>) {
  const from = Math.max(...series.map((scan) => scan.energyEv[0]!));
  const to = Math.min(...series.map((scan) => scan.energyEv.at(-1)!));
  const energyEv = series[0]!.energyEv.filter((e) => e >= from && e <= to);
  if (energyEv.length < 50) throw new InputError(`dose: the scans share ${energyEv.length} energies only`);
  const mu = series.map((scan) => {
    const { pre, post, form, degree } = ranges(scan);
    const { preEdge, edgeStep } = normalise(scan.energyEv, scan.mu, { e0, pre, preForm: form, post, postDegree: degree });
    return interpolate(
      scan.energyEv,
      scan.mu.map((y, i) => (y - preEdge[i]!) / edgeStep),
      energyEv,
    );
  });
  return { energyEv, mu };
}

/** The first scans, as long as the drift since the first stays below the scatter of one scan's edge energy about the line. */
function keepBefore(values: readonly number[], slope: number): number[] {
  const n = values.length;
  const mean = values.reduce((sum, v) => sum + v, 0) / n;
  const scatter = Math.sqrt(values.reduce((sum, v, i) => sum + (v - mean - slope * (i - (n - 1) / 2)) ** 2, 0) / Math.max(1, n - 2));
  const count = Math.max(1, Math.min(n, 1 + Math.floor(scatter / Math.abs(slope))));
  return Array.from({ length: count }, (_, i) => i + 1);
}

function countComponents(
  energyEv: Float64Array,
  mu: readonly Float64Array[],
  e0: number,
): { singularValues: number[]; components: number | null } {
  const inside = Array.from(energyEv.keys()).filter((i) => Math.abs(energyEv[i]! - e0 - 10) < 60);
  const matrix = new Matrix(inside.map((i) => mu.map((scan) => scan[i]!)));
  const singularValues = Array.from(
    new SVD(matrix, { computeLeftSingularVectors: false, computeRightSingularVectors: false, autoTranspose: true }).diagonal,
  );
  const n = mu.length;
  if (n < 4) return { singularValues, components: null };
  const beta = Math.min(n, inside.length) / Math.max(n, inside.length);
  const ordered = [...singularValues].sort((a, b) => a - b);
  const median = n % 2 === 1 ? ordered[n >> 1]! : 0.5 * (ordered[n / 2 - 1]! + ordered[n / 2]!);
  const threshold = (0.56 * beta ** 3 - 0.95 * beta ** 2 + 1.82 * beta + 1.43) * median;
  return { singularValues, components: singularValues.filter((value) => value > threshold).length };
}

function amplitudeTrend(energyEv: Float64Array, mu: readonly Float64Array[], e0: number): DoseReport['chiAmplitude'] {
  const kPoints = energyEv.map((e) => kFromEnergyEv(e - e0));
  const kMax = Math.min(10, kPoints.at(-1)!);
  if (kMax < 5) return { values: mu.map(() => 1), trendPerScan: { value: 0, sd: Number.POSITIVE_INFINITY } };
  const k = uniformKGrid(kMax);
  const map = localFit(kPoints, k, AVERAGING, 0);
  const project = backgroundProjector(k);
  const decay = atomicDecay(energyEv, e0);
  const chis = mu.map((scan) =>
    project.apply(
      applyMap(
        map,
        scan.map((y, i) => y / decay[i]! - 1),
      ),
    ),
  );
  const mean = k.map((_, i) => chis.reduce((sum, chi) => sum + chi[i]!, 0) / chis.length);
  const weight = k.map((q) => (q < 3 ? 0 : q ** 4));
  const values = chis.map((chi) => leastSquares([mean], chi, weight).coefficients[0]!);
  return { values, trendPerScan: trend(values) };
}

function sentenceOf(
  {
    drift,
    driftPerScan,
    detectableDrift,
    components,
    keep,
  }: Pick<DoseReport, 'drift' | 'driftPerScan' | 'detectableDrift' | 'components' | 'keep'>,
  n: number,
): string {
  const ev = (x: number) => Math.abs(x).toPrecision(2);
  const mixtures =
    components === null ? '' : components > 1 ? ` The scans are mixtures of ${components} spectra.` : ' One spectrum describes all scans.';
  if (!drift) {
    return `No drift seen over ${n} scans; a drift of ${ev(detectableDrift)} eV per scan would have been seen in four of five such series.${mixtures}`;
  }
  const error = Number.isFinite(driftPerScan.sd) ? ` ± ${ev(driftPerScan.sd)}` : '';
  const kept = keep.length === 1 ? 'scan 1' : `scans 1 to ${keep.length}`;
  return `The edge drifts ${driftPerScan.value < 0 ? 'down' : 'up'} by ${ev(driftPerScan.value)}${error} eV per scan: the sample or the energy scale changes; keep ${kept}.${mixtures}`;
}
