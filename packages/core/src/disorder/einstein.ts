/**
 * Einstein model by bond: one oscillator for each bonded pair, σ² = ħ/(2μω) coth(ħω / 2k_BT), μ the reduced mass.
 * Multiple scattering and pairs beyond a bond follow another model, the correlated Debye one as a rule.
 */

import { InputError } from '../errors.js';
import { isMetal } from '../structure/bonding.js';
import { BOND_FREQUENCIES, type BondFrequency } from './bond-frequencies.js';
import { KELVIN_PER_WAVENUMBER, meanSquare } from './oscillator.js';
import { checkMasses, checkPositive, checkTemperature, routeGradient } from './route.js';
import { springConstantsOf } from './spring-parameters.js';
import type { ThermalModel, ThermalVertex } from './types.js';

export interface EinsteinInput {
  /** K, ≥ 0. */
  readonly temperature: number;
  /** Takes every route that is not a single bond. */
  readonly beyond: ThermalModel;
  /** cm⁻¹ by pair of elements, "Fe-O" (either order); goes before the table. */
  readonly frequencies?: Readonly<Record<string, number>>;
}

/**
 * @throws {RangeError} temperature below 0 K, a frequency not > 0
 * @throws {InputError} a pair that is not two element symbols; a `beyond` model at another temperature
 */
export function einsteinByBond({ temperature, beyond, frequencies = {} }: EinsteinInput): ThermalModel {
  checkTemperature('einsteinByBond', temperature);
  if (beyond.temperature !== temperature)
    throw new InputError(`einsteinByBond: the model beyond the bonds is for ${beyond.temperature} K, this one for ${temperature} K`);
  const own = new Map<string, number>();
  for (const [pair, wavenumber] of Object.entries(frequencies)) {
    const [a, b, ...rest] = pair.split(/[-–]/);
    if (!a || !b || rest.length > 0) throw new InputError(`einsteinByBond: "${pair}" should be two elements, like "Fe-O"`);
    checkPositive('einsteinByBond', `frequency of ${pair}`, 'cm⁻¹', wavenumber);
    for (const key of [`${a}-${b}`, `${b}-${a}`]) own.set(key, wavenumber);
  }

  const oscillatorOf = (route: readonly ThermalVertex[]): { wavenumber: number; words: string } | undefined => {
    if (route.length !== 2) return undefined;
    const [a, b] = [route[0]!, route[1]!];
    const distance = Math.hypot(...a.position.map((x, c) => x - b.position[c]!));
    if (!(distance <= longestBond(a.element, b.element))) return undefined;
    const given = own.get(`${a.element}-${b.element}`);
    if (given !== undefined) return { wavenumber: given, words: `${given} cm⁻¹ (given)` };
    const bond = bondKind(a.element, b.element, distance);
    return bond && { wavenumber: bond.wavenumber, words: `${bond.kind}, ${bond.wavenumber} cm⁻¹ (${bond.range.join('–')})` };
  };
  const sigma2 = (route: readonly ThermalVertex[], kelvin: number, otherwise: () => number): number => {
    checkMasses(route);
    routeGradient(route); // the geometry is checked alike in every model
    const oscillator = oscillatorOf(route);
    if (!oscillator) return otherwise();
    const [m, n] = [route[0]!.mass, route[1]!.mass];
    return meanSquare((m * n) / (m + n), oscillator.wavenumber * KELVIN_PER_WAVENUMBER, kelvin);
  };

  return {
    name: 'einstein',
    temperature,
    inputs: {
      frequencies: own.size > 0 ? `user's (${Object.keys(frequencies).join(', ')}), else by kind of bond` : 'by kind of bond',
      'beyond bonds': beyond.name,
      ...Object.fromEntries(Object.entries(frequencies).map(([pair, w]) => [`${pair}, cm⁻¹`, w])),
      ...Object.fromEntries(Object.entries(beyond.inputs).map(([key, value]) => [`beyond: ${key}`, value])),
    },
    sigma2: (route) => sigma2(route, temperature, () => beyond.sigma2(route)),
    sigma2AtZero: (route) => sigma2(route, 0, () => beyond.sigma2AtZero(route)),
    origin: (route) => oscillatorOf(route)?.words ?? beyond.origin?.(route) ?? beyond.name,
  };
}

/** Longest distance that counts as a bond, Å: Pauling bond order 0.15, r₁ + 0.5 Å. */
const longestBond = (a: string, b: string): number => springConstantsOf(a)[1] + springConstantsOf(b)[1] + 0.5;

/** The kind of a bond by its elements and length, as the table has it; none when the pair is not in it or too far apart. */
export function bondKind(a: string, b: string, distance: number): BondFrequency | undefined {
  if (!(distance <= longestBond(a, b))) return undefined;
  const excess = distance - springConstantsOf(a)[1] - springConstantsOf(b)[1];
  const matches = (name: string, element: string) => name === element || (name === 'metal' && isMetal(element));
  return BOND_FREQUENCIES.find(
    ({ between: [p, q], upTo }) => ((matches(p, a) && matches(q, b)) || (matches(p, b) && matches(q, a))) && excess <= upTo,
  );
}
