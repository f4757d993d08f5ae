/** Bond-valence sums of the sites of a trial: as the structure gives the distances, and with those the data want. */
import { bondValenceSums } from '../structure/index.js';
import type { TrialSpectrum } from './trial.js';
import type { SiteValence, ValenceEntry } from './types.js';

/** A sum within this of the state it was computed for supports it (the spread of R0 between papers is about 5 % of the sum). */
const SUPPORTS = 0.35;

/** @param deltaR  change of the first shell that the data want, Å */
export function valencesOf({ sites, element }: TrialSpectrum, deltaR: number): SiteValence[] {
  return sites.flatMap(({ signal, nearest, distanceSd }) => {
    const { atoms, label } = signal.site;
    const sums = (shift: number): ValenceEntry[] =>
      bondValenceSums(
        element,
        [...nearest].map((i) => ({
          element: atoms[i]!.element,
          distance: atoms[i]!.distance + shift,
          distanceSd: distanceSd(i),
          occupancy: atoms[i]!.occupancy,
        })),
      ).map(({ oxidationState, sum, sd }) => ({ oxidationState, sum, sd }));
    const asGiven = sums(0);
    const rescaled = sums(deltaR);
    if (asGiven.length === 0) return [];
    return [{ site: label, asGiven, rescaled, candidates: { asGiven: supported(asGiven), rescaled: supported(rescaled) } }];
  });
}

const supported = (entries: readonly ValenceEntry[]): number[] =>
  entries.flatMap(({ oxidationState, sum }) => (Math.abs(sum - oxidationState) <= SUPPORTS ? [oxidationState] : []));
