/** @ringtrue/core: from coordinates to a predicted χ(k). Å, Å⁻¹, Å², eV, K at this door. */
export type { Edge } from './atom/types.js';
export * as constants from './constants.js';
export { suggestThermalModel } from './disorder/index.js';
export { CancelledError, ConvergenceError, type Diagnostic, InputError, ReadError, type Running } from './errors.js';
export {
  type BackgroundProjector,
  type BackgroundSettings,
  backgroundProjector,
  type ColumnRoles,
  type DoseReport,
  dose,
  type MeasuredScan,
  type Noise,
  parseColumnRoles,
  type ReadOptions as ScanReadOptions,
  type ReduceOptions,
  type Reduction,
  readScan,
  readXdi,
  reduce,
  writeXdi,
  type XdiContent,
  type XdiFile,
} from './evidence/index.js';
export {
  type Band,
  type Candidate,
  type CandidateJudgement,
  type Comparison,
  type DisorderRow,
  type Evidence,
  type EvidenceSummary,
  type FindingWord,
  type FittedParameter,
  type JudgeContext,
  type Judgement,
  type JudgeOptions,
  judge,
  type Overlength,
  type RivalResult,
  type ShellStretch,
  type SiteValence,
  type ValenceEntry,
} from './judgement/index.js';
export type { PredictContext } from './predict/describe.js';
export {
  BLOCK_FRAMES,
  EnsembleAverage,
  type EnsembleOptions,
  type EnsemblePlan,
  planEnsemble,
  predictEnsemble,
} from './predict/ensemble.js';
export { type EnsembleFrame, EnsembleSurvey, frameSize, packFrame } from './predict/ensemble-frames.js';
export { type BlockPlan, type BlockSums, blockSums } from './predict/ensemble-sums.js';
export { predict } from './predict/predict.js';
export type {
  ChiPart,
  EnsembleSummary,
  PredictedNeighbour,
  PredictedPath,
  PredictedShell,
  Prediction,
  PredictOptions,
} from './predict/types.js';
export type { SelfEnergyName } from './scattering/types.js';
export {
  backTransform,
  compareInR,
  fourierTransform,
  informationContent,
  type Transform,
  type TransformSettings,
  type WindowName,
} from './spectrum/index.js';
export {
  type Atom,
  type Cell,
  coordinationShell,
  describeSites,
  findSites,
  frameOf,
  type Link,
  longestBond,
  type ReadOptions,
  readStructure,
  type Site,
  type SiteAtom,
  type SiteOptions,
  type SitesDescription,
  type Structure,
  structureOfFrame,
  type XyzFrame,
  XyzFrames,
} from './structure/index.js';
export { VERSION } from './version.js';
