/**
 * χ(k) from coordinates, nothing fitted: every site of the absorber, weighted as the measurement averages them.
 * Å, Å⁻¹, Å², eV, K at this door.
 */
import { morseThirdCumulant, suggestThermalModel, type ThermalModel } from '../disorder/index.js';
import { elementBySymbol } from '../elements/index.js';
import type { Diagnostic } from '../errors.js';
import { OVERLAP_RADIUS } from '../scattering/index.js';
import { PathSum, uniformKGrid } from '../spectrum/index.js';
import { coordinatePrecision, findSites } from '../structure/index.js';
import type { Structure } from '../structure/types.js';
import { type BandSite, priorBands } from './bands.js';
import { areaOf, assemble, type Contribution, type DescribedSite, type PredictContext, siteWarnings } from './describe.js';
import { lightNotes, lightTensor } from './light.js';
import { checkOptions, DEFAULTS } from './options.js';
import { type SiteSignal, type StageClock, siteSignal } from './site-signal.js';
import { thermalModel } from './thermal.js';
import type { Prediction, PredictOptions } from './types.js';

/** Neighbours up to this factor beyond the nearest count as its shell: they carry the anharmonic term. */
const FIRST_SHELL = 1.25;

/**
 * @throws {InputError} absorber absent, no such edge, atoms that coincide, options out of range
 * @throws {CancelledError} asked to stop
 */
export function predict(
  structure: Structure,
  wanted: Partial<PredictOptions> & { readonly absorber: string },
  context: PredictContext,
): Prediction {
  const options: PredictOptions = { ...DEFAULTS, ...wanted };
  checkOptions(options);
  const now = context.now ?? (() => 0);
  const started = now();
  const clock: StageClock = { now, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  const k = uniformKGrid(options.kMax);
  const light = options.electricVector && lightTensor(structure, options.electricVector);
  const warnings: Diagnostic[] = [...structure.diagnostics, ...(light ? lightNotes(options) : [])];
  if (structure.moreFrames.length > 0) {
    warnings.push({
      code: 'first-frame',
      message: `The file holds ${structure.moreFrames.length + 1} frames; this is the first alone. --ensemble averages over all.`,
    });
  }
  const bandSites: BandSite[] = [];
  const described = findSites(structure, {
    absorber: options.absorber,
    radius: options.radius + OVERLAP_RADIUS,
    ...(light ? { keepOrientations: true } : {}),
  }).map((site): DescribedSite => {
    warnings.push(...site.diagnostics, ...siteWarnings(site, options.radius));
    const signal = siteSignal(site, { ...options, light }, clock, context.running);
    const model = thermalModel(structure, site, options, warnings);
    const contributions = contributionsOf(signal, model, options, k);
    bandSites.push({
      signal,
      disorder: contributions.map(({ disorder }) => disorder),
      isNearest: contributions.map(({ isNearest }) => isNearest),
    });
    const thermal = {
      model: model?.name ?? 'none',
      temperature: options.temperature,
      inputs: model?.inputs ?? {},
      suggested: suggestThermalModel(site, structure),
    };
    return { signal, thermal, contributions };
  });
  return assemble(structure, options, context, { k, sites: described, warnings, clock, started }, () =>
    options.bands ? { bands: priorBands(bandSites, coordinatePrecision(structure), options) } : {},
  );
}

function contributionsOf(signal: SiteSignal, thermal: ThermalModel | undefined, options: PredictOptions, k: Float64Array): Contribution[] {
  const { site, paths, signals, wave, table } = signal;
  const sum = new PathSum(signals, wave, k, options.e0, table.k[0]!);
  const nearest = paths[0]?.halfLength ?? 0;
  return paths.map((path, index) => {
    const route = path.vertices.map((atom) => {
      const { position, element } = site.atoms[atom]!;
      return { atom, position, element, mass: elementBySymbol(element).mass };
    });
    const sigma2 = thermal ? thermal.sigma2(route) : 0;
    const isNearest = path.legs === 2 && path.halfLength <= FIRST_SHELL * nearest;
    const disorder = { sigma2, c3: thermal && isNearest ? morseThirdCumulant(sigma2, thermal.sigma2AtZero(route)) : 0 };
    const chi = sum.path(index, disorder, options.s02, new Float64Array(k.length));
    for (let i = 0; i < k.length; i++) chi[i]! *= site.weight;
    const from = thermal?.origin?.(route) ?? thermal?.name ?? 'none';
    return { site: signal, index, weight: site.weight, disorder, from, isNearest, chi, area: areaOf(chi, k, options.kMax) };
  });
}
