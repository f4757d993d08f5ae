import type { FindingWord } from '@ringtrue/core';

/** A finding as a mark that does not rely on colour, and as words. */
export const FINDING_MARKS: Readonly<Record<FindingWord, readonly [mark: string, words: string]>> = {
  consistent: ['●', 'consistent'],
  'consistent-under-strain': ['◐', 'consistent under strain'],
  'in-tension': ['△', 'in tension'],
  inconsistent: ['✕', 'inconsistent'],
  undecided: ['○', 'undecided'],
};
