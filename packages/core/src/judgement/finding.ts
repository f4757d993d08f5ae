/** From numbers to words. The finding is about consistency; nothing here says more. */
import { chiSquaredAbove } from '../numerics/chi-squared.js';
import type { FindingWord, FittedParameter, Overlength } from './types.js';

export const CONSISTENT = 0.05;
export const INCONSISTENT = 0.001;
const DISTANCES_OFF = 0.01;
/** Standard deviations of its prior from which a parameter counts as strained. */
export const STRAINED = 2;
/** Power to reject a first shell off by 0.1 Å below which the data decide nothing. */
export const LEAST_POWER = 0.5;

export const CAUTION =
  'Consistency is not proof: other structures may agree with the same data as well, and the finding holds under the assumptions listed. It rests on a calculation, not on a handling of any beam; measurements at X-ray sources follow the safety rules of the facility.';

/**
 * Two tests, and the finding is the worse of what they say. The overall one asks whether anything is wrong; with many independent points
 * it sees a common error of the distances late. That one error is what the tool is for, so it is asked for directly as well: does
 * setting the distances free bring more than chance (one degree for a common stretch, one a shell class)? Of the two directed
 * questions the smaller probability counts twice (Bonferroni) and must fall below 1 %, so that together they add at most 1 % of
 * false alarms to the 5 % of the overall test. What was not rejected is undecided where the data had little power to reject anything:
 * poor data never make a structure look good, but a rejection stands whatever the power was.
 */
export function findingWord(p: number, pDistances: number, power: number, strained: readonly string[]): FindingWord {
  if (Math.min(p, pDistances) < INCONSISTENT) return 'inconsistent';
  if (p < CONSISTENT || pDistances < DISTANCES_OFF) return 'in-tension';
  if (power < LEAST_POWER) return 'undecided';
  return strained.length > 0 ? 'consistent-under-strain' : 'consistent';
}

/** Probability that setting the distances free gains this much by chance, over both refits. */
export const distancesProbability = ({ stretch, gain, freed }: Overlength): number =>
  Math.min(1, 2 * Math.min(chiSquaredAbove(stretch.gain, 1), freed > 0 ? chiSquaredAbove(gain, freed) : 1));

/** "amplitude (spectrum 1) at +2.3 standard deviations" for each strained parameter. */
export function strainedOf(parameters: readonly FittedParameter[]): string[] {
  return parameters
    .filter(({ strain }) => Math.abs(strain) > STRAINED)
    .sort((a, b) => Math.abs(b.strain) - Math.abs(a.strain))
    .map(
      ({ name, shell, strain }) =>
        `${parameterWords(name)}${shell === '' ? '' : `, ${shell}`}: ${strain > 0 ? '+' : '−'}${Math.abs(strain).toFixed(1)} standard deviations`,
    );
}

const WORDS: Readonly<Record<string, string>> = {
  'energy-origin': 'energy origin',
  amplitude: 'amplitude S0²',
  'thermal-scale': 'thermal disorder',
  'extra-static': 'additional static disorder',
  'class-shift': 'distance, error of theory',
  'scatterer-shift': 'distance of one scatterer',
};

export const parameterWords = (name: string): string => WORDS[name] ?? name;

export interface FindingNumbers {
  readonly x: number;
  readonly independentPoints: number;
  readonly p: number;
  /** Probability of the distance tests. */
  readonly pDistances: number;
  readonly rFactor: number;
  readonly power: number;
}

const probability = (p: number): string => (p < 0.001 ? 'p < 0.001' : `p = ${p.toFixed(p < 0.1 ? 3 : 2)}`);

/** The finding as one plain sentence. */
export function findingSentence(file: string, word: FindingWord, numbers: FindingNumbers, strained: readonly string[]): string {
  const { x, independentPoints, p, pDistances, rFactor, power } = numbers;
  const chance = (overall: string) =>
    pDistances < Math.min(p, CONSISTENT)
      ? `setting its distances free gains more than chance would (${probability(pDistances)})`
      : `agreement this poor is expected in fewer than ${overall} if the structure is right`;
  const told = `X = ${x.toFixed(1)} for ${independentPoints.toFixed(1)} independent points, ${probability(p)}, R-factor ${rFactor.toFixed(3)}`;
  switch (word) {
    case 'consistent':
      return `${file} is consistent with the data (${told}), and nothing was pushed beyond what was expected of it.`;
    case 'consistent-under-strain':
      return `${file} is consistent with the data only under strain (${told}): ${strained.join('; ')}.`;
    case 'in-tension':
      return `${file} is in tension with the data (${told}): ${chance('5 of 100 cases')}.`;
    case 'inconsistent':
      return `${file} is inconsistent with the data (${told}): ${chance('1 of 1000 cases')}.`;
    case 'undecided':
      return `Undecided for ${file}: these data and this coordinate precision would have shown a first shell off by 0.1 Å with a probability of only ${(100 * power).toFixed(0)} % (${told}).`;
  }
}

/** What would make the finding another one. */
export function wouldChange(
  word: FindingWord,
  { power }: FindingNumbers,
  { sentence, verdict, detectable }: Overlength,
  kMax: number,
): string[] {
  const list: string[] = [];
  if (word === 'inconsistent' || word === 'in-tension') {
    list.push(
      verdict === 'overlong' || verdict === 'too-short'
        ? sentence.split(' Possible reasons')[0]!
        : 'No common change of the distances mends the misfit: look for a missing, additional or different neighbour among the rivals, a different absorber environment in the sample, or an error of the reduction.',
    );
    list.push('Larger coordinate uncertainties than those stated would soften the finding; say so with a source if they are known.');
  } else {
    list.push(
      Number.isFinite(detectable)
        ? `A first shell longer or shorter by more than about ${detectable.toFixed(3)} Å would have been noticed.`
        : 'No change of the first shell would have been noticed.',
    );
  }
  if (power < 0.9) list.push(`Data beyond k = ${kMax.toFixed(1)} Å⁻¹, with less noise, or coordinates known better would sharpen it.`);
  return list;
}

/** Elements a photoelectron hardly tells apart: neighbours in the periodic table scatter alike. */
const ALIKE: readonly (readonly string[])[] = [
  ['C', 'N', 'O', 'F'],
  ['P', 'S', 'Cl'],
  ['V', 'Cr', 'Mn', 'Fe', 'Co', 'Ni', 'Cu', 'Zn'],
  ['As', 'Se', 'Br'],
  ['Mo', 'Tc', 'Ru', 'Rh', 'Pd', 'Ag'],
  ['W', 'Re', 'Os', 'Ir', 'Pt', 'Au'],
];

/** What the data could never tell, whatever the structure. */
export function cannotTell(elements: readonly string[], independentPoints: number, free: number, resolution: number): string[] {
  const list = [
    `The window holds ${independentPoints.toFixed(1)} independent numbers; ${free} unknowns are carried, most of them held by what was expected of them before.`,
    `Two distances closer than ${resolution.toFixed(2)} Å make one peak; that they differ is known from the structure alone.`,
  ];
  for (const group of ALIKE) {
    const present = group.filter((element) => elements.includes(element));
    if (present.length > 0)
      list.push(
        `${present.join(', ')} cannot be told from ${group.filter((e) => !present.includes(e)).join(', ')} by scattering strength alone.`,
      );
  }
  list.push('Angles, and atoms farther away than the R range, enter only through multiple scattering or not at all; hydrogens not at all.');
  return list;
}
