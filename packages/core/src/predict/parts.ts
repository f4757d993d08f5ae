/** The parts a predicted χ(k) is the sum of, as they are drawn: by shell, and by order of scattering. */
import type { Contribution } from './describe.js';
import type { ChiPart, Prediction } from './types.js';

/** Shells shown on their own; the others are summed. */
const SHELLS_SHOWN = 5;

/** @param shells  single-scattering contributions by shell, each with its name and mean distance, Å */
export function partsOf(
  contributions: readonly Contribution[],
  shells: readonly { readonly label: string; readonly meanDistance: number; readonly contributions: readonly Contribution[] }[],
): NonNullable<Prediction['contributions']> {
  const sum = (label: string, parts: readonly Contribution[]): ChiPart[] => {
    if (parts.length === 0) return [];
    const chi = new Float64Array(parts[0]!.chi.length);
    for (const part of parts) for (let i = 0; i < chi.length; i++) chi[i]! += part.chi[i]!;
    return [{ label, chi }];
  };
  const legsOf = ({ site, index }: Contribution): number => site.paths[index]!.legs;
  const areaOf = (parts: readonly Contribution[]): number => parts.reduce((total, { area }) => total + area, 0);
  const ranked = [...shells].sort((a, b) => areaOf(b.contributions) - areaOf(a.contributions));
  const shown = ranked.slice(0, SHELLS_SHOWN).sort((a, b) => a.meanDistance - b.meanDistance);
  const rest = ranked.slice(SHELLS_SHOWN).flatMap((shell) => shell.contributions);
  const multiple = contributions.filter((part) => legsOf(part) > 2);
  const ofLegs = (legs: number): Contribution[] => contributions.filter((part) => legsOf(part) === legs);
  return {
    byShell: [
      ...shown.flatMap((shell) => sum(shell.label, shell.contributions)),
      ...sum('other shells', rest),
      ...sum('multiple scattering', multiple),
    ],
    byOrder: [2, 3, 4, 5].flatMap((legs) => sum(legs === 2 ? 'single scattering' : `${legs} legs`, ofLegs(legs))),
  };
}
