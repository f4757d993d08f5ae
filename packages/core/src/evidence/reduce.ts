/**
 * From measured absorption to chi(k) with its noise; every choice is recorded with its reason.
 *
 *   chi(E) = (μ − post)/(step a(E)), averaged onto k = √(0.2625 (E − E0)), minus its part below R_low
 *
 * Given E0, the ranges and the step, all of it is linear in μ. Ranges have soft ends and averages soft weights, so that no result jumps.
 */

import type { Edge } from '../atom/types.js';
import { type Diagnostic, InputError } from '../errors.js';
import { fourierTransform, K_STEP, kFromEnergyEv, uniformKGrid } from '../spectrum/index.js';
import { mergeScans } from './align.js';
import { backgroundProjector } from './background.js';
import { findEdge, rangesFor } from './edge.js';
import { checkFinite, checkKRange } from './limits.js';
import { AVERAGING, applyMap, indexBelow, localFit } from './local-fit.js';
import { noiseOf } from './noise.js';
import { atomicDecay, type Normalised, normalise } from './normalise.js';
import { findGlitches, type Glitch, glitch, pointNoise } from './point-noise.js';
import { reduceChi } from './ready-chi.js';
import type { Choice, ReduceOptions, Reduction } from './reduction.js';
import { selfAbsorption } from './self-absorption.js';
import type { AbsorptionScan, MeasuredScan } from './types.js';

/** eV: over less, the step is uncertain by 5 % or more (a scan of the tests' cut at 120 eV loses 20 %). */
const LEAST_POST_EDGE = 200;
/** Å⁻¹ between points beyond which the scan is called sparse: at 0.1, distances beyond 15 Å fold back. */
const SPARSE = 0.1;
/** A group of neighbours loses one point a pass. Where more stick out there is a step or a bend, which would be eaten point by point. */
const LEAVING_OUT_PASSES = 2;
/** The first pass leaves some 5 % in the step, each further one a tenth of it. */
const STEP_PASSES = 2;

/** R_low from the first peak of at least 30 % of the strongest: 0.55 of its (uncorrected) R, between 0.6 and 1 Å. */
function backgroundLimit(k: Float64Array, raw: Float64Array, kMax: number): { readonly rLow: number; readonly why: string } {
  const chi = backgroundProjector(k, { rLow: 0.6 }).apply(raw);
  // A window that is all sill has no side lobes to be taken for a shell
  const [from, to] = [Math.min(2.5, kMax / 3), Math.min(13, kMax)];
  const { R, real, imaginary } = fourierTransform({ k, chi, kWeight: 2, kMin: from, kMax: to, sill: (to - from) / 2, rMax: 4 });
  const size = R.map((_, m) => Math.hypot(real[m]!, imaginary[m]!));
  const largest = size.reduce((most, s, m) => (R[m]! > 0.9 ? Math.max(most, s) : most), 0);
  for (let m = 1; m < R.length - 1; m++) {
    if (R[m]! < 0.9 || size[m]! < 0.3 * largest || size[m]! < size[m - 1]! || size[m]! < size[m + 1]!) continue;
    const [a, b, c] = [size[m - 1]!, size[m]!, size[m + 1]!];
    const peak = R[m]! + ((0.5 * (a - c)) / (a - 2 * b + c)) * R[1]!;
    const rLow = Math.min(1, Math.max(0.6, 0.55 * peak));
    return { rLow, why: `default: 0.55 of the first peak at ${peak.toFixed(2)} Å (not phase-corrected), between 0.6 and 1 Å` };
  }
  return { rLow: 1, why: 'default: 1 Å, no first peak was found' };
}

/**
 * Reduces one scan, or several of the same sample, to chi(k).
 *
 * @param scans  all of one kind; absorption is aligned and merged, chi(k) is averaged
 * @throws {InputError} no edge where it should be, ranges without points, too short a scan
 */
export function reduce(scans: readonly MeasuredScan[], options: ReduceOptions = {}): Reduction {
  if (scans.length === 0) throw new InputError('reduce: a scan is needed');
  const absorption = scans.filter((scan) => scan.kind === 'absorption');
  const ready = scans.filter((scan) => scan.kind === 'chi');
  if (absorption.length > 0 && ready.length > 0) throw new InputError('reduce: absorption spectra and ready chi(k) cannot be merged');
  return absorption.length > 0 ? reduceAbsorption(absorption, options) : reduceChi(ready, options);
}

/** The merged absorption that is reduced, and where its points came from. */
interface Points {
  readonly energyEv: Float64Array;
  readonly mu: Float64Array;
  readonly standardError: Float64Array | undefined;
  readonly lines: Int32Array;
}

function reduceAbsorption(scans: readonly AbsorptionScan[], options: ReduceOptions): Reduction {
  const choices: Choice[] = [];
  const first = scans[0]!;
  const element = options.element ?? first.element;
  const edge = options.edge ?? first.edge ?? 'K';
  for (const scan of scans) {
    if (scan.element && scan.element !== first.element)
      throw new InputError(`reduce: the scans are of ${first.element} and of ${scan.element}`);
  }
  const edgeWhy = first.edge ? 'as the file or the options declare' : 'default: no edge was declared';
  choices.push({ what: 'edge', value: `${element ? `${element} ` : ''}${edge}`, why: options.edge ? 'given' : edgeWhy });
  let e0: number;
  if (options.e0 === undefined) e0 = findEdge(first, element, edge, choices);
  else {
    e0 = options.e0;
    choices.push({ what: 'E0', value: e0.toFixed(2), why: 'given' });
  }
  const merged = mergeScans(scans, e0);
  if (scans.length > 1) choices.push(mergeChoice(scans));
  const { skipped, standardError } = merged;
  const settings = {
    e0,
    edge,
    element,
    fluorescence: first.detection === 'fluorescence',
    scans: scans.map((scan, s) => ({ title: scan.title, shiftEv: merged.shifts[s]!, guess: scan.guess })),
    warnings: scans.flatMap((scan) => scan.diagnostics),
  };
  let points: Points = {
    energyEv: merged.energyEv,
    mu: merged.mu,
    standardError,
    lines: first.lines.subarray(skipped, skipped + merged.mu.length),
  };
  const leftOut: Glitch[] = [];
  for (let pass = 0; ; pass++) {
    const reduction = reducePoints(points, { ...settings, choices: [...choices] }, options);
    const { flagged } = reduction;
    // Near an end a point is held against the two last ones, which nothing holds: the fault may be theirs
    const [low, high] = [points.energyEv[4]!, points.energyEv.at(-5)!];
    const condemned = flagged.filter((point) => point.energyEv >= low && point.energyEv <= high);
    if (options.leaveOutFlagged && condemned.length > 0 && pass < LEAVING_OUT_PASSES) {
      leftOut.push(...condemned.map((point) => glitch(point, true)));
      points = without(points, condemned);
      continue;
    }
    const all = [...leftOut, ...flagged].sort((a, b) => a.energyEv - b.energyEv);
    return { ...reduction, flagged: all, choices: [...reduction.choices, flaggedChoice(all, options.leaveOutFlagged)] };
  }
}

function without({ energyEv, mu, standardError, lines }: Points, flagged: readonly Glitch[]): Points {
  const gone = new Set(flagged.map((point) => point.energyEv));
  const kept = (_: number, i: number) => !gone.has(energyEv[i]!);
  return { energyEv: energyEv.filter(kept), mu: mu.filter(kept), standardError: standardError?.filter(kept), lines: lines.filter(kept) };
}

function flaggedChoice(flagged: readonly Glitch[], asked: boolean | undefined): Choice {
  const out = flagged.filter((point) => point.leftOut).length;
  return {
    what: 'points that stick out',
    value: flagged.length === 0 ? 'none' : `${out} left out, ${flagged.length - out} kept`,
    why: asked === undefined ? 'default: a point is left out only when asked for' : 'given',
  };
}

function mergeChoice(scans: readonly AbsorptionScan[]): Choice {
  const reference = scans.every((scan) => scan.reference);
  return {
    what: 'scans',
    value: `${scans.length}, laid over each other by ${reference ? 'the reference' : 'the edge itself'}, equal weights`,
    why: `default: ${reference ? 'every scan has a reference channel' : 'not every scan has a reference channel'}; scans of one sample count alike`,
  };
}

interface PointSettings {
  readonly e0: number;
  readonly edge: Edge;
  readonly element: string | undefined;
  readonly fluorescence: boolean;
  readonly scans: Reduction['scans'];
  readonly warnings: readonly Diagnostic[];
  readonly choices: Choice[];
}

function reducePoints(
  { energyEv, mu, standardError, lines }: Points,
  { e0, edge, element, fluorescence, scans, warnings: before, choices }: PointSettings,
  options: ReduceOptions,
): Omit<Reduction, 'flagged'> & { readonly flagged: readonly Glitch[] } {
  const warnings: Diagnostic[] = [...before];
  const { pre, post, form, degree, after } = rangesFor({ energyEv }, e0, options, element, edge, choices);
  const settings = { e0, pre, preForm: form, post, postDegree: degree };
  let shape = normalise(energyEv, mu, settings);

  const constant = options.normalisation === 'constant';
  choices.push({
    what: 'normalisation',
    value: constant ? 'constant edge step' : 'edge step times (E/E0)^−2.7',
    why: options.normalisation ? 'given' : 'default: the atomic absorption falls with energy; a constant step lowers chi at high k',
  });
  const decay = atomicDecay(energyEv, e0);
  let factor: Float64Array = decay.map(() => 1);
  /** Course of the smooth absorption as it was measured. */
  let course = decay;
  if (options.selfAbsorption) {
    const damping = selfAbsorption(energyEv, e0, options.selfAbsorption, element, edge);
    ({ factor, course } = damping);
    const percent = 100 * (factor[indexBelow(energyEv, e0) + 1]! - 1);
    choices.push({ what: 'self-absorption', value: `chi raised by ${percent.toFixed(0)} % at the edge`, why: `given: ${damping.basis}` });
    if (!fluorescence) {
      const message = 'self-absorption damps fluorescence only; this scan does not say it is fluorescence, and was corrected as asked';
      warnings.push({ code: 'self-absorption-unexpected', message });
    }
  } else if (fluorescence) {
    choices.push({ what: 'self-absorption', value: 'not corrected', why: "default: the sample's composition was not given" });
    warnings.push(selfAbsorptionRisk(energyEv, mu, e0, shape.edgeStep));
  }

  const kPoints = energyEv.map((e) => kFromEnergyEv(e - e0));
  const kEnd = Math.min(kPoints.at(-1)!, kFromEnergyEv(after));
  const kMax = Math.min(options.kMax ?? Infinity, kEnd);
  if (!(kMax >= 5)) {
    throw new InputError(`the scan reaches k = ${kMax.toFixed(1)} Å⁻¹ above the edge at ${e0.toFixed(1)} eV; 5 Å⁻¹ are needed`);
  }
  checkKRange(kMax);
  const k = uniformKGrid(kMax);
  const last = k.at(-1)!;
  choices.push({
    what: 'k range',
    value: `0 to ${last.toFixed(2)} Å⁻¹`,
    why: options.kMax ? 'given' : 'default: as far as the data reach',
  });
  warnings.push(...samplingWarnings(kPoints, energyEv, last, post));
  const map = localFit(kPoints, k, AVERAGING, 0);
  /** What one unit of chi is in the measured absorption (m). */
  const unitOf = (step: number) => course.map((c, i) => (step * c) / (factor[i]! * (constant ? decay[i]! : 1)));
  const rawOf = ({ edgeStep, postEdge }: Normalised) => {
    const unit = unitOf(edgeStep);
    return mu.map((y, i) => (y - postEdge[i]!) / unit[i]!);
  };
  let onGrid = applyMap(map, rawOf(shape));
  const limit = options.backgroundBelow ? { rLow: options.backgroundBelow, why: 'given' } : backgroundLimit(k, onGrid, last);
  choices.push({ what: 'background below', value: `${limit.rLow.toFixed(2)} Å`, why: limit.why });
  choices.push({
    what: 'background weight',
    value: `k^${options.backgroundWeight ?? 2}`,
    why: options.backgroundWeight === undefined ? 'default: about undoes the fall of chi, so that all of the range counts' : 'given',
  });
  const projector = backgroundProjector(k, { rLow: limit.rLow, kWeight: options.backgroundWeight ?? 2 });
  for (let pass = 0; pass < STEP_PASSES; pass++) {
    // Oscillations pull the post-edge and with it the step; what is known of them is taken off before it is fitted again
    const unit = unitOf(shape.edgeStep);
    const oscillation = onPoints(projector.apply(onGrid), kPoints);
    shape = normalise(
      energyEv,
      mu.map((y, i) => y - unit[i]! * oscillation[i]!),
      settings,
    );
    onGrid = applyMap(map, rawOf(shape));
  }
  const { edgeStep, preEdge, postEdge } = shape;
  const unit = unitOf(edgeStep);
  const raw = rawOf(shape);
  const smooth = projector.background(onGrid);
  const chi = onGrid.map((y, i) => y - smooth[i]!);

  const single = pointNoise(kPoints, raw);
  const sigma = standardError ? standardError.map((s, i) => s / unit[i]!) : single.sigma;
  const { noise, sigmaChi } = noiseOf(k, chi, { map, sigma, repeated: standardError !== undefined });
  const flagged = findGlitches(single, energyEv, lines, (e) => e < e0 - 25 || e > e0 + 40);
  checkFinite(chi, sigmaChi);
  const along = onPoints(smooth, kPoints);
  const curve = energyEv.map((e, i) => (e < e0 ? preEdge[i]! : postEdge[i]! + unit[i]! * along[i]!));
  return {
    k,
    chi,
    sigmaChi,
    e0,
    edgeStep,
    noise,
    ...(element ? { element } : {}),
    edge,
    energyEv,
    mu,
    preEdge: { range: pre, form, curve: preEdge },
    postEdge: { range: post, degree, curve: postEdge },
    background: { rLow: limit.rLow, kWeight: projector.settings.kWeight, kMax: last, coefficients: projector.coefficients, curve },
    scans,
    flagged,
    choices,
    warnings,
  };
}

/** Values on the grid 0, 0.05 … at the measured points, linearly between; nothing below and beyond it. */
function onPoints(values: Float64Array, kPoints: Float64Array): Float64Array {
  return kPoints.map((q) => {
    const x = q / K_STEP;
    if (x < 0 || x > values.length - 1) return 0;
    const j = Math.min(values.length - 2, Math.floor(x));
    return values[j]! + (x - j) * (values[j + 1]! - values[j]!);
  });
}

function samplingWarnings(kPoints: Float64Array, energyEv: Float64Array, kMax: number, post: readonly [number, number]): Diagnostic[] {
  const found: Diagnostic[] = [];
  const length = post[1] - post[0];
  if (length < LEAST_POST_EDGE) {
    found.push({
      code: 'short-post-edge',
      message: `the post-edge is ${length.toFixed(0)} eV long; the edge step, and with it the amplitude of chi, is uncertain`,
    });
  }
  let widest = 0;
  let at = 0;
  for (let i = 1; i < kPoints.length; i++) {
    const gap = kPoints[i]! - kPoints[i - 1]!;
    if (kPoints[i - 1]! < 2 || kPoints[i]! > kMax || gap <= widest) continue;
    widest = gap;
    at = i;
  }
  if (widest > SPARSE) {
    const reach = Math.PI / (2 * widest);
    const message = `points lie up to ${widest.toFixed(2)} Å⁻¹ apart (${energyEv[at - 1]!.toFixed(0)} to ${energyEv[at]!.toFixed(0)} eV): there, distances beyond ${reach.toFixed(1)} Å are not seen`;
    found.push({ code: 'sparse-points', message });
  }
  return found;
}

function selfAbsorptionRisk(energyEv: Float64Array, mu: Float64Array, e0: number, edgeStep: number): Diagnostic {
  const before = Math.abs(mu[indexBelow(energyEv, e0 - 30)]!);
  const contrast = edgeStep / before;
  const message =
    contrast > 3
      ? `fluorescence of a concentrated sample (the edge stands ${contrast.toFixed(0)} times above what lies before it): self-absorption may damp chi; state the sample's composition to correct it`
      : 'fluorescence: in a thick, concentrated sample self-absorption damps chi; nothing was corrected';
  return { code: 'self-absorption-risk', message };
}
