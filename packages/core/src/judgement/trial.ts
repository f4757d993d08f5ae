/**
 * A candidate made ready to be tried against the evidence: the sites of every spectrum with their path signals and predicted disorder.
 * Nothing here has seen the data but for their grid. Å, Å⁻¹, Å², eV, K.
 */
import type { Edge } from '../atom/types.js';
import { morseThirdCumulant, suggestThermalModel, type ThermalModel, type ThermalVertex } from '../disorder/index.js';
import { edgeEnergyEv, elementBySymbol } from '../elements/index.js';
import { type Diagnostic, InputError, type Running } from '../errors.js';
import { DEFAULTS } from '../predict/options.js';
import { pathSignals, type SiteScattering, type SiteSignal, type StageClock, siteScattering } from '../predict/site-signal.js';
import { thermalModel } from '../predict/thermal.js';
import type { PredictOptions } from '../predict/types.js';
import { atomClasses, type EnergyOrigin, type PathClass } from '../predict/unknowns.js';
import { OVERLAP_RADIUS } from '../scattering/index.js';
import { type CoordinatePrecision, coordinatePrecision, coordinationShell, distanceSd, findSites } from '../structure/index.js';
import type { Site, SiteAtom, Structure } from '../structure/types.js';
import type { DataVector } from './data-vector.js';
import { OriginSignals } from './origin-signals.js';
import type { JudgeOptions } from './types.js';

/** Where no bond can be made out, neighbours up to this factor beyond the nearest are the first shell. */
const FIRST_SHELL = 1.25;

/** One site as one spectrum sees it. */
export interface TrialSite {
  readonly signal: SiteSignal;
  /** Its amplitudes at any energy origin, on the grid of the data. */
  readonly atOrigin: OriginSignals;
  /** Indices into site.atoms of the first coordination shell. */
  readonly nearest: ReadonlySet<number>;
  /** Shell class of every atom as a single scatterer. */
  readonly classes: readonly PathClass[];
  /** Thermal σ² (Å²) and third cumulant (Å³) of every path (np). */
  readonly sigma2: Float64Array;
  readonly c3: Float64Array;
  /** Atoms that the thermal model knows by another index: those a rival added. */
  readonly twinOf: ReadonlyMap<number, number>;
  readonly thermal: ThermalModel | undefined;
  readonly distanceSd: (atom: number) => number;
}

/** One data set of a trial. */
export interface TrialSpectrum {
  /** Name of the data, for the result. */
  readonly file: string;
  readonly vector: DataVector;
  readonly element: string;
  readonly edge: Edge;
  readonly temperature: number;
  readonly sites: readonly TrialSite[];
  readonly options: PredictOptions;
  readonly energyOrigin: EnergyOrigin;
}

export interface Trial {
  readonly structure: Structure;
  readonly precision: CoordinatePrecision;
  readonly spectra: readonly TrialSpectrum[];
  readonly thermal: PredictOptions['thermal'];
  readonly thermalReason: string;
  readonly warnings: readonly Diagnostic[];
}

/** What one spectrum asks of every candidate. */
export interface SpectrumRequest {
  readonly vector: DataVector;
  readonly absorber: string;
  readonly edge: Edge;
  readonly temperature: number;
  readonly file: string;
  /** What is expected of the theory's energy origin against the data's. */
  readonly energyOrigin: EnergyOrigin;
}

/**
 * @throws {InputError} candidate without the absorber, no such edge, options out of range
 * @throws {CancelledError} asked to stop
 */
export function prepareTrial(
  structure: Structure,
  requests: readonly SpectrumRequest[],
  options: JudgeOptions,
  clock: StageClock,
  running?: Running,
): Trial {
  const warnings: Diagnostic[] = [...structure.diagnostics];
  const precision = coordinatePrecision(structure);
  const signals = new Map<string, SiteSignal[]>();
  let thermal = options.thermal;
  let thermalReason = 'as asked for';
  const spectra = requests.map(({ file, vector, absorber, edge, temperature, energyOrigin }): TrialSpectrum => {
    const wanted: PredictOptions = {
      ...DEFAULTS,
      ...definedOnly(options),
      thermal: thermal ?? DEFAULTS.thermal,
      absorber,
      edge,
      temperature,
      kMax: Math.min(20, Math.max(6, vector.k.at(-1)!)),
    };
    const key = `${absorber} ${edge} ${wanted.kMax}`;
    let own = signals.get(key);
    if (!own) {
      const sites = findSites(structure, { absorber, radius: wanted.radius + OVERLAP_RADIUS });
      edgeEnergyEv(elementBySymbol(sites[0]!.element).Z, edge);
      own = sites.map((site) => pathSignals(site, siteScattering(site, wanted, clock, running), wanted, clock, running));
      if (own.every(({ paths }) => paths.length === 0))
        throw new InputError(`no atom but hydrogen lies within ${wanted.radius} Å of ${absorber}: is the structure in Å?`);
      signals.set(key, own);
      for (const { site } of own) warnings.push(...site.diagnostics);
    }
    if (thermal === undefined) {
      const suggestion = suggestThermalModel(own[0]!.site, structure);
      thermal = suggestion.model === 'ensemble' ? 'springs' : suggestion.model;
      thermalReason = suggestion.reason;
    }
    const settled = { ...wanted, thermal };
    const sites = own.map((signal): TrialSite => {
      const model = thermalModel(structure, signal.site, settled, warnings);
      const [centre] = signal.site.atoms;
      return trialSite({
        signal,
        atOrigin: new OriginSignals(signal, vector.k),
        nearest: firstShell(signal.site, structure),
        twinOf: new Map(),
        thermal: model,
        distanceSd: (atom) => options.coordinateSd ?? distanceSd(precision, centre!, signal.site.atoms[atom]!),
      });
    });
    return { file, vector, element: own[0]!.site.element, edge, temperature, sites, options: settled, energyOrigin };
  });
  return { structure, precision, spectra, thermal: thermal!, thermalReason, warnings: unique(warnings) };
}

/** Fills in σ² and third cumulants of every path from the thermal model. */
export function trialSite(known: Omit<TrialSite, 'sigma2' | 'c3' | 'classes'>): TrialSite {
  const { signal, nearest, thermal, twinOf } = known;
  const { site, paths } = signal;
  const sigma2 = new Float64Array(paths.length);
  const c3 = new Float64Array(paths.length);
  if (thermal) {
    paths.forEach(({ vertices, legs }, j) => {
      const route = thermalRoute(site, vertices, twinOf);
      sigma2[j] = thermal.sigma2(route);
      if (legs === 2 && nearest.has(vertices[1]!)) c3[j] = morseThirdCumulant(sigma2[j]!, thermal.sigma2AtZero(route));
    });
  }
  return { ...known, classes: atomClasses(site, nearest), sigma2, c3 };
}

/**
 * A path as the thermal model knows it. An atom a rival added is unknown there and vibrates like its twin, from the twin's place; a route
 * over both would fold up and is taken as the single scattering of the twin.
 */
function thermalRoute({ atoms }: Site, vertices: readonly number[], twinOf: ReadonlyMap<number, number>): ThermalVertex[] {
  const known = vertices.map((atom) => twinOf.get(atom) ?? atom);
  const folds = known.some((atom, i) => atom === known[(i + 1) % known.length]);
  const added = vertices.find((atom) => twinOf.has(atom));
  return (folds ? [0, twinOf.get(added!)!] : known).map((atom) => {
    const { position, element } = atoms[atom]!;
    return { atom, position, element, mass: elementBySymbol(element).mass };
  });
}

/** The same site with changed atoms, its paths found anew with the phase shifts at hand. */
export function changedSite(
  known: TrialSite,
  change: {
    readonly atoms: readonly SiteAtom[];
    readonly kindOfAtom: Int32Array;
    readonly nearest: ReadonlySet<number>;
    readonly twinOf?: ReadonlyMap<number, number>;
    readonly scattering?: SiteScattering;
  },
  { options, vector }: TrialSpectrum,
  clock: StageClock,
  running?: Running,
): TrialSite {
  const site: Site = { ...known.signal.site, atoms: change.atoms };
  const scattering = { ...(change.scattering ?? known.signal), kindOfAtom: change.kindOfAtom };
  const signal = pathSignals(site, scattering, options, clock, running);
  const twinOf = change.twinOf ?? known.twinOf;
  const own = (atom: number): number => twinOf.get(atom) ?? atom;
  return trialSite({
    ...known,
    signal,
    atOrigin: new OriginSignals(signal, vector.k),
    nearest: change.nearest,
    twinOf,
    distanceSd: (atom) => known.distanceSd(own(atom)),
  });
}

function firstShell(site: Site, structure: Structure): ReadonlySet<number> {
  const bonded = new Set(coordinationShell(site, structure.links ?? []));
  const indices = site.atoms.flatMap((atom, i) => (bonded.has(atom) && atom.element !== 'H' ? [i] : []));
  if (indices.length > 0) return new Set(indices);
  const reach = FIRST_SHELL * (site.atoms.find(({ element, distance }) => distance > 0 && element !== 'H')?.distance ?? 0);
  return new Set(site.atoms.flatMap(({ distance, element }, i) => (i > 0 && distance <= reach && element !== 'H' ? [i] : [])));
}

/** Options given, without those left undefined. */
function definedOnly({ debyeTemperature, selfEnergy, radius, maxLegs }: JudgeOptions): Partial<PredictOptions> {
  return {
    ...(debyeTemperature === undefined ? {} : { debyeTemperature }),
    ...(selfEnergy === undefined ? {} : { selfEnergy }),
    ...(radius === undefined ? {} : { radius }),
    ...(maxLegs === undefined ? {} : { maxLegs }),
  };
}

const unique = (warnings: readonly Diagnostic[]): Diagnostic[] => [...new Map(warnings.map((w) => [w.code + w.message, w])).values()];
