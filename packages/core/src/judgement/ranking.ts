/** Candidates by evidence. Those within ln 10 of the best of a group cannot be told apart by these data. */
import type { CandidateJudgement, Judgement } from './types.js';

const SAME = Math.log(10);

/** Groups from the best down; each begins with its best candidate. */
export function groupsOf(candidates: readonly CandidateJudgement[]): Judgement['groups'] {
  const sorted = [...candidates].sort((a, b) => b.logEvidence - a.logEvidence);
  const groups: CandidateJudgement[][] = [];
  for (const candidate of sorted) {
    const last = groups.at(-1);
    if (last && last[0]!.logEvidence - candidate.logEvidence <= SAME) last.push(candidate);
    else groups.push([candidate]);
  }
  return groups.map((group, i) => {
    const files = group.map(({ file }) => file);
    return { files, sentence: sentenceOf(files, i, group[0]!.logEvidence - sorted[0]!.logEvidence) };
  });
}

function sentenceOf(files: readonly string[], rank: number, difference: number): string {
  const apart = files.length > 1 ? `These data cannot tell ${files.slice(0, -1).join(', ')} and ${files.at(-1)} apart.` : '';
  if (rank === 0) return apart || `${files[0]} has the largest evidence.`;
  const odds = `ln Z lower by ${(-difference).toFixed(1)} than that of the best`;
  return apart ? `${apart} Their evidence is weaker: ${odds}.` : `${files[0]}: ${odds}.`;
}
