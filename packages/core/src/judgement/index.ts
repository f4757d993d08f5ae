/** judgement: from prediction and evidence to a finding. Å, Å⁻¹, Å², eV, K. */
export { type Candidate, type JudgeContext, judge } from './judge.js';
export type {
  Band,
  CandidateJudgement,
  Comparison,
  DisorderRow,
  Evidence,
  EvidenceSummary,
  FindingWord,
  FittedParameter,
  Judgement,
  JudgeOptions,
  Overlength,
  RivalResult,
  ShellStretch,
  SiteValence,
  ValenceEntry,
} from './types.js';
