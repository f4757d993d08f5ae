/** Defaults and limits of a prediction. */
import { InputError } from '../errors.js';
import type { PredictOptions } from './types.js';

export const DEFAULTS: Omit<PredictOptions, 'absorber'> = {
  edge: 'K',
  temperature: 300,
  thermal: 'debye',
  selfEnergy: 'mean',
  spheres: 'element',
  radius: 5,
  maxLegs: 4,
  kMax: 15,
  s02: 0.82,
  e0: 0,
  pathSignals: false,
  bands: false,
};

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
}
