/**
 * Colours of elements: the hues of the old plastic models for the common ones (common practice, no source), our own values; each has
 * a contrast of at least 3 against white and against #14181c (checked in the test). The rest by group.
 */
const OWN: Readonly<Record<string, string>> = {
  H: '#7d858c',
  C: '#697178',
  N: '#3f6fd8',
  O: '#d2402f',
  F: '#3d8f5f',
  S: '#97801a',
  P: '#c4661a',
  Cl: '#2f9152',
  Br: '#a8553d',
  I: '#8a55b8',
  Se: '#b3701f',
  Si: '#8a7a58',
};
const ALKALI = new Set('Li Na K Rb Cs Be Mg Ca Sr Ba'.split(' '));

/** "#rrggbb" for an element symbol; metals share one of two tones. */
export const elementColour = (element: string): string => OWN[element] ?? (ALKALI.has(element) ? '#6f7fa6' : '#7a58c0');
