/** From the parts of a prediction to its result: shells, paths, transform, shares, what should be known. */
import { BOHR_ANGSTROM, evFromHartree } from '../constants.js';
import { type Cumulants, distanceResolution, groupShells, hiddenByOneShell, type Shell, type ShellPath } from '../disorder/index.js';
import { type Diagnostic, InputError, type Running } from '../errors.js';
import { pathLabel } from '../paths/index.js';
import { fourierTransform, type PathDisorder } from '../spectrum/index.js';
import type { Site, Structure } from '../structure/types.js';
import { partsOf } from './parts.js';
import type { SiteSignal, StageClock } from './site-signal.js';
import type { PredictedPath, PredictedShell, PredictedThermal, Prediction, PredictOptions } from './types.js';

/** Window of shares and of the transform: sills of 1 Å⁻¹ from 3 Å⁻¹ to the end. */
const WINDOW_START = 3;
const K_WEIGHT = 3;

export interface PredictContext {
  /** Name of the file, for the result. */
  readonly file: string;
  readonly version: string;
  /** Clock in seconds, for the timing; default none (all zero). */
  readonly now?: () => number;
  readonly running?: Running;
}

/** One path of one site with its part of the whole. */
export interface Contribution {
  readonly site: SiteSignal;
  readonly index: number;
  readonly weight: number;
  readonly disorder: PathDisorder;
  /** Which model or oscillator σ² comes from. */
  readonly from: string;
  readonly isNearest: boolean;
  /** χ of this path, site weight included. */
  readonly chi: Float64Array;
  /** Its ∫|k³χ|. */
  readonly area: number;
  /** Of an ensemble: the path's signal is then the average itself, disorder included. */
  readonly cumulants?: Cumulants;
}

export interface DescribedSite {
  readonly signal: SiteSignal;
  readonly thermal: PredictedThermal;
  readonly contributions: readonly Contribution[];
}

/** ∫|k³χ| over the window of shares, in steps of the grid. */
export function areaOf(chi: Float64Array, k: Float64Array, kMax: number): number {
  let area = 0;
  for (let i = 0; i < k.length; i++) if (k[i]! >= Math.min(WINDOW_START, kMax - 2)) area += Math.abs(chi[i]! * k[i]! ** 3);
  return area;
}

/**
 * @param extra  more fields of the result, made when all else stands
 * @throws {InputError} no path at all
 */
export function assemble(
  structure: Structure,
  options: PredictOptions,
  context: PredictContext,
  {
    k,
    sites,
    warnings,
    clock,
    started,
  }: {
    readonly k: Float64Array;
    readonly sites: readonly DescribedSite[];
    readonly warnings: readonly Diagnostic[];
    readonly clock: StageClock;
    readonly started: number;
  },
  extra: (chi: Float64Array) => Partial<Prediction>,
): Prediction {
  const contributions = sites.flatMap((site) => site.contributions);
  if (contributions.length === 0) {
    throw new InputError(
      `no atom but hydrogen lies within ${options.radius} Å of ${options.absorber}; a larger --radius, or a structure in Å, is wanted`,
    );
  }
  const chi = new Float64Array(k.length);
  for (const part of contributions) for (let i = 0; i < k.length; i++) chi[i]! += part.chi[i]!;
  const total = contributions.reduce((sum, { area }) => sum + area, 0) || 1;
  const { table, potential } = sites[0]!.signal;
  const kMax = options.kMax;
  const window = { name: 'hann', kMin: Math.min(WINDOW_START, kMax - 2), kMax, sill: 1, kWeight: K_WEIGHT };
  const { name: _, ...settings } = window;
  const more = extra(chi);
  const used = more.chi ?? chi;
  const transform = fourierTransform({ k, chi: used, ...settings, window: 'hann', rMax: 8 });
  return {
    program: { name: 'ringtrue', version: context.version },
    structure: { file: context.file, format: structure.format, atoms: structure.atoms.length, title: structure.title },
    options,
    absorbers: sites.map(({ signal: { site }, thermal }) => ({
      label: site.label,
      element: site.element,
      weight: site.weight,
      neighbours: site.atoms
        .slice(1)
        .flatMap(({ name, element, distance }) => (distance <= options.radius ? [{ label: name, element, distance }] : [])),
      thermal,
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
    chi: used,
    paths: contributions.map((contribution) => describePath(contribution, options, k, total)),
    shells: describeShells(contributions, options, k, total),
    transform: { R: transform.R, real: transform.real, imaginary: transform.imaginary, window },
    neglected: Math.max(...sites.map(({ signal }) => signal.neglected)),
    warnings: unique(warnings),
    timing: {
      atoms: clock.atoms,
      potentials: clock.potentials,
      phases: clock.phases,
      paths: clock.paths,
      total: clock.now() - started,
    },
    // Where another χ than the sum of the paths is the result, its parts are not known.
    ...(options.bands && more.chi === undefined ? { contributions: partsOf(contributions, shellsOf(contributions, options).shells) } : {}),
    ...more,
  };
}

function describePath(contribution: Contribution, options: PredictOptions, k: Float64Array, total: number): PredictedPath {
  const { site, index, weight, disorder, from, area, cumulants } = contribution;
  const path = site.paths[index]!;
  const known: PredictedPath = {
    label: pathLabel(site.site, path.vertices),
    legs: path.legs,
    degeneracy: path.degeneracy * weight,
    halfLength: path.halfLength,
    atoms: path.vertices.map((vertex) => site.site.atoms[vertex]!.element),
    sigma2: { thermal: disorder.sigma2, static: 0, from },
    ...(cumulants ? { cumulants } : {}),
    share: area / total,
  };
  return options.pathSignals ? { ...known, ...signalOf(contribution, k) } : known;
}

/** |f_eff| (Å) and phase (rad) with which N S0² |f|/(kR²) e^{−2σ²k²} e^{−2R/λ} sin(2kR + phase) is this path's χ. */
function signalOf({ site, index, disorder, cumulants }: Contribution, grid: Float64Array) {
  const k = grid.filter((value) => value >= site.table.k[0]!);
  const { halfLength } = site.paths[index]!;
  const { amplitude, phase } = site.signals[index]!.effective(k);
  for (let i = 0; i < k.length; i++) {
    const ki = k[i]!;
    if (cumulants) amplitude[i]! *= Math.exp(2 * disorder.sigma2 * ki * ki);
    else phase[i]! += -4 * ki * disorder.sigma2 * (1 / halfLength + 1 / site.wave.meanFreePath(ki)) - (4 / 3) * disorder.c3 * ki ** 3;
  }
  return { k, amplitude, phase };
}

/** The single-scattering contributions and the shells they form. */
function shellsOf(contributions: readonly Contribution[], { kMax }: PredictOptions) {
  const single = contributions.filter(({ site, index }) => site.paths[index]!.legs === 2);
  const members = single.map(({ site, index, weight, disorder }): ShellPath => {
    const { halfLength, degeneracy, vertices } = site.paths[index]!;
    const { element } = site.site.atoms[vertices[1]!]!;
    return { element, halfLength, degeneracy: degeneracy * weight, thermal: disorder.sigma2, thirdCumulant: disorder.c3 };
  });
  const absorber = contributions[0]!.site.site.element;
  const shells = groupShells(members, distanceResolution(WINDOW_START, kMax)).map((shell) => ({
    ...shell,
    label: `${absorber}–${shell.element} ${shell.meanDistance.toFixed(2)} Å`,
    contributions: shell.members.map((j) => single[j]!),
  }));
  return { single, members, shells };
}

function describeShells(contributions: readonly Contribution[], options: PredictOptions, k: Float64Array, total: number): PredictedShell[] {
  const { single, members, shells } = shellsOf(contributions, options);
  return shells.map((shell) => {
    const { label, element, count, meanDistance, sigma2, thirdCumulant } = shell;
    const bound = bFactorBound(shell, single, members);
    return {
      label,
      element,
      count,
      meanDistance,
      sigma2,
      thirdCumulant,
      hiddenByOneShell: hidden(shell, single, members, options, k),
      ...(bound === undefined ? {} : { bFactorBound: bound }),
      share: shell.members.reduce((sum, j) => sum + single[j]!.area, 0) / total,
    };
  });
}

/** With the real scattering of the member nearest to the mean distance for all; nothing can be hidden by a shell of one distance. */
function hidden(
  shell: Shell,
  single: readonly Contribution[],
  paths: readonly ShellPath[],
  { kMax }: PredictOptions,
  grid: Float64Array,
): number {
  if (shell.members.length === 1) return 0;
  const off = (j: number): number => Math.abs(paths[j]!.halfLength - shell.meanDistance);
  const central = shell.members.reduce((best, j) => (off(j) < off(best) ? j : best));
  const { site } = single[central]!;
  const { k, amplitude, phase } = signalOf(single[central]!, grid);
  const step = k[1]! - k[0]!;
  return hiddenByOneShell(shell, paths, {
    kMin: Math.min(WINDOW_START, kMax - 2),
    kMax,
    signal: (value, R) => {
      const i = Math.min(k.length - 1, Math.round((value - k[0]!) / step));
      return { amplitude: amplitude[i]! * Math.exp((-2 * R) / site.wave.meanFreePath(k[i]!)), phase: phase[i]! };
    },
  });
}

/** U of the absorber plus U of the scatterer, averaged over a shell: what independent motion of the two would give, Å². */
function bFactorBound(shell: Shell, single: readonly Contribution[], paths: readonly ShellPath[]): number | undefined {
  let sum = 0;
  for (const j of shell.members) {
    const { site, index } = single[j]!;
    const { atoms } = site.site;
    const own = atoms[0]!.uIso;
    const { members } = site.paths[index]!;
    for (const [, atom] of members) {
      const u = atoms[atom!]!.uIso;
      if (own === undefined || u === undefined) return undefined;
      sum += (paths[j]!.degeneracy * (own + u)) / members.length;
    }
  }
  return sum / shell.count;
}

/** What should be known about a site before its prediction is trusted. */
export function siteWarnings(site: Site, radius: number): Diagnostic[] {
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
