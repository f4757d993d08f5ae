/** The thermal model a prediction asked for, set up for one site; what had to be assumed is said. */
import {
  correlatedDebye,
  DEFAULT_ATOM_DENSITY,
  defaultDebyeTemperature,
  einsteinByBond,
  springBodyOf,
  springNetwork,
  suggestThermalModel,
  type ThermalModel,
} from '../disorder/index.js';
import { elementBySymbol } from '../elements/index.js';
import type { Diagnostic } from '../errors.js';
import type { Site, Structure } from '../structure/types.js';
import type { PredictOptions } from './types.js';

/**
 * @param warnings  added to: inputs assumed, a model that suits the structure better
 * @returns undefined when no thermal disorder was asked for
 * @throws {InputError} springs that cannot be set up for this structure
 */
export function thermalModel(structure: Structure, site: Site, options: PredictOptions, warnings: Diagnostic[]): ThermalModel | undefined {
  const { thermal, temperature } = options;
  if (thermal === 'none') return undefined;
  const suggestion = suggestThermalModel(site, structure);
  if (suggestion.model === 'springs' && thermal === 'debye') {
    warnings.push({
      code: 'thermal-model',
      message: `${suggestion.reason} The spring model would suit ${site.label} better than the Debye model used.`,
    });
  }
  if (thermal === 'springs') return springNetwork(springBodyOf(structure, site, massOf), { temperature });
  const debye = correlatedDebye({ ...debyeInput(site, options, warnings), temperature });
  return thermal === 'einstein' ? einsteinByBond({ temperature, beyond: debye }) : debye;
}

const massOf = (element: string): number => elementBySymbol(element).mass;

function debyeInput(site: Site, options: PredictOptions, warnings: Diagnostic[]): { debyeTemperature: number; atomDensity: number } {
  let { debyeTemperature } = options;
  if (debyeTemperature === undefined) {
    const { value, source } = defaultDebyeTemperature(site.atoms.map(({ element }) => element));
    debyeTemperature = value;
    warnings.push({
      code: 'debye-temperature-assumed',
      message: `No Debye temperature was given: ${value} K is assumed (${source}), and every thermal σ² with it.`,
    });
  }
  if (site.atomDensity === undefined) {
    warnings.push({
      code: 'atom-density-assumed',
      message: `Without a cell the Debye model takes ${DEFAULT_ATOM_DENSITY.toFixed(3)} atoms per Å³, as in molecular crystals.`,
    });
  }
  return { debyeTemperature, atomDensity: site.atomDensity ?? DEFAULT_ATOM_DENSITY };
}
