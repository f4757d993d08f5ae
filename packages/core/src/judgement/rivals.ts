/**
 * Structures near the candidate that the data might not exclude, made from it by one chemical change each: a neighbour less or more,
 * elements exchanged, the second metal gone or moved, all distances stretched. Phase shifts are reused; paths are found anew.
 */

import { covalentRadius } from '../elements/index.js';
import type { Running } from '../errors.js';
import type { StageClock } from '../predict/site-signal.js';
import { siteScattering } from '../predict/site-signal.js';
import { isMetal } from '../structure/index.js';
import type { SiteAtom, Vec3 } from '../structure/types.js';
import { changedSite, type Trial, type TrialSite, type TrialSpectrum } from './trial.js';
import type { RivalResult } from './types.js';

export interface Rival {
  readonly label: string;
  readonly kind: RivalResult['kind'];
  readonly spectra: readonly TrialSpectrum[];
}

/** First-shell neighbours of one element closer together than this are one question, asked once. Å */
const SAME_NEIGHBOUR = 0.02;
/** Å: a second metal is looked for up to here. */
const METAL_REACH = 4;
const METAL_MOVES = [-0.1, 0.1] as const;
const STRETCHES = [-0.02, 0.02] as const;
/** Å, light neighbour put into a gap: sum of the covalent radii less this (metal–oxygen bonds run shorter than the radii say). */
const LIGHT_SHORTER = 0.1;

const LIGHT = new Set(['N', 'O', 'C', 'F']);
const HEAVY = new Set(['S', 'Cl', 'P', 'Se']);

/** Å: an atom put into a gap stays this far from all others. */
const NO_NEARER = 1.3;

/** What a rival does to one site: changed atoms by index, added ones at the end. */
interface Change {
  readonly removed?: ReadonlySet<number>;
  readonly atoms?: ReadonlyMap<number, Partial<Pick<SiteAtom, 'element' | 'position' | 'distance' | 'name'>>>;
  readonly added?: { readonly atom: SiteAtom; readonly twin: number };
}

/** Makes the rivals one after another, so that each can be judged and let go. */
export function* rivalsOf(trial: Trial, clock: StageClock, running?: Running): Generator<Rival> {
  const sites = trial.spectra.flatMap(({ sites: own }, s) => own.map((site, i) => ({ s, i, site })));
  const apply = (
    label: string,
    kind: Rival['kind'],
    changeOf: (site: TrialSite, s: number, i: number) => Change | undefined,
  ): Rival | undefined => {
    let touched = false;
    const spectra = trial.spectra.map((spectrum, s) => ({
      ...spectrum,
      sites: spectrum.sites.map((site, i) => {
        const change = changeOf(site, s, i);
        if (!change) return site;
        touched = true;
        return changed(site, change, spectrum, clock, running);
      }),
    }));
    return touched ? { label, kind, spectra } : undefined;
  };
  // The same site may be seen by several spectra: a change concerns it in all of them.
  const siteKey = ({ signal: { site } }: TrialSite): string => `${site.label} ${site.variant ?? ''}`;
  const distinct = sites.filter(({ site }, n) => sites.findIndex((other) => siteKey(other.site) === siteKey(site)) === n);
  const onSite = (site: TrialSite, label: string, kind: Rival['kind'], change: (site: TrialSite) => Change) =>
    apply(label, kind, (other) => (siteKey(other) === siteKey(site) ? change(other) : undefined));

  for (const { site } of distinct) {
    const { label, atoms } = site.signal.site;
    const shell = [...site.nearest].sort((a, b) => atoms[a]!.distance - atoms[b]!.distance);
    const asked: number[] = [];
    for (const atom of shell) {
      const { element, distance, name } = atoms[atom]!;
      if (asked.some((other) => atoms[other]!.element === element && Math.abs(atoms[other]!.distance - distance) < SAME_NEIGHBOUR))
        continue;
      asked.push(atom);
      const rival = onSite(site, `${name} (${distance.toFixed(2)} Å) removed from ${label}`, 'neighbour-removed', () => ({
        removed: new Set([atom]),
      }));
      if (rival && shell.length > 1) yield rival;
    }
    const gap = largestGap(site);
    if (gap) {
      const rival = onSite(site, `one O added to ${label} at ${gap.distance.toFixed(2)} Å`, 'neighbour-added', () => ({
        added: { atom: gap, twin: shell[0]! },
      }));
      if (rival) yield rival;
    }
    const exchange = (from: ReadonlySet<string>, to: string, kind: Rival['kind']) => {
      const atom = shell.find((i) => from.has(atoms[i]!.element));
      if (atom === undefined || atoms[atom]!.element === to) return undefined;
      const { name, element } = atoms[atom]!;
      return onSite(site, `${name} of ${label}: ${element} exchanged for ${to}`, kind, () => ({
        atoms: new Map([[atom, { element: to }]]),
      }));
    };
    for (const rival of [
      exchange(LIGHT, 'S', 'light-heavy-exchange'),
      exchange(HEAVY, 'O', 'light-heavy-exchange'),
      exchange(new Set(['O']), 'N', 'O-N-exchange'),
      exchange(new Set(['N']), 'O', 'O-N-exchange'),
    ])
      if (rival) yield rival;
  }

  const metals = ({ signal: { site }, nearest }: TrialSite): number[] => {
    const found = site.atoms.flatMap(({ element, distance }, i) =>
      i > 0 && isMetal(element) && distance <= METAL_REACH && !nearest.has(i) ? [i] : [],
    );
    const closest = Math.min(...found.map((i) => site.atoms[i]!.distance));
    return found.filter((i) => site.atoms[i]!.distance <= closest + 0.1);
  };
  const removed = apply('the second metal removed', 'metal-removed', (site) => {
    const found = metals(site);
    return found.length > 0 ? { removed: new Set(found) } : undefined;
  });
  if (removed) yield removed;
  for (const move of METAL_MOVES) {
    const rival = apply(`metal–metal distance ${move > 0 ? 'longer' : 'shorter'} by ${Math.abs(move)} Å`, 'metal-metal', (site) => {
      const found = metals(site);
      if (found.length === 0) return undefined;
      return { atoms: new Map(found.map((i) => [i, radially(site, i, (distance) => distance + move)])) };
    });
    if (rival) yield rival;
  }
  for (const stretch of STRETCHES) {
    const rival = apply(`all distances ${stretch > 0 ? 'longer' : 'shorter'} by ${100 * Math.abs(stretch)} %`, 'stretch', (site) => ({
      atoms: new Map(site.signal.site.atoms.map((_, i) => [i, i === 0 ? {} : radially(site, i, (distance) => distance * (1 + stretch))])),
    }));
    if (rival) yield rival;
  }
}

function radially({ signal }: TrialSite, atom: number, to: (distance: number) => number): { position: Vec3; distance: number } {
  const centre = signal.site.atoms[0]!.position;
  const { position, distance } = signal.site.atoms[atom]!;
  const wanted = to(distance);
  const along = (axis: 0 | 1 | 2): number => centre[axis] + ((position[axis] - centre[axis]) * wanted) / distance;
  return { position: [along(0), along(1), along(2)], distance: wanted };
}

function changed(site: TrialSite, change: Change, spectrum: TrialSpectrum, clock: StageClock, running?: Running): TrialSite {
  const { signal, nearest } = site;
  const atoms = signal.site.atoms.map((atom, i) => ({ ...atom, ...change.atoms?.get(i) }));
  const kinds = Array.from(signal.kindOfAtom);
  for (const i of change.removed ?? []) kinds[i] = -1;
  const twinOf = new Map(site.twinOf);
  const shell = new Set([...nearest].filter((i) => !change.removed?.has(i)));
  if (change.added) {
    shell.add(atoms.length);
    twinOf.set(atoms.length, change.added.twin);
    atoms.push(change.added.atom);
    kinds.push(-1);
  }
  // An atom whose element is new to its place scatters like one of that element elsewhere in the site, if there is one.
  const fresh = atoms.flatMap(({ element }, i) => (element !== signal.site.atoms[i]?.element && kinds[i] !== undefined ? [i] : []));
  const known = new Map<string, number>();
  signal.kindOfAtom.forEach((kind, i) => {
    const { element } = signal.site.atoms[i]!;
    if (kind > 0 && !known.has(element)) known.set(element, kind);
  });
  const missing = fresh.some((i) => !known.has(atoms[i]!.element));
  if (missing) {
    const present = atoms.filter((_, i) => !change.removed?.has(i));
    const scattering = siteScattering({ ...signal.site, atoms: present }, spectrum.options, clock, running);
    const kindOfAtom = new Int32Array(atoms.length).fill(-1);
    let n = 0;
    atoms.forEach((_, i) => {
      if (!change.removed?.has(i)) kindOfAtom[i] = scattering.kindOfAtom[n++]!;
    });
    return changedSite(site, { atoms, kindOfAtom, nearest: shell, twinOf, scattering }, spectrum, clock, running);
  }
  for (const i of fresh) kinds[i] = known.get(atoms[i]!.element)!;
  return changedSite(site, { atoms, kindOfAtom: Int32Array.from(kinds), nearest: shell, twinOf }, spectrum, clock, running);
}

/** An oxygen where the first shell leaves most room, or undefined where there is none. */
function largestGap({ signal: { site }, nearest }: TrialSite): SiteAtom | undefined {
  const centre = site.atoms[0]!.position;
  const bonds = [...nearest].map((i) => unit(site.atoms[i]!.position, centre));
  if (bonds.length === 0) return undefined;
  let best: Vec3 = [0, 0, 1];
  let widest = -2;
  const light = [...nearest].filter((i) => LIGHT.has(site.atoms[i]!.element)).map((i) => site.atoms[i]!.distance);
  const distance =
    light.length > 0
      ? light.reduce((sum, d) => sum + d, 0) / light.length
      : covalentRadius(site.element) + covalentRadius('O') - LIGHT_SHORTER;
  const around = site.atoms.filter((atom, i) => i > 0 && atom.element !== 'H' && atom.distance < distance + NO_NEARER);
  const at = (way: Vec3): Vec3 => [centre[0] + distance * way[0], centre[1] + distance * way[1], centre[2] + distance * way[2]];
  const POINTS = 1000;
  for (let n = 0; n < POINTS; n++) {
    // points even over the sphere: a spiral in steps of the golden angle
    const z = 1 - (2 * n + 1) / POINTS;
    const r = Math.sqrt(1 - z * z);
    const phi = n * Math.PI * (3 - Math.sqrt(5));
    const way: Vec3 = [r * Math.cos(phi), r * Math.sin(phi), z];
    const room = -Math.max(...bonds.map((b) => b[0] * way[0] + b[1] * way[1] + b[2] * way[2]));
    if (room > widest && around.every(({ position }) => apart(position, at(way)) >= NO_NEARER)) {
      widest = room;
      best = way;
    }
  }
  if (widest === -2) return undefined;
  return {
    element: 'O',
    name: 'O added',
    position: at(best),
    distance,
    occupancy: 1,
    source: -1,
    symmetry: 'x,y,z',
  };
}

const apart = (a: Vec3, b: Vec3): number => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

function unit(from: Vec3, centre: Vec3): Vec3 {
  const [x, y, z] = [from[0] - centre[0], from[1] - centre[1], from[2] - centre[2]];
  const length = Math.hypot(x, y, z);
  return [x / length, y / length, z / length];
}
