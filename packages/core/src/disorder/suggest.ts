/** Which thermal model suits a structure, and why in words. */
import { isMetal } from '../structure/bonding.js';
import type { Site, Structure } from '../structure/types.js';

export interface ThermalSuggestion {
  readonly model: 'debye' | 'springs' | 'ensemble';
  readonly reason: string;
}

/** Frames from which an average stands on its own feet: the error of a variance is √(2/n), 20 % here. */
const FRAMES = 50;

/** @param structure where the site is from, if known: it may hold frames */
export function suggestThermalModel(site: Site, structure?: Structure): ThermalSuggestion {
  const frames = 1 + (structure?.moreFrames.length ?? 0);
  if (structure?.format === 'xyz' && frames >= FRAMES)
    return { model: 'ensemble', reason: `The file holds ${frames} frames: averaging over them needs no model of the vibrations.` };
  const elements = new Set(site.atoms.map(({ element }) => element));
  const few = frames > 1 ? ` Its ${frames} models are too few to average over.` : '';
  if ([...elements].every(isMetal) && site.periodic)
    return {
      model: 'debye',
      reason: `A crystal of metal atoms alone: one sphere of sound waves describes all its shells, with a Debye temperature from tables.${few}`,
    };
  if (site.periodic && !site.atoms.some(({ residue }) => residue))
    return {
      model: 'springs',
      reason: `A crystal with directed or ionic bonds: its first shell vibrates with about 0.6 of the Debye value that suits the farther ones, and only springs tell them apart.${few}`,
    };
  return {
    model: 'springs',
    reason: `A molecule or a site with ligands: stiff bonds inside the ligands, softer ones to the metal, and no sound waves for a Debye temperature to describe.${few}`,
  };
}
