/**
 * The spread a prediction has before it meets any data: draws from what is expected of all that is not known exactly
 * (unknowns.ts), around the energy origin and S0² the prediction was asked for, summed to χ(k). Å, Å⁻¹, Å², eV.
 */
import { normalDeviates } from '../numerics/random.js';
import { type PathDisorder, PathSum } from '../spectrum/index.js';
import { type CoordinatePrecision, distanceSd } from '../structure/index.js';
import type { SiteSignal } from './site-signal.js';
import type { Bands, PredictOptions } from './types.js';
import {
  atomClasses,
  ENERGY_ORIGIN,
  EXTRA_STATIC,
  LN_AMPLITUDE,
  LN_THERMAL_SD,
  lengthSd,
  PATH_CLASSES,
  pathClass,
  radialPulls,
} from './unknowns.js';

const DRAWS = 200;
const SEED = 1;
const STEP = 0.1;
/** Energy origins are drawn from this many strata of equal probability, since each costs an evaluation of all signals. */
const STRATA = 24;
const PER_STRATUM = 400;

/** A site's signals with the disorder predicted for each path, and which paths are its nearest neighbours. */
export interface BandSite {
  readonly signal: SiteSignal;
  readonly disorder: readonly PathDisorder[];
  readonly isNearest: readonly boolean[];
}

/** Bands of the whole prediction; the same input gives the same bands. */
export function priorBands(sites: readonly BandSite[], precision: CoordinatePrecision, options: PredictOptions): Bands {
  const k = Float64Array.from({ length: Math.floor(options.kMax / STEP + 1e-9) + 1 }, (_, i) => i * STEP);
  const normal = normalDeviates(SEED);
  const prepared = sites.map((site) => ({ ...site, sums: sumsByStratum(site.signal, k, options.e0), parts: partsOf(site, precision) }));
  const draws: Float64Array[] = [];
  const one = new Float64Array(k.length);
  for (let draw = 0; draw < DRAWS; draw++) {
    const chi = new Float64Array(k.length);
    // 5 is coprime to 24: every stratum is used alike, in no order that follows the other draws.
    const stratum = (draw * 5) % STRATA;
    const s02 = options.s02 * Math.exp(LN_AMPLITUDE.sd * normal());
    const thermal = PATH_CLASSES.map(() => Math.exp(LN_THERMAL_SD * normal()));
    const extra = PATH_CLASSES.map(() => EXTRA_STATIC * Math.abs(normal()));
    const length = PATH_CLASSES.map(() => normal());
    for (const { sums, parts, disorder, signal } of prepared) {
      const moved = parts.scatterers.map((sd) => sd * normal());
      const drawn = disorder.map(({ sigma2, c3 }, j): PathDisorder => {
        const { kind, lengthSd, pulls } = parts.paths[j]!;
        let shift = lengthSd * length[kind]!;
        for (const { scatterer, pull } of pulls) shift += pull * moved[scatterer]!;
        return { sigma2: sigma2 * thermal[kind]! + extra[kind]!, c3: c3 * thermal[kind]! ** 2, shift };
      });
      sums[stratum]!.sum(drawn, s02, one);
      for (let i = 0; i < k.length; i++) chi[i]! += signal.site.weight * one[i]!;
    }
    draws.push(chi);
  }
  return { k, ...quantiles(draws, k.length) };
}

/** Signals on the band's grid for the mean energy origin of each stratum; strata from a sorted sample, good to 1 % of the spread. */
function sumsByStratum({ signals, wave, table }: SiteSignal, k: Float64Array, e0: number): PathSum[] {
  const normal = normalDeviates(SEED + 1);
  const sample = Float64Array.from({ length: STRATA * PER_STRATUM }, normal).sort();
  return Array.from({ length: STRATA }, (_, i) => {
    const stratum = sample.subarray(i * PER_STRATUM, (i + 1) * PER_STRATUM);
    const mean = stratum.reduce((sum, value) => sum + value, 0) / PER_STRATUM;
    return new PathSum(signals, wave, k, e0 + ENERGY_ORIGIN.sd * mean, table.k[0]!);
  });
}

interface PathPart {
  /** Index into PATH_CLASSES. */
  readonly kind: number;
  /** Å */
  readonly lengthSd: number;
  /** Change of the half length with the radial displacement of each scatterer on the way. */
  readonly pulls: readonly { readonly scatterer: number; readonly pull: number }[];
}

function partsOf({ signal, isNearest }: BandSite, precision: CoordinatePrecision): { scatterers: number[]; paths: PathPart[] } {
  const { site, paths } = signal;
  const [absorber] = site.atoms;
  const scattererOf = new Map<number, number>();
  const scatterers: number[] = [];
  for (const { legs, members } of paths) {
    if (legs !== 2) continue;
    for (const [, atom] of members) scattererOf.set(atom!, scatterers.length);
    scatterers.push(distanceSd(precision, absorber!, site.atoms[members[0]![1]!]!));
  }
  const nearest = new Set(paths.flatMap(({ members }, j) => (isNearest[j] ? members.map(([, atom]) => atom!) : [])));
  const classes = atomClasses(site, nearest);
  const parts = paths.map(({ vertices, halfLength }): PathPart => {
    const elements = vertices.slice(1).map((vertex) => site.atoms[vertex]!.element);
    const pulls = radialPulls(site, vertices).flatMap(({ atom, pull }) => {
      const scatterer = scattererOf.get(atom);
      return scatterer === undefined ? [] : [{ scatterer, pull }];
    });
    return {
      kind: PATH_CLASSES.indexOf(pathClass(vertices, classes)),
      lengthSd: lengthSd(halfLength, elements),
      pulls,
    };
  });
  return { scatterers, paths: parts };
}

function quantiles(draws: readonly Float64Array[], n: number): Omit<Bands, 'k'> {
  const room = () => new Float64Array(n);
  const out = { low95: room(), low68: room(), high68: room(), high95: room() };
  const column = new Float64Array(draws.length);
  const at = (part: number): number => {
    const position = part * (column.length - 1);
    const i = Math.floor(position);
    return column[i]! + (position - i) * ((column[i + 1] ?? column[i]!) - column[i]!);
  };
  for (let i = 0; i < n; i++) {
    draws.forEach((chi, j) => {
      column[j] = chi[i]!;
    });
    column.sort();
    out.low95[i] = at(0.025);
    out.low68[i] = at(0.16);
    out.high68[i] = at(0.84);
    out.high95[i] = at(0.975);
  }
  return out;
}
