/**
 * χ averaged over frames: ⟨χ(k)⟩ with phase shifts from the mean surroundings and every frame's own geometry, no σ² and no Gaussian
 * anywhere; cumulants of each half path length beside it. No I/O: whoever reads the frames feeds them, in order, and may have
 * blocks of them summed in any worker (ensemble-sums.ts).
 *
 *   survey.add(frame) …   →   plan = planEnsemble(survey)   →   blockSums(plan.block, frames) …   →   average.add(sums) …, in order
 *
 * Å, Å⁻¹, Å², eV at this door.
 */
import { BOHR_ANGSTROM, EV_PER_K_SQUARED } from '../constants.js';
import { type Cumulants, suggestThermalModel } from '../disorder/index.js';
import { checkRunning, type Diagnostic, InputError, type Running } from '../errors.js';
import { OVERLAP_RADIUS, type ScatteringTable } from '../scattering/index.js';
import { PathSignal, PathSum, uniformKGrid } from '../spectrum/index.js';
import { findSites } from '../structure/index.js';
import type { Structure } from '../structure/types.js';
import { areaOf, assemble, type Contribution, type DescribedSite, type PredictContext, siteWarnings } from './describe.js';
import { EnsembleSurvey, frameSize, packFrame } from './ensemble-frames.js';
import { distanceTable, fitPolynomials, routeAtoms, routeGroup } from './ensemble-routes.js';
import {
  addSums,
  type BlockPlan,
  type BlockSums,
  blockSums,
  emptySums,
  SiteKernel,
  type SitePlan,
  type SiteSums,
} from './ensemble-sums.js';
import { ensembleWarnings } from './ensemble-warnings.js';
import { checkOptions, DEFAULTS } from './options.js';
import { type SiteSignal, type StageClock, siteSignal } from './site-signal.js';
import type { EnsembleSummary, Prediction, PredictOptions } from './types.js';

/** Frames of one block: the unit of work, and of the order of summation. */
export const BLOCK_FRAMES = 32;
/** Below so many frames the exact amplitudes of all cost less than a polynomial fitted to samples of them. */
const EXACT_BELOW = 96;
/** Sample frames used: the longest polynomial has 20 terms to fit. */
const SAMPLES = 56;
/** Every so many sample frames one is kept from the fit, to test it. */
const TEST_EVERY = 8;
/** Parts for the statistical error: joined in pairs beyond twice this. */
const PARTS = 16;

export interface EnsembleOptions {
  /** Amplitudes of multiple scattering computed in every frame, not followed by a fitted polynomial. */
  readonly exact?: boolean;
}

export interface EnsemblePlan {
  /** What workers need; plain data. */
  readonly block: BlockPlan;
  readonly structure: Structure;
  readonly options: PredictOptions;
  readonly signals: readonly SiteSignal[];
  readonly multipleScattering: EnsembleSummary['multipleScattering'];
  readonly expansionError: number;
  readonly testFrames: number;
  readonly warnings: readonly Diagnostic[];
  readonly clock: StageClock;
  readonly started: number;
}

/**
 * Sites, paths and phase shifts of the mean surroundings, and how the amplitudes follow the geometry.
 *
 * @throws {InputError} fewer than two frames, absorber absent, options out of range, a mean in which atoms coincide
 * @throws {CancelledError} asked to stop
 */
export function planEnsemble(
  survey: EnsembleSurvey,
  wanted: Partial<PredictOptions> & { readonly absorber: string },
  { exact = false }: EnsembleOptions,
  context: PredictContext,
): EnsemblePlan {
  const options: PredictOptions = { ...DEFAULTS, ...wanted, thermal: 'none' };
  checkOptions(options);
  if (options.electricVector) {
    throw new InputError(
      'averages over frames are computed for light of all directions; leave the electric vector out, or predict one structure',
    );
  }
  const now = context.now ?? (() => 0);
  const clock: StageClock = { now, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  const started = now();
  const structure = survey.mean();
  const sites = findSites(structure, { absorber: options.absorber, radius: options.radius + OVERLAP_RADIUS });
  const signals = sites.map((site) => siteSignal(site, options, clock, context.running));
  const plain = signals.map((signal): SitePlan => {
    const { site, table, paths, kindOfAtom } = signal;
    const groups = paths.map((path) => routeGroup(site, path, kindOfAtom));
    const reach = new Map<number, [number, number]>();
    for (const { legs, spheres, halfLength } of groups) {
      if (legs !== 2) continue;
      const [low, high] = reach.get(spheres[1]!) ?? [halfLength, halfLength];
      reach.set(spheres[1]!, [Math.min(low, halfLength), Math.max(high, halfLength)]);
    }
    const single = table.spheres.map((_, sphere) => {
      const span = reach.get(sphere);
      return span && distanceTable(table, sphere, ...span);
    });
    return { atoms: routeAtoms(structure, site), table, groups, single };
  });
  const before = now();
  const block: BlockPlan = {
    atomCount: structure.atoms.length,
    frameSize: frameSize(structure),
    ...(structure.cell ? { repeats: structure.repeats ?? [true, true, true] } : {}),
    sites: plain,
  };
  const isMultiple = plain.some(({ groups }) => groups.some(({ legs }) => legs > 2));
  const isExpanded = isMultiple && !exact && survey.count >= EXACT_BELOW;
  const fitted = isExpanded ? expand(block, survey.samples, context.running) : { block, error: 0, tests: 0 };
  clock.paths += now() - before;
  return {
    block: fitted.block,
    structure,
    options,
    signals,
    multipleScattering: isExpanded ? 'expanded' : isMultiple ? 'exact' : 'none',
    expansionError: fitted.error,
    testFrames: fitted.tests,
    warnings: [
      ...survey.first.diagnostics,
      ...sites.flatMap((site) => [...site.diagnostics, ...siteWarnings(site, options.radius)]),
      ...ensembleWarnings(block, survey.samples, survey.count),
    ],
    clock,
    started,
  };
}

/** Polynomials fitted to most samples and tested, whole χ against whole χ, on the others. */
function expand(
  block: BlockPlan,
  all: readonly Float64Array[],
  running: Running | undefined,
): { block: BlockPlan; error: number; tests: number } {
  const samples = Array.from(
    { length: Math.min(SAMPLES, all.length) },
    (_, i) => all[Math.floor((i * all.length) / Math.min(SAMPLES, all.length))]!,
  );
  const isTest = (_: unknown, i: number): boolean => i % TEST_EVERY === TEST_EVERY / 2;
  const tests = samples.filter(isTest);
  const rest = samples.filter((_, i) => !isTest(_, i));
  const sites = block.sites.map((site, i): SitePlan => {
    const kernel = new SiteKernel(block, site);
    const places = rest.map((frame) => kernel.places(frame).slice());
    const groups = fitPolynomials(site.table, site.groups, places, {
      ...running,
      onProgress: (stage, part) => running?.onProgress?.(stage, (i + part) / block.sites.length),
    });
    return { ...site, groups };
  });
  const fitted: BlockPlan = { ...block, sites };
  let difference = 0;
  let whole = 0;
  for (const [n, frame] of tests.entries()) {
    checkRunning(running);
    running?.onProgress?.('test of the expansion', n / tests.length);
    const [a, b] = [blockSums(block, frame), blockSums(fitted, frame)];
    block.sites.forEach((site, i) => {
      const [x, y] = [coarseChi(site, a.sites[i]!), coarseChi(site, b.sites[i]!)];
      for (let k = 0; k < x.length; k++) {
        const ki = site.table.k[k]!;
        if (ki < 3) continue;
        difference += ki ** 4 * (x[k]! - y[k]!) ** 2;
        whole += ki ** 4 * x[k]! ** 2;
      }
    });
  }
  return { block: fitted, error: whole > 0 ? Math.sqrt(difference / whole) : 0, tests: tests.length };
}

/** Σ over paths at the table's own k. */
function coarseChi({ table, groups }: SitePlan, { re, im }: SiteSums): Float64Array {
  const nk = table.k.length;
  const chi = new Float64Array(nk);
  groups.forEach(({ halfLength }, g) => {
    for (let k = 0; k < nk; k++) {
      const phase = (2 * table.pRe[k]! * halfLength) / BOHR_ANGSTROM;
      chi[k]! += re[g * nk + k]! * Math.sin(phase) + im[g * nk + k]! * Math.cos(phase);
    }
  });
  return chi;
}

/** Adds blocks up, in the order in which they are given: the same bits for the same order. */
export class EnsembleAverage {
  readonly plan: EnsemblePlan;
  readonly k: Float64Array;
  frames = 0;
  private readonly totals: SiteSums[];
  /** χ summed over the frames of successive parts. */
  private parts: { frames: number; chi: Float64Array }[] = [];
  private partBlocks = 1;
  private blocks = 0;

  constructor(plan: EnsemblePlan) {
    this.plan = plan;
    this.k = uniformKGrid(plan.options.kMax);
    this.totals = plan.block.sites.map(emptySums);
  }

  add(sums: BlockSums): void {
    sums.sites.forEach((site, i) => void addSums(this.totals[i]!, site));
    const chi = this.coarse(sums.sites);
    if (this.blocks % this.partBlocks === 0) this.parts.push({ frames: 0, chi: new Float64Array(chi.length) });
    const part = this.parts.at(-1)!;
    part.frames += sums.frames;
    for (let i = 0; i < chi.length; i++) part.chi[i]! += chi[i]!;
    this.frames += sums.frames;
    this.blocks++;
    if (this.parts.length === 2 * PARTS && this.blocks % this.partBlocks === 0) {
      this.parts = Array.from({ length: PARTS }, (_, p) => joined(this.parts[2 * p]!, this.parts[2 * p + 1]!));
      this.partBlocks *= 2;
    }
  }

  /** ⟨χ⟩ on the 0.05 Å⁻¹ grid. */
  chi(): Float64Array {
    const { plan, k, frames } = this;
    const chi = new Float64Array(k.length);
    const room = new Float64Array(k.length);
    plan.signals.forEach((signal, i) => {
      const { signals } = this.averaged(signal, plan.block.sites[i]!, this.totals[i]!, frames);
      new PathSum(signals, signal.wave, k, plan.options.e0, signal.table.k[0]!).sum(
        signals.map(() => NO_DISORDER),
        plan.options.s02,
        room,
      );
      for (let j = 0; j < k.length; j++) chi[j]! += signal.site.weight * room[j]!;
    });
    return chi;
  }

  /**
   * @param renewed  χ with phase shifts and paths renewed along the frames, which then is the result's
   * @throws {InputError} no path at all
   */
  result(context: PredictContext, renewed?: { readonly every: number; readonly chi: Float64Array }): Prediction {
    const { plan, k, frames } = this;
    const { structure, options, signals, clock, started } = plan;
    const gaussian = new Float64Array(k.length);
    const sites = signals.map((signal, i): DescribedSite => {
      const averaged = this.averaged(signal, plan.block.sites[i]!, this.totals[i]!, frames);
      const sum = new PathSum(averaged.signals, signal.wave, k, options.e0, signal.table.k[0]!);
      const mean = new PathSum(signal.signals, signal.wave, k, options.e0, signal.table.k[0]!);
      const room = new Float64Array(k.length);
      const contributions = averaged.paths.map((path, index): Contribution => {
        const cumulants = averaged.cumulants[index]!;
        const chi = sum.path(index, NO_DISORDER, options.s02, new Float64Array(k.length)).map((value) => value * signal.site.weight);
        const shift = cumulants.mean - signal.paths[index]!.halfLength;
        mean.path(index, { sigma2: cumulants.variance, c3: 0, shift }, options.s02, room);
        for (let j = 0; j < k.length; j++) gaussian[j]! += signal.site.weight * room[j]!;
        const third = Number.isFinite(cumulants.third) ? cumulants.third : 0;
        return {
          site: { ...signal, paths: averaged.paths, signals: averaged.signals },
          index,
          weight: signal.site.weight,
          disorder: { sigma2: cumulants.variance, c3: third },
          from: 'ensemble',
          isNearest: false,
          chi,
          area: areaOf(chi, k, options.kMax),
          cumulants: { ...cumulants, mean: path.halfLength },
        };
      });
      const thermal = {
        model: 'ensemble' as const,
        inputs: { frames, 'multiple scattering': plan.multipleScattering },
        suggested: suggestThermalModel(signal.site, structure),
      };
      return { signal, thermal, contributions };
    });
    const { warnings } = plan;
    return assemble(structure, options, context, { k, sites, warnings, clock, started }, (chi) => ({
      ...(renewed ? { chi: renewed.chi } : {}),
      ensemble: {
        frames,
        chiError: this.error(),
        parts: this.parts.length,
        multipleScattering: plan.multipleScattering,
        expansionError: plan.expansionError,
        testFrames: plan.testFrames,
        beyondGaussian: relativeDifference(k, gaussian, chi),
        ...(renewed ? { renewed: { every: renewed.every, change: relativeDifference(k, renewed.chi, chi) } } : {}),
      },
    }));
  }

  /** Sum over frames of χ at the scattering table's own k. */
  private coarse(sums: readonly SiteSums[]): Float64Array {
    const { block, signals, options } = this.plan;
    const chi = new Float64Array(block.sites[0]!.table.k.length);
    block.sites.forEach((site, i) => {
      const own = coarseChi(site, sums[i]!);
      for (let k = 0; k < chi.length; k++) chi[k]! += options.s02 * signals[i]!.site.weight * own[k]!;
    });
    return chi;
  }

  /** Every path's mean signal, at its mean half length, and the cumulants. */
  private averaged({ paths, wave }: SiteSignal, { table, groups }: SitePlan, sums: SiteSums, frames: number) {
    const nk = table.k.length;
    const cumulants: Cumulants[] = [];
    const means = paths.map((path, g) => {
      const { weights, halfLength } = groups[g]!;
      const own = cumulantsOf(sums.moments.subarray(4 * g, 4 * g + 4), halfLength, weights, frames);
      cumulants.push(own);
      return { ...path, halfLength: own.mean };
    });
    const signals = means.map((path, g) => {
      const { halfLength } = groups[g]!;
      const { re, im } = rephased(table, sums.re.subarray(g * nk, (g + 1) * nk), sums.im.subarray(g * nk, (g + 1) * nk), halfLength);
      for (let k = 0; k < nk; k++) {
        re[k]! /= frames * path.degeneracy;
        im[k]! /= frames * path.degeneracy;
      }
      return new PathSignal(path, table, wave, re, im);
    });
    return { paths: means, signals, cumulants };
  }

  /** Standard error of the mean from the spread of the parts, each weighing by its frames; NaN where one part is all there is. */
  private error(): Float64Array {
    const { parts, k, frames, plan } = this;
    const { table } = plan.signals[0]!;
    const n = parts.length;
    const own = table.k.map((_, i) => {
      const mean = parts.reduce((sum, part) => sum + part.chi[i]!, 0) / frames;
      const square = parts.reduce((sum, part) => sum + (part.frames / frames) * (part.chi[i]! / part.frames - mean) ** 2, 0);
      return n > 1 ? Math.sqrt(square / (n - 1)) : Number.NaN;
    });
    return k.map((value) => {
      const theory = Math.sqrt(Math.max(table.k[0]! ** 2, value * value - plan.options.e0 / EV_PER_K_SQUARED));
      const next = Math.max(
        1,
        Math.min(
          table.k.length - 1,
          table.k.findIndex((t) => t >= theory),
        ),
      );
      const part = (theory - table.k[next - 1]!) / (table.k[next]! - table.k[next - 1]!);
      return own[next - 1]! + part * (own[next]! - own[next - 1]!);
    });
  }
}

const NO_DISORDER = { sigma2: 0, c3: 0 };

function joined(a: { frames: number; chi: Float64Array }, b: { frames: number; chi: Float64Array }) {
  return { frames: a.frames + b.frames, chi: a.chi.map((value, i) => value + b.chi[i]!) };
}

/** The reference phase put back: A = (re + i im) e^{2i Re p R₀}. */
function rephased(table: ScatteringTable, re: Float64Array, im: Float64Array, halfLength: number) {
  const out = { re: new Float64Array(re.length), im: new Float64Array(re.length) };
  for (let k = 0; k < re.length; k++) {
    const phase = (2 * table.pRe[k]! * halfLength) / BOHR_ANGSTROM;
    const c = Math.cos(phase);
    const s = Math.sin(phase);
    out.re[k] = re[k]! * c - im[k]! * s;
    out.im[k] = re[k]! * s + im[k]! * c;
  }
  return out;
}

/** Unbiased cumulants (Fisher's k-statistics) from weighted power sums about a reference; frames and routes taken as independent. */
function cumulantsOf(sums: Float64Array, reference: number, weights: Float64Array, frames: number): Cumulants {
  const total = frames * weights.reduce((a, b) => a + b, 0);
  const n = frames * weights.length;
  const [a, b, c, d] = [sums[0]! / total, sums[1]! / total, sums[2]! / total, sums[3]! / total];
  const m2 = Math.max(0, b - a * a);
  const m3 = c - 3 * a * b + 2 * a ** 3;
  const m4 = d - 4 * a * c + 6 * a * a * b - 3 * a ** 4;
  const variance = n > 1 ? (m2 * n) / (n - 1) : m2;
  return {
    count: n,
    mean: reference + a,
    variance,
    third: n > 2 ? (m3 * n * n) / ((n - 1) * (n - 2)) : Number.NaN,
    fourth: n > 3 ? (n * n * ((n + 1) * m4 - 3 * (n - 1) * m2 * m2)) / ((n - 1) * (n - 2) * (n - 3)) : Number.NaN,
    error: { mean: Math.sqrt(variance / n), variance: Math.sqrt(Math.max(0, m4 - m2 * m2) / n) },
  };
}

/** rms of k²(a − b) over rms of k²b, from 3 Å⁻¹ on. */
function relativeDifference(k: Float64Array, a: Float64Array, b: Float64Array): number {
  let difference = 0;
  let whole = 0;
  for (let i = 0; i < k.length; i++) {
    if (k[i]! < 3) continue;
    difference += k[i]! ** 4 * (a[i]! - b[i]!) ** 2;
    whole += k[i]! ** 4 * b[i]! ** 2;
  }
  return whole > 0 ? Math.sqrt(difference / whole) : 0;
}

/** Frames that are all at hand, averaged here: for pages and scripts. Throws as `planEnsemble`, and for frames of other atoms. */
export function predictEnsemble(
  structure: Structure,
  wanted: Partial<PredictOptions> & { readonly absorber: string },
  ensemble: EnsembleOptions,
  context: PredictContext,
): Prediction {
  const size = frameSize(structure);
  const all = [structure.atoms, ...structure.moreFrames];
  const packed = new Float64Array(size * all.length);
  const survey = new EnsembleSurvey(structure, wanted.absorber, wanted.radius ?? DEFAULTS.radius);
  for (const [f, atoms] of all.entries()) {
    packFrame(structure, { atoms }, f + 1, packed, f * size);
    survey.add(packed.subarray(f * size, (f + 1) * size));
  }
  const plan = planEnsemble(survey, wanted, ensemble, context);
  const average = new EnsembleAverage(plan);
  for (let f = 0; f < all.length; f += BLOCK_FRAMES) {
    checkRunning(context.running);
    context.running?.onProgress?.('frames', f / all.length);
    average.add(blockSums(plan.block, packed.subarray(f * size, Math.min(f + BLOCK_FRAMES, all.length) * size)));
  }
  return average.result(context);
}
