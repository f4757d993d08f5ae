/**
 * χ(k) from coordinates, nothing fitted: every site of the absorber, weighted as the measurement averages them.
 * Å, Å⁻¹, Å², eV, K at this door.
 */
import { BOHR_ANGSTROM, evFromHartree } from '../constants.js';
import { distanceResolution, groupShells, morseThirdCumulant, type ThermalModel } from '../disorder/index.js';
import { elementBySymbol } from '../elements/index.js';
import { type Diagnostic, InputError, type Running } from '../errors.js';
import { pathLabel } from '../paths/index.js';
import { OVERLAP_RADIUS } from '../scattering/index.js';
import { fourierTransform, type PathDisorder, PathSum, uniformKGrid } from '../spectrum/index.js';
import { coordinatePrecision, findSites } from '../structure/index.js';
import type { Site, Structure } from '../structure/types.js';
import { type BandSite, priorBands } from './bands.js';
import { checkOptions, DEFAULTS } from './options.js';
import { type SiteSignal, type StageClock, siteSignal } from './site-signal.js';
import { thermalModel } from './thermal.js';
import type { PredictedPath, PredictedShell, Prediction, PredictOptions } from './types.js';

/** Window of shares and of the transform: sills of 1 Å⁻¹ from 3 Å⁻¹ to the end. */
const WINDOW_START = 3;
const K_WEIGHT = 3;
/** Neighbours up to this factor beyond the nearest count as its shell: they carry the anharmonic term. */
const FIRST_SHELL = 1.25;

export interface PredictContext {
  /** Name of the file, for the result. */
  readonly file: string;
  readonly version: string;
  /** Clock in seconds, for the timing; default none (all zero). */
  readonly now?: () => number;
  readonly running?: Running;
}

/** One path of one site with its part of the whole. */
interface Contribution {
  readonly site: SiteSignal;
  readonly index: number;
  readonly weight: number;
  readonly element: string;
  readonly disorder: PathDisorder;
  readonly isNearest: boolean;
  readonly chi: Float64Array;
  readonly area: number;
}

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
  const sites = findSites(structure, { absorber: options.absorber, radius: options.radius + OVERLAP_RADIUS });
  const k = uniformKGrid(options.kMax);
  const warnings: Diagnostic[] = [...structure.diagnostics];
  const chi = new Float64Array(k.length);
  const contributions: Contribution[] = [];
  const bandSites: BandSite[] = [];
  const signals: SiteSignal[] = [];
  for (const site of sites) {
    warnings.push(...site.diagnostics, ...siteWarnings(site, options.radius));
    const signal = siteSignal(site, options, clock, context.running);
    signals.push(signal);
    const thermal = thermalModel(structure, site, options, warnings);
    const own = contributionsOf(signal, thermal, options, k);
    bandSites.push({ signal, disorder: own.map(({ disorder }) => disorder), isNearest: own.map(({ isNearest }) => isNearest) });
    for (const contribution of own) {
      contributions.push(contribution);
      for (let i = 0; i < k.length; i++) chi[i]! += contribution.chi[i]!;
    }
  }
  if (contributions.length === 0) {
    throw new InputError(
      `no atom but hydrogen lies within ${options.radius} Å of ${options.absorber}; a larger --radius, or a structure in Å, is wanted`,
    );
  }
  const total = contributions.reduce((sum, { area }) => sum + area, 0) || 1;
  const [first] = signals;
  const { table, potential } = first!;
  const kMax = options.kMax;
  const window = { name: 'hann', kMin: Math.min(WINDOW_START, kMax - 2), kMax, sill: 1, kWeight: K_WEIGHT };
  const transform = fourierTransform({
    k,
    chi,
    kWeight: window.kWeight,
    kMin: window.kMin,
    kMax,
    sill: window.sill,
    window: 'hann',
    rMax: 8,
  });
  return {
    program: { name: 'ringtrue', version: context.version },
    structure: { file: context.file, format: structure.format, atoms: structure.atoms.length, title: structure.title },
    options,
    absorbers: sites.map((site) => ({
      label: site.label,
      element: site.element,
      weight: site.weight,
      neighbours: site.atoms
        .slice(1)
        .flatMap(({ name, element, distance }) => (distance <= options.radius ? [{ label: name, element, distance }] : [])),
    })),
    scattering: {
      atoms: potential.spheres.map(({ element, role, muffinTinRadius, normanRadius }) => ({
        element,
        role,
        muffinTinRadius,
        normanRadius,
      })),
      interstitialPotentialEv: evFromHartree(potential.interstitialCoulomb),
      fermiLevelEv: evFromHartree(potential.fermiLevel),
      k: table.k,
      meanFreePath: table.pIm.map((p) => BOHR_ANGSTROM / p),
    },
    k,
    chi,
    paths: contributions.map((contribution) => describePath(contribution, options, k, total)),
    shells: describeShells(contributions, options, total),
    ...(options.bands ? { bands: priorBands(bandSites, coordinatePrecision(structure), options) } : {}),
    transform: { R: transform.R, real: transform.real, imaginary: transform.imaginary, window },
    neglected: Math.max(...signals.map(({ neglected }) => neglected)),
    warnings: unique(warnings),
    timing: { atoms: clock.atoms, potentials: clock.potentials, phases: clock.phases, paths: clock.paths, total: now() - started },
  };
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
    let area = 0;
    for (let i = 0; i < k.length; i++) {
      chi[i]! *= site.weight;
      if (k[i]! >= Math.min(WINDOW_START, options.kMax - 2)) area += Math.abs(chi[i]! * k[i]! ** 3);
    }
    return { site: signal, index, weight: site.weight, element: site.atoms[path.vertices[1]!]!.element, disorder, isNearest, chi, area };
  });
}

function describePath(
  { site, index, weight, disorder, area }: Contribution,
  options: PredictOptions,
  k: Float64Array,
  total: number,
): PredictedPath {
  const path = site.paths[index]!;
  const atoms = path.vertices.map((vertex) => site.site.atoms[vertex]!.element);
  const known: PredictedPath = {
    label: pathLabel(site.site, path.vertices),
    legs: path.legs,
    degeneracy: path.degeneracy * weight,
    halfLength: path.halfLength,
    atoms,
    sigma2: { thermal: disorder.sigma2, static: 0 },
    share: area / total,
  };
  if (!options.pathSignals) return known;
  const grid = k.filter((value) => value >= site.table.k[0]!);
  const { amplitude, phase } = site.signals[index]!.effective(grid);
  for (let i = 0; i < grid.length; i++) {
    const ki = grid[i]!;
    phase[i]! += -4 * ki * disorder.sigma2 * (1 / path.halfLength + 1 / site.wave.meanFreePath(ki)) - (4 / 3) * disorder.c3 * ki ** 3;
  }
  return { ...known, k: grid, amplitude, phase };
}

function describeShells(contributions: readonly Contribution[], options: PredictOptions, total: number): PredictedShell[] {
  const single = contributions.filter(({ site, index }) => site.paths[index]!.legs === 2);
  const members = single.map(({ site, index, weight, element, disorder }) => {
    const { halfLength, degeneracy } = site.paths[index]!;
    return { element, halfLength, degeneracy: degeneracy * weight, thermal: disorder.sigma2, thirdCumulant: disorder.c3 };
  });
  const absorber = contributions[0]!.site.site.element;
  return groupShells(members, distanceResolution(WINDOW_START, options.kMax)).map(
    ({ element, count, meanDistance, sigma2, members: indices }) => ({
      label: `${absorber}–${element} ${meanDistance.toFixed(2)} Å`,
      element,
      count,
      meanDistance,
      sigma2,
      share: indices.reduce((sum, j) => sum + single[j]!.area, 0) / total,
    }),
  );
}

/** What should be known about a site before its prediction is trusted. */
function siteWarnings(site: Site, radius: number): Diagnostic[] {
  const found: Diagnostic[] = [];
  const hydrogens = site.atoms.filter(({ element }) => element === 'H').length;
  if (hydrogens > 0) {
    found.push({
      code: 'hydrogens-left-out',
      message: `${hydrogens} hydrogen atoms around ${site.label} are left out: they scatter too weakly to be seen, and their spheres would distort those of their neighbours.`,
    });
  }
  if (!site.periodic) {
    const heavy = site.atoms.filter(({ element }) => element !== 'H');
    const reach = heavy.at(-1)!.distance;
    found.push({
      code: 'isolated-molecule',
      message: `${site.label} stands in an isolated molecule: its outer atoms lack neighbours, which moves the energy origin by about 5 eV and amplitudes by some per cent.`,
    });
    if (reach < radius) {
      found.push({
        code: 'cluster-ends-early',
        message: `The structure ends ${reach.toFixed(1)} Å from ${site.label}, inside the radius of ${radius} Å: farther shells are missing.`,
      });
    }
  }
  return found;
}

/** The same sentence once. */
function unique(diagnostics: readonly Diagnostic[]): Diagnostic[] {
  return [...new Map(diagnostics.map((diagnostic) => [`${diagnostic.code} ${diagnostic.message}`, diagnostic])).values()];
}
