/** Trials of the judgement against drawn truths, and what is counted of them. */
import { judgeTrial } from '../../packages/core/src/judgement/candidate.js';
import { dataVector } from '../../packages/core/src/judgement/data-vector.js';
import { minimise } from '../../packages/core/src/judgement/minimise.js';
import { logEvidence } from '../../packages/core/src/judgement/posterior.js';
import type { TrialSite, TrialSpectrum } from '../../packages/core/src/judgement/trial.js';
import { trialModel } from '../../packages/core/src/judgement/trial-model.js';
import type { CandidateJudgement } from '../../packages/core/src/judgement/types.js';
import { normalDeviates } from '../../packages/core/src/numerics/random.js';
import { type CalibrationSystem, R_RANGE } from './systems.js';
import { drawTruth, type TruthOptions } from './truth.js';

export interface Cell extends TruthOptions {
  readonly system: CalibrationSystem['name'];
}

export interface CellResult extends Cell {
  readonly trials: number;
  /** Mean X/N_idp and mean p of the true structure. */
  readonly xPerPoint: number;
  readonly meanP: number;
  /** Parts of the trials: findings on the true structure. */
  readonly falseAlarm: number;
  readonly undecided: number;
  readonly strained: number;
  /** Parts in which the first-shell shift of the truth (0) lies within one and two posterior standard deviations. */
  readonly covered68: number;
  readonly covered95: number;
  /** Mean posterior standard deviation of the first-shell shift, Å. */
  readonly meanSd: number;
  /** Parts in which a first shell 0.05 Å too long was called overlong; in which the finding was in tension or worse. */
  readonly overlongFound: number;
  readonly overlongRejected: number;
  readonly overlongFalse: number;
  /** Part in which the structure with one neighbour missing had the larger evidence, and by more than ln 10. */
  readonly wrongAhead: number;
  readonly wrongPreferred: number;
}

const OVERLONG = 0.05;

/** Runs one cell; the same seed gives the same figures. */
export function runCell(system: CalibrationSystem, cell: Cell, trials: number, seed: number): CellResult {
  const normal = normalDeviates(seed);
  const gains: number[] = [];
  const right = Array.from({ length: trials }, () => {
    const { judged, spectrum } = judgeDrawn(system, cell, normal);
    gains.push(evidenceOf({ ...system.wrong, vector: spectrum.vector, sites: withSd(system.wrong.sites, cell) }) - judged.logEvidence);
    return judged;
  });
  const long = Array.from({ length: trials }, () => judgeDrawn(system, { ...cell, overlong: OVERLONG }, normal).judged);
  const part = (list: readonly CandidateJudgement[], is: (c: CandidateJudgement) => boolean) => list.filter(is).length / list.length;
  const mean = (of: (c: CandidateJudgement) => number) => right.reduce((sum, c) => sum + of(c), 0) / right.length;
  const first = ({ overlength }: CandidateJudgement) => overlength.shells[0]!;
  const isRejected = ({ finding }: CandidateJudgement) => finding === 'in-tension' || finding === 'inconsistent';
  return {
    ...cell,
    trials,
    xPerPoint: mean((c) => c.x / c.independentPoints),
    meanP: mean((c) => c.p),
    falseAlarm: part(right, isRejected),
    undecided: part(right, (c) => c.finding === 'undecided'),
    strained: part(right, (c) => c.finding === 'consistent-under-strain'),
    covered68: part(right, (c) => Math.abs(first(c).z) <= 1),
    covered95: part(right, (c) => Math.abs(first(c).z) <= 1.96),
    meanSd: mean((c) => first(c).sd),
    overlongFound: part(long, (c) => c.overlength.verdict === 'overlong'),
    overlongRejected: part(long, isRejected),
    overlongFalse: part(right, (c) => c.overlength.verdict === 'overlong' || c.overlength.verdict === 'too-short'),
    wrongAhead: gains.filter((gain) => gain > 0).length / trials,
    wrongPreferred: gains.filter((gain) => gain > Math.log(10)).length / trials,
  };
}

const withSd = (sites: readonly TrialSite[], { coordinateSd }: TruthOptions): TrialSite[] =>
  sites.map((site) => ({ ...site, distanceSd: () => coordinateSd }));

function evidenceOf(spectrum: TrialSpectrum): number {
  const model = trialModel([spectrum], 1);
  return logEvidence(minimise(model, new Float64Array(model.parameters)), model.bounded);
}

/** One truth drawn and the candidate judged against it. */
export function judgeDrawn(
  system: CalibrationSystem,
  options: TruthOptions,
  normal: () => number,
): { judged: CandidateJudgement; spectrum: TrialSpectrum } {
  const reduction = drawTruth(system, options, normal);
  const vector = dataVector(reduction, { kRange: [3, options.kMax], rRange: R_RANGE, kWeight: 3 }, options.modelError, system.name);
  const [known] = system.trial.spectra;
  const spectrum = { ...known!, vector, sites: withSd(known!.sites, options) };
  const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0, prediction: 0, rivals: 0 };
  const settings = { options: { bands: false, sampling: 'never' } as const, modelError: options.modelError, spread: 1 };
  return { judged: judgeTrial(system.name, { ...system.trial, spectra: [spectrum] }, settings, clock), spectrum };
}
