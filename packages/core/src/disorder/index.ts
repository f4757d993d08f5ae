/** Disorder, thermal and static: σ² of every path from a stated model, and the spread the geometry has. Å, Å², K, u. */
export type { DebyeInput } from './debye.js';
export { correlatedDebye } from './debye.js';
export { distributionPhase, MORSE_EXPONENT, morseThirdCumulant, thirdCumulantPhase } from './phase-terms.js';
export type { Shell, ShellPath, ShellSignal } from './shells.js';
export { distanceResolution, groupShells, hiddenByOneShell } from './shells.js';
export type { ThermalModel, ThermalVertex } from './types.js';
