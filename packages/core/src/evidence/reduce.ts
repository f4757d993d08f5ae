/**
 * From measured absorption to chi(k) with its noise; every choice is recorded with its reason.
 *
 *   chi(E) = (μ − post)/(step a(E)), averaged onto k = √(0.2625 (E − E0)), minus its part below R_low
 *
 * Given E0, the ranges and the step, all of it is linear in μ. Ranges have soft ends and averages soft weights, so that no result jumps.
 */

import type { Edge } from '../atom/types.js';
import { edgeEnergyEv, elementBySymbol } from '../elements/index.js';
import { type Diagnostic, InputError } from '../errors.js';
import { fourierTransform, K_STEP, kFromEnergyEv, uniformKGrid } from '../spectrum/index.js';
import { mergeScans, type Shift } from './align.js';
import { backgroundProjector } from './background.js';
import { applyMap, indexBelow, localFit, mapUncertainty, type SparseMap } from './local-fit.js';
import { estimateNoise, type Noise } from './noise.js';
import { atomicDecay, type Normalised, normalise, steepestRise } from './normalise.js';
import { findGlitches, type Glitch, pointNoise } from './point-noise.js';
import { type SelfAbsorption, selfAbsorptionFactors } from './self-absorption.js';
import type { AbsorptionScan, ChiScan, MeasuredScan } from './types.js';

/** Å⁻¹, half width of the averaging onto the grid: 1.6 grid steps, so that neighbouring points share little noise. */
const AVERAGING = 0.08;
/** eV: wider than this no edge can be placed to the few tenths of an eV that distances ask for. */
const WIDEST_AT_EDGE_EV = 10;
/** eV: over less, the step is uncertain by 5 % or more (a scan of the tests' cut at 120 eV loses 20 %). */
const LEAST_POST_EDGE = 200;
/** Å⁻¹ between points beyond which the scan is called sparse: at 0.1, distances beyond 15 Å fold back. */
const SPARSE = 0.1;
/** The first pass leaves some 5 % in the step, each further one a tenth of it. */
const STEP_PASSES = 2;
/** eV: over a shorter post-edge a parabola, carried back to the edge, errs by more than the straight line it replaces (3 against 1.4 %). */
const SHORT_POST_EDGE = 500;
/** eV about the tabulated edge where the rise is looked for: scales are off by up to 10 eV, oxidation moves an edge up by 20. */
const EDGE_SEARCH = [-25, 35] as const;

export interface ReduceOptions {
  readonly element?: string;
  readonly edge?: Edge;
  /** eV; default the steepest rise near the tabulated edge. */
  readonly e0?: number;
  /** eV relative to E0 */
  readonly pre?: readonly [number, number];
  readonly preForm?: 'line' | 'victoreen';
  readonly post?: readonly [number, number];
  /** Degree of the post-edge polynomial, 0 … 3. Default 2. */
  readonly postDegree?: number;
  /** 'atomic': chi in units of step · (E/E0)^−2.7. 'constant': in units of the step. Default 'atomic'. */
  readonly normalisation?: 'atomic' | 'constant';
  /** Å; default by the first strong peak. */
  readonly backgroundBelow?: number;
  /** k weight of the background's transform. Default 2. */
  readonly backgroundWeight?: number;
  /** Å⁻¹; default where the data end. */
  readonly kMax?: number;
  /** Corrects fluorescence of a thick sample. */
  readonly selfAbsorption?: SelfAbsorption;
}

/** A value the reduction used, and why: given, or which default. */
export interface Choice {
  readonly what: string;
  readonly value: string;
  readonly why: string;
}

export interface Reduction {
  /** 0.05 Å⁻¹ grid (n) */
  readonly k: Float64Array;
  readonly chi: Float64Array;
  /** Standard deviation of chi (n) */
  readonly sigmaChi: Float64Array;
  /** eV; NaN when chi was ready. */
  readonly e0: number;
  /** Edge step, units of mu; NaN when chi was ready. */
  readonly edgeStep: number;
  readonly noise: Noise;
  readonly element?: string;
  readonly edge?: Edge;
  /** Merged absorption and the curves under it, on the energies of the first scan (m); empty when chi was ready. */
  readonly energyEv: Float64Array;
  readonly mu: Float64Array;
  readonly preEdge: { readonly range: readonly [number, number]; readonly form: string; readonly curve: Float64Array };
  readonly postEdge: { readonly range: readonly [number, number]; readonly degree: number; readonly curve: Float64Array };
  /** The background removed; given to `backgroundProjector(k, background)` it treats a prediction alike. */
  readonly background: {
    readonly rLow: number;
    readonly kWeight: number;
    readonly kMax: number;
    readonly coefficients: number;
    readonly curve: Float64Array;
  };
  readonly scans: readonly { readonly title: string; readonly shiftEv: Shift; readonly guess: string }[];
  readonly flagged: readonly (Glitch | Diagnostic)[];
  readonly choices: readonly Choice[];
  readonly warnings: readonly Diagnostic[];
}

/**
 * Edge energy of a scan: given, or the steepest rise, which has to lie near the tabulated edge of the declared element.
 *
 * @throws {InputError} the strongest rise is elsewhere
 */
export function findEdge(scan: AbsorptionScan, element: string | undefined, edge: Edge, choices: Choice[] = []): number {
  const e0 = steepest(scan, element, edge, choices);
  const { energyEv, lines } = scan;
  const gap = energyEv.findIndex((b, i) => {
    const a = energyEv[i - 1] ?? b;
    return b - a > WIDEST_AT_EDGE_EV && a < e0 + 5 && b > e0 - 5;
  });
  if (gap > 0) {
    const place = `${energyEv[gap - 1]!.toFixed(1)} to ${energyEv[gap]!.toFixed(1)} eV (line ${lines[gap]})`;
    throw new InputError(
      `the steepest rise falls into a gap of the scan, ${place}; at the edge points may lie ${WIDEST_AT_EDGE_EV} eV apart at most`,
    );
  }
  return e0;
}

function steepest(scan: AbsorptionScan, element: string | undefined, edge: Edge, choices: Choice[]): number {
  const { energyEv, mu } = scan;
  const [from, to] = [energyEv[0]!, energyEv.at(-1)!];
  const anywhere = steepestRise(energyEv, mu, from + 5, to - 5);
  if (!element) {
    choices.push({
      what: 'E0',
      value: anywhere.e0.toFixed(2),
      why: 'steepest rise of the whole scan; no element was declared to check it',
    });
    return anywhere.e0;
  }
  const tabulated = edgeEnergyEv(elementBySymbol(element).Z, edge);
  const [low, high] = [tabulated + EDGE_SEARCH[0], tabulated + EDGE_SEARCH[1]];
  if (!(from < tabulated && to > tabulated)) {
    throw new InputError(
      `the ${element} ${edge} edge lies at ${tabulated} eV, the scan runs from ${from.toFixed(0)} to ${to.toFixed(0)} eV`,
    );
  }
  const near = steepestRise(energyEv, mu, low, high);
  if (anywhere.slope > 2 * near.slope && (anywhere.e0 < low || anywhere.e0 > high)) {
    throw new InputError(
      `the strongest rise is at ${anywhere.e0.toFixed(1)} eV, but the ${element} ${edge} edge lies at ${tabulated} eV; is the element or the energy scale wrong?`,
    );
  }
  choices.push({ what: 'E0', value: near.e0.toFixed(2), why: `steepest rise near the tabulated ${element} ${edge} edge, ${tabulated} eV` });
  return near.e0;
}

export function rangesFor(
  scan: { readonly energyEv: Float64Array },
  e0: number,
  options: ReduceOptions,
  element: string | undefined,
  edge: Edge,
  choices: Choice[],
) {
  const before = scan.energyEv[0]! - e0;
  let after = scan.energyEv.at(-1)! - e0;
  let end = 'the end of the scan';
  // The post-edge ends before the next edge of the same element
  if (element && (edge === 'L3' || edge === 'L2')) {
    const next =
      edgeEnergyEv(elementBySymbol(element).Z, edge === 'L3' ? 'L2' : 'L1') - edgeEnergyEv(elementBySymbol(element).Z, edge) - 30;
    if (next < after) {
      after = next;
      end = `30 eV before the ${edge === 'L3' ? 'L2' : 'L1'} edge`;
    }
  }
  if (!options.pre && before > -50) {
    throw new InputError(
      `the scan begins ${(-before).toFixed(0)} eV before the edge at ${e0.toFixed(1)} eV; 50 eV are needed for the pre-edge, or state a range`,
    );
  }
  const pre = options.pre ?? ([Math.max(-150, before), -30] as const);
  const post = options.post ?? ([Math.min(100, after / 3), after] as const);
  const form = options.preForm ?? 'line';
  const degree = options.postDegree ?? (post[1] - post[0] < SHORT_POST_EDGE ? 1 : 2);
  const words = ([a, b]: readonly [number, number]) => `${a.toFixed(0)} to ${b.toFixed(0)} eV`;
  choices.push({
    what: 'pre-edge',
    value: `${form}, ${words(pre)}`,
    why: options.pre ? 'given' : 'default: from 150 eV before the edge, or where the scan begins',
  });
  choices.push({
    what: 'post-edge',
    value: `degree ${degree}, ${words(post)}`,
    why: options.post ? 'given' : `default: from 100 eV above the edge, where the strong structure is over, to ${end}`,
  });
  return { pre, post, form, degree, after };
}

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

function reduceAbsorption(scans: readonly AbsorptionScan[], options: ReduceOptions): Reduction {
  const choices: Choice[] = [];
  const first = scans[0]!;
  const element = options.element ?? first.element;
  const edge = options.edge ?? first.edge ?? 'K';
  const warnings: Diagnostic[] = scans.flatMap((scan) => scan.diagnostics);
  for (const scan of scans) {
    if (scan.element && scan.element !== first.element)
      throw new InputError(`reduce: the scans are of ${first.element} and of ${scan.element}`);
  }
  let e0: number;
  if (options.e0 === undefined) e0 = findEdge(first, element, edge, choices);
  else {
    e0 = options.e0;
    choices.push({ what: 'E0', value: e0.toFixed(2), why: 'given' });
  }
  const { energyEv, mu, skipped, standardError, shifts } = mergeScans(scans, e0);
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
  if (options.selfAbsorption) {
    factor = selfAbsorptionFactors(decay, options.selfAbsorption);
    choices.push({
      what: 'self-absorption',
      value: `chi raised by ${(100 * (factor[indexBelow(energyEv, e0)]! - 1)).toFixed(0)} % at the edge`,
      why: 'given',
    });
  } else if (first.detection === 'fluorescence') warnings.push(selfAbsorptionRisk(energyEv, mu, e0, shape.edgeStep));

  const kPoints = energyEv.map((e) => kFromEnergyEv(e - e0));
  const kEnd = Math.min(kPoints.at(-1)!, kFromEnergyEv(after));
  const kMax = Math.min(options.kMax ?? Infinity, kEnd);
  if (!(kMax >= 5)) {
    throw new InputError(`the scan reaches k = ${kMax.toFixed(1)} Å⁻¹ above the edge at ${e0.toFixed(1)} eV; 5 Å⁻¹ are needed`);
  }
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
  const unitOf = (step: number) => decay.map((a, i) => (step * (constant ? 1 : a)) / factor[i]!);
  const rawOf = ({ edgeStep, postEdge }: Normalised) => {
    const unit = unitOf(edgeStep);
    return mu.map((y, i) => (y - postEdge[i]!) / unit[i]!);
  };
  let onGrid = applyMap(map, rawOf(shape));
  const limit = options.backgroundBelow ? { rLow: options.backgroundBelow, why: 'given' } : backgroundLimit(k, onGrid, last);
  choices.push({ what: 'background below', value: `${limit.rLow.toFixed(2)} Å`, why: limit.why });
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
  const flagged = findGlitches(single, energyEv, first.lines.subarray(skipped), (e) => e < e0 - 25 || e > e0 + 40);
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
    scans: scans.map((scan, s) => ({ title: scan.title, shiftEv: shifts[s]!, guess: scan.guess })),
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

/** Noise in the window a comparison would use, and σ of each point scaled so that both speak of the same noise. */
function noiseOf(
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
      ? `fluorescence of a concentrated sample (the edge stands ${contrast.toFixed(0)} times above what lies before it): self-absorption may damp chi; state the sample's absorption to correct it`
      : 'fluorescence: in a thick, concentrated sample self-absorption damps chi; nothing was corrected';
  return { code: 'self-absorption-risk', message };
}

/** chi that stands on the grid already is taken as it is: averaging it again would damp it. */
function samePoints(from: Float64Array, k: Float64Array): SparseMap | undefined {
  const first = k.map((q) => from.findIndex((x) => Math.abs(x - q) < 1e-6));
  if (first.includes(-1)) return undefined;
  return {
    rows: k.length,
    first: Int32Array.from(first),
    start: Int32Array.from({ length: k.length + 1 }, (_, i) => i),
    weights: k.map(() => 1),
  };
}

/** Ready chi(k): brought onto the grid and averaged; nothing is projected, since the reduction is not known. */
function reduceChi(scans: readonly ChiScan[], options: ReduceOptions): Reduction {
  const end = Math.min(...scans.map((scan) => scan.k.at(-1)!));
  const begin = Math.max(...scans.map((scan) => scan.k[0]!));
  const kMax = Math.min(options.kMax ?? Infinity, end);
  if (!(kMax - begin >= 4))
    throw new InputError(`chi(k) runs from ${begin.toFixed(2)} to ${kMax.toFixed(2)} Å⁻¹; a range of 4 Å⁻¹ is needed`);
  const k = uniformKGrid(kMax).filter((q) => q >= begin - 1e-9);
  const onGrid = scans.map((scan) => {
    const map = samePoints(scan.k, k) ?? localFit(scan.k, k, AVERAGING, 0);
    return { map, chi: applyMap(map, scan.chi), sigma: pointNoise(scan.k, scan.chi).sigma };
  });
  const n = scans.length;
  const chi = k.map((_, i) => onGrid.reduce((sum, scan) => sum + scan.chi[i]!, 0) / n);
  const { map, sigma } = onGrid[0]!;
  const { noise, sigmaChi } = noiseOf(k, chi, { map, sigma: sigma.map((s) => s / Math.sqrt(n)), repeated: false });
  const none = new Float64Array(0);
  const zero: readonly [number, number] = [0, 0];
  return {
    k,
    chi,
    sigmaChi,
    e0: Number.NaN,
    edgeStep: Number.NaN,
    noise,
    energyEv: none,
    mu: none,
    preEdge: { range: zero, form: 'none', curve: none },
    postEdge: { range: zero, degree: 0, curve: none },
    background: { rLow: 0, kWeight: 0, kMax, coefficients: 0, curve: none },
    scans: scans.map((scan) => ({ title: scan.title, shiftEv: { value: 0, sd: 0 }, guess: scan.guess })),
    flagged: [],
    choices: [
      { what: 'background', value: 'none removed', why: 'chi(k) was ready; its normalisation and background are those of whoever made it' },
    ],
    warnings: [
      ...scans.flatMap((scan) => scan.diagnostics),
      { code: 'ready-chi', message: 'chi(k) came ready: whether its step was constant or atomic is not known, nor its background' },
    ],
  };
}
