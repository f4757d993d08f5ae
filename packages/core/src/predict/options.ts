/** Defaults and limits of a prediction, and the inputs of the Debye model where the user gave none. */
import { type Diagnostic, InputError } from '../errors.js';
import type { Site } from '../structure/types.js';
import type { PredictOptions } from './types.js';

export const DEFAULTS: Omit<PredictOptions, 'absorber'> = {
  edge: 'K',
  temperature: 300,
  thermal: 'debye',
  selfEnergy: 'mean',
  radius: 5,
  maxLegs: 2,
  kMax: 15,
  s02: 0.82,
  e0: 0,
  pathSignals: false,
};

/** θ_D where none is given, K: the middle of oxides and hard metals (common practice, no source). */
const DEBYE_TEMPERATURE = 400;
/** Non-hydrogen atoms per Å³ of protein and water, from 1.35 g/cm³ and a mean mass of 13.5 u with hydrogens; for want of a cell. */
const MOLECULAR_DENSITY = 0.06;

const LIMITS: readonly (readonly [name: keyof PredictOptions, what: string, unit: string, low: number, high: number])[] = [
  ['temperature', 'temperature', 'K', 0, 3000],
  ['debyeTemperature', 'Debye temperature', 'K', 10, 5000],
  ['radius', 'radius', 'Å', 1, 12],
  ['maxLegs', 'number of legs', '', 2, 5],
  ['kMax', 'largest k', 'Å⁻¹', 6, 20],
  ['s02', 'S0²', '', 0.1, 2],
  ['e0', 'shift of the energy origin', 'eV', -50, 50],
];

/** @throws {InputError} an option out of its range: what it was, what it may be */
export function checkOptions(options: PredictOptions): void {
  for (const [name, what, unit, low, high] of LIMITS) {
    const value = options[name];
    if (value === undefined && name === 'debyeTemperature') continue;
    if (!(typeof value === 'number' && value >= low && value <= high)) {
      throw new InputError(`the ${what} must lie between ${low} and ${high}${unit && ` ${unit}`}, got ${value}`);
    }
  }
  if (!Number.isInteger(options.maxLegs)) throw new InputError(`the number of legs must be a whole number, got ${options.maxLegs}`);
  if (options.thermal !== 'debye' && options.thermal !== 'none') {
    throw new InputError(`the thermal model "${options.thermal}" is not available yet; use debye or none`);
  }
}

/** Debye temperature and atom density for one site; what had to be assumed is added to the warnings. */
export function settleDebye(
  site: Site,
  options: PredictOptions,
  warnings: Diagnostic[],
): { debyeTemperature: number; atomDensity: number } {
  if (options.debyeTemperature === undefined) {
    warnings.push({
      code: 'debye-temperature-assumed',
      message: `No Debye temperature was given: ${DEBYE_TEMPERATURE} K is assumed, and every thermal σ² with it.`,
    });
  }
  if (site.atomDensity === undefined) {
    warnings.push({
      code: 'atom-density-assumed',
      message: `Without a cell the Debye model takes ${MOLECULAR_DENSITY} atoms per Å³, as in protein.`,
    });
  }
  return { debyeTemperature: options.debyeTemperature ?? DEBYE_TEMPERATURE, atomDensity: site.atomDensity ?? MOLECULAR_DENSITY };
}
