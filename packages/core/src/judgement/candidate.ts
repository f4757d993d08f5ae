/** One candidate against all data sets. */
import type { Running } from '../errors.js';
import { chiSquaredAbove } from '../numerics/chi-squared.js';
import type { StageClock } from '../predict/site-signal.js';
import { informationContent } from '../spectrum/index.js';
import type { Structure } from '../structure/types.js';
import { bestPoints } from './best-points.js';
import { bandsOf, comparisonOf, type Draw, priorDraw, rFactorOf } from './comparison.js';
import { assumptionsOf, disorderRows, distinctAbsorbers } from './describe.js';
import { CAUTION, CONSISTENT, cannotTell, distancesProbability, findingSentence, findingWord, strainedOf, wouldChange } from './finding.js';
import { type Minimum, minimise } from './minimise.js';
import { describeClass, overlength } from './overlength.js';
import { logEvidence } from './posterior.js';
import { type Posterior, posteriorOf } from './posterior-shape.js';
import { powerAgainst } from './power.js';
import { rivalsOf } from './rivals.js';
import { prepareTrial, type SpectrumRequest, type Trial, type TrialSpectrum } from './trial.js';
import { carriedOver, type TrialModel, trialModel } from './trial-model.js';
import type { CandidateJudgement, Comparison, FittedParameter, JudgeOptions, RivalResult } from './types.js';
import { valencesOf } from './valence.js';

export interface Settings {
  readonly options: JudgeOptions;
  readonly modelError: number;
  /** Factor of the extra static disorder's prior. */
  readonly spread: number;
}

/** Å: the error of the first shell whose discovery is asked for. */
const PROBE = 0.1;

export type JudgingClock = StageClock & { prediction: number; rivals: number };

/** @throws {InputError} the candidate lacks the absorber, or its atoms coincide */
export function judgeCandidate(
  file: string,
  structure: Structure,
  requests: readonly SpectrumRequest[],
  settings: Settings,
  clock: JudgingClock,
  running?: Running,
): CandidateJudgement {
  const begun = clock.now();
  running?.onProgress?.(`predicting ${file}`, 0);
  const trial = prepareTrial(structure, requests, settings.options, clock, running);
  clock.prediction += clock.now() - begun;
  return judgeTrial(file, trial, settings, clock, running);
}

/** Judges a candidate whose prediction stands. */
export function judgeTrial(
  file: string,
  trial: Trial,
  { options, spread, modelError }: Settings,
  clock: JudgingClock,
  running?: Running,
): CandidateJudgement {
  const { spectra, structure } = trial;
  const model = trialModel(spectra, spread);
  const modes = bestPoints(model, running);
  const best = modes[0]!;
  const degrees = spectra.reduce((sum, { vector }) => sum + vector.independentPoints, 0);
  const posterior = posteriorOf(model, modes, options.sampling ?? 'auto', trial, running);
  const parameters = describeParameters(model, best, posterior);
  const comparisons = spectra.map(({ vector, file: data }, s) => comparisonOf(vector, model, s, best.z, data));
  const stretched = overlength(trial, model, best, spread);
  const numbers = {
    x: best.x,
    independentPoints: degrees,
    p: chiSquaredAbove(best.x, degrees),
    pDistances: distancesProbability(stretched),
    rFactor: jointRFactor(comparisons, spectra),
    power: powerAgainst(trial, model, spread, degrees, PROBE),
  };
  const strained = strainedOf(parameters);
  const finding = findingWord(numbers.p, numbers.pDistances, numbers.power, strained);
  const evidence = logEvidence(best, model.bounded);
  const beforeRivals = clock.now();
  const rivals = options.rivals ? judgeRivals(trial, model, best, spread, degrees, evidence, clock, running) : [];
  clock.rivals += clock.now() - beforeRivals;
  const kMax = Math.max(...spectra.map(({ vector }) => vector.window.kRange[1]));
  const elements = [
    ...new Set(
      spectra.flatMap(({ sites }) =>
        sites.flatMap(({ signal }) => signal.paths.map(({ vertices }) => signal.site.atoms[vertices[1]!]!.element)),
      ),
    ),
  ];
  const resolution = Math.min(...spectra.map(({ vector }) => informationContent(vector.window.kRange, vector.window.rRange).resolution));
  return {
    file,
    title: structure.title,
    finding,
    sentence: findingSentence(file, finding, numbers, strained),
    x: best.x,
    xData: best.xData,
    xPrior: best.xPrior,
    independentPoints: degrees,
    p: numbers.p,
    pDistances: numbers.pDistances,
    rFactor: numbers.rFactor,
    power: numbers.power,
    parameters,
    strained,
    overlength: stretched,
    valence: distinctAbsorbers(trial).flatMap((spectrum) => {
      const { label } = describeClass(spectrum, 'nearest');
      return valencesOf(spectrum, stretched.shells.find((shell) => shell.label === label)?.deltaR ?? 0);
    }),
    disorder: disorderRows(trial, model, best),
    rivals,
    notExcluded: rivals.filter(({ excluded }) => !excluded).map(({ label }) => label),
    logEvidence: evidence,
    posterior: { method: posterior.method, reason: posterior.reason },
    comparisons:
      options.bands === false
        ? comparisons
        : comparisons.map((comparison, s) => withBands(comparison, spectra[s]!, model, s, posterior.draw)),
    assumptions: assumptionsOf(trial, options, spread, modelError),
    wouldChange: wouldChange(finding, numbers, stretched, kMax),
    cannotTell: cannotTell(elements, degrees, model.parameters, resolution),
    caution: CAUTION,
    warnings: trial.warnings,
  };
}

function describeParameters({ list }: TrialModel, { z }: Minimum, { sd }: Posterior): FittedParameter[] {
  return list.map(({ name, shell, unit, mean, sd: priorSd, value, slope }, p) => ({
    name,
    shell,
    unit,
    prior: { mean, sd: priorSd },
    value: value(z[p]!),
    sd: Math.abs(slope(z[p]!)) * sd[p]!,
    strain: z[p]!,
  }));
}

/** Each rival begins where the candidate ended: what the two share is known by its key. */
function judgeRivals(
  trial: Trial,
  held: TrialModel,
  best: Minimum,
  spread: number,
  degrees: number,
  evidence: number,
  clock: StageClock,
  running?: Running,
): RivalResult[] {
  const results: RivalResult[] = [];
  for (const { label, kind, spectra } of rivalsOf(trial, clock, running)) {
    running?.onProgress?.(`rival: ${label}`, 0);
    const model = trialModel(spectra, spread);
    const found = minimise(model, carriedOver(model, held, best), undefined, running);
    const p = chiSquaredAbove(found.x, degrees);
    results.push({ label, kind, x: found.x, p, logEvidence: logEvidence(found, model.bounded) - evidence, excluded: p < CONSISTENT });
  }
  return results.sort((a, b) => b.logEvidence - a.logEvidence);
}

function jointRFactor(comparisons: readonly Comparison[], spectra: readonly TrialSpectrum[]): number {
  const parts = comparisons.map((comparison, s) => rFactorOf(comparison, spectra[s]!.vector.window.rRange));
  return parts.reduce((sum, { misfit }) => sum + misfit, 0) / parts.reduce((sum, { power }) => sum + power, 0);
}

function withBands(comparison: Comparison, { vector }: TrialSpectrum, model: TrialModel, s: number, draw: Draw): Comparison {
  const prior = bandsOf(vector, model, s, priorDraw(model));
  const posterior = bandsOf(vector, model, s, draw);
  return { ...comparison, bands: { priorK: prior.k, posteriorK: posterior.k, priorR: prior.R, posteriorR: posterior.R } };
}
