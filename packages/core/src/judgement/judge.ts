/**
 * From coordinates and measured spectra to a finding: prior prediction, best point, test, overlong distances, rivals, ranking.
 * Å, Å⁻¹, Å², eV, K.
 */
import { edgeEnergyEv, elementBySymbol, elementSymbol } from '../elements/index.js';
import { InputError, type Running } from '../errors.js';
import type { Reduction } from '../evidence/index.js';
import { DEFAULTS } from '../predict/options.js';
import type { StageClock } from '../predict/site-signal.js';
import { ENERGY_ORIGIN, ENERGY_ORIGIN_UNSURE, type EnergyOrigin } from '../predict/unknowns.js';
import { informationContent } from '../spectrum/index.js';
import type { Structure } from '../structure/types.js';
import { judgeCandidate, type Settings } from './candidate.js';
import { dataVector } from './data-vector.js';
import { MODEL_ERROR } from './model-error.js';
import { groupsOf } from './ranking.js';
import type { SpectrumRequest } from './trial.js';
import type { CandidateJudgement, Evidence, EvidenceSummary, Judgement, JudgeOptions } from './types.js';

export interface Candidate {
  /** Name of the file, for the result. */
  readonly file: string;
  readonly structure: Structure;
}

export interface JudgeContext {
  readonly version: string;
  /** Clock in seconds; default none (all times zero). */
  readonly now?: () => number;
  readonly running?: Running;
}

/** Å⁻¹: where the default k range begins; below it theory and background are least sure. */
const K_START = 3;
/** Å⁻¹: how far the theory is computed at most. */
const K_END = 20;
/** Å: default R range, and how far it stays below the longest path, whose peak lies some 0.4 Å short of it. */
const R_START = 1;
const R_END = 4;
const R_MARGIN = 1;
const K_WEIGHT = 3;
/** Of the edge step: where the steepest rise lies higher than this it sits on a white line. */
const WHITE_LINE = 0.8;

/**
 * Judges every candidate against all data sets together and ranks them.
 *
 * @throws {InputError} no candidate or evidence, candidate without the absorber, window outside the data or too small, edge of another element
 * @throws {CancelledError} asked to stop
 */
export function judge(
  candidates: readonly Candidate[],
  evidence: readonly Evidence[],
  options: JudgeOptions,
  { version, now = () => 0, running }: JudgeContext,
): Judgement {
  if (candidates.length === 0) throw new InputError('judge: a candidate structure is needed');
  if (evidence.length === 0) throw new InputError('judge: a measured spectrum is needed');
  const started = now();
  const settings: Settings = {
    options,
    modelError: checked(options.modelError ?? MODEL_ERROR, 'model error', 0, 1),
    spread: checked(options.sampleSpread ?? 1, 'factor of the sample spread', 0, 20),
  };
  if (options.coordinateSd !== undefined) checked(options.coordinateSd, 'coordinate uncertainty in Å', 0, 1);
  const requests = evidence.map((set) => requestOf(set, options, settings.modelError));
  const clock: StageClock & { prediction: number; rivals: number } = {
    now,
    atoms: 0,
    potentials: 0,
    phases: 0,
    paths: 0,
    prediction: 0,
    rivals: 0,
  };
  const judged: CandidateJudgement[] = candidates.map(({ file, structure }) => {
    try {
      return judgeCandidate(file, structure, requests, settings, clock, running);
    } catch (error) {
      if (error instanceof InputError) throw new InputError(`${file}: ${error.message}`);
      throw error;
    }
  });
  const total = now() - started;
  return {
    program: { name: 'ringtrue', version },
    evidence: requests.map(summaryOf(settings.modelError)),
    candidates: judged,
    groups: groupsOf(judged),
    warnings: evidence.flatMap(({ reduction }) => reduction.warnings),
    timing: { prediction: clock.prediction, judgement: total - clock.prediction - clock.rivals, rivals: clock.rivals, total },
  };
}

function requestOf(set: Evidence, options: JudgeOptions, modelError: number): SpectrumRequest {
  const { reduction, file, absorber } = set;
  const edge = set.edge ?? reduction.edge ?? 'K';
  const temperature = checked(set.temperature ?? DEFAULTS.temperature, 'temperature in K', 0, 3000);
  checkEdge(set, edge);
  const radius = options.radius ?? DEFAULTS.radius;
  const kRange = set.kRange ?? defaultKRange(reduction, file);
  const rRange = set.rRange ?? [R_START, Math.min(R_END, radius - R_MARGIN)];
  if (rRange[1] > radius + 0.5)
    throw new InputError(
      `${file}: the R range ends at ${rRange[1]} Å, beyond the longest path of ${radius} Å; a larger radius or a shorter range is wanted`,
    );
  if (kRange[1] > K_END) throw new InputError(`${file}: the k range ends at ${kRange[1]} Å⁻¹; the theory is computed to ${K_END} Å⁻¹`);
  const vector = dataVector(upTo(reduction, K_END), { kRange, rRange, kWeight: set.kWeight ?? K_WEIGHT }, modelError, file);
  return { vector, absorber, edge, temperature, file, energyOrigin: expectedOrigin(reduction) };
}

/** Where the data say of themselves which edge they are, it must be the one judged. */
function checkEdge({ reduction, file, absorber }: Evidence, edge: NonNullable<Evidence['edge']>): void {
  const element = elementSymbol(absorber.trim());
  if (reduction.element && element && reduction.element !== element)
    throw new InputError(`${file}: the spectrum says it is of ${reduction.element}; the absorber asked for is ${element}`);
  if (reduction.edge && reduction.edge !== edge)
    throw new InputError(`${file}: the spectrum says it is of the ${reduction.edge} edge; ${edge} was asked for`);
  if (element && Number.isFinite(reduction.e0)) {
    const tabulated = edgeEnergyEv(elementBySymbol(element).Z, edge);
    if (Math.abs(tabulated - reduction.e0) > 50)
      throw new InputError(
        `${file}: its edge lies at ${reduction.e0.toFixed(1)} eV, that of ${element} ${edge} at ${tabulated.toFixed(1)} eV; the spectrum is of another element or edge`,
      );
  }
}

function defaultKRange({ k, noise }: Reduction, file: string): readonly [number, number] {
  const end = Math.floor(Math.min(noise.kMaxUseful, k.at(-1)!, K_END) / 0.05 + 1e-6) * 0.05;
  const begin = Math.max(K_START, k[0]!);
  if (!(end - begin >= 2))
    throw new InputError(
      `${file}: oscillations stand above the noise only up to ${end.toFixed(2)} Å⁻¹; give a k range if you know better, or measure longer`,
    );
  return [begin, Number(end.toFixed(2))];
}

/** The reduction without its points beyond kMax. */
function upTo(reduction: Reduction, kMax: number): Reduction {
  const { k, chi, sigmaChi, background } = reduction;
  const n = k.findLastIndex((value) => value <= kMax + 1e-9) + 1;
  if (n === k.length) return reduction;
  return {
    ...reduction,
    k: k.slice(0, n),
    chi: chi.slice(0, n),
    sigmaChi: sigmaChi.slice(0, n),
    background: { ...background, kMax: Math.min(background.kMax, kMax) },
  };
}

/** Unsure where chi(k) came ready, since its origin is that of whoever made it, and where the steepest rise sits on a white line. */
function expectedOrigin({ energyEv, mu, preEdge, e0, edgeStep }: Reduction): EnergyOrigin {
  if (!Number.isFinite(e0) || energyEv.length === 0) return ENERGY_ORIGIN_UNSURE;
  const i = energyEv.findIndex((energy) => energy >= e0);
  const height = (mu[i]! - preEdge.curve[i]!) / edgeStep;
  return height > WHITE_LINE ? ENERGY_ORIGIN_UNSURE : ENERGY_ORIGIN;
}

function summaryOf(modelError: number): (request: SpectrumRequest) => EvidenceSummary {
  return ({ vector, absorber, edge, temperature, file }) => {
    const { kRange, rRange, kWeight } = vector.window;
    const { independentPoints, independentPointsStern, resolution } = informationContent(kRange, rRange);
    const { epsilonK, epsilonR } = vector;
    return {
      file,
      absorber,
      edge,
      temperature,
      kRange,
      rRange,
      kWeight,
      independentPoints,
      independentPointsStern,
      resolution,
      epsilonK,
      epsilonR,
      modelError,
    };
  };
}

/** @throws {InputError} outside its limits */
function checked(value: number, what: string, low: number, high: number): number {
  if (!(value >= low && value <= high)) throw new InputError(`the ${what} must lie between ${low} and ${high}, got ${value}`);
  return value;
}
