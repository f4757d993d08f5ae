/**
 * The hidden truths: what each measured sample is made of, and χ(k) of its ensemble (minutes; the results are kept in truth/). The
 * truth differs from what a judge computes on purpose: another self-energy, longer paths, another force field, a frozen spread.
 */
import { readFileSync } from 'node:fs';
import { normalDeviates } from '../../packages/core/src/numerics/random.js';
import type { SiteSignalOptions } from '../../packages/core/src/predict/site-signal.js';
import { readStructure } from '../../packages/core/src/structure/index.js';
import type { Site, Structure, Vec3 } from '../../packages/core/src/structure/types.js';
import { type EnsembleChi, ensembleChi } from './ensemble-chi.js';
import { type Model, oxidase, REDUCED_DISTANCES, TRUE_DISTANCES } from './oxidase.js';
import { redoxin } from './redoxin.js';
import { ensemble } from './vibrations.js';
import { xyz } from './write.js';

/** K */
const TEMPERATURE = 15;
/** Å an axis and atom. */
const FROZEN_SPREAD = 0.018;
const SETTINGS: SiteSignalOptions = { edge: 'K', selfEnergy: 'hedin-lundqvist', radius: 5.5, maxLegs: 4, kMax: 14 };

export const TRUTHS = ['oxidase', 'oxidase-reduced', 'redoxin', 'tideglass'] as const;
export type TruthName = (typeof TRUTHS)[number];

const FRAMES: Readonly<Record<TruthName, number>> = { oxidase: 240, 'oxidase-reduced': 100, redoxin: 240, tideglass: 80 };

/** @param frames  default as many as the demo spectra have */
export function truth(name: TruthName, frames = FRAMES[name]): EnsembleChi {
  if (name === 'tideglass') return crystalTruth(frames);
  const model = name === 'redoxin' ? redoxin() : oxidase(name === 'oxidase' ? TRUE_DISTANCES : REDUCED_DISTANCES);
  const structure = readStructure(xyz('invented', model.atoms));
  const draw = ensemble({ atoms: structure.atoms, held: heldAtoms(model) }, TEMPERATURE, FROZEN_SPREAD, normalDeviates(11));
  return ensembleChi(structure, name === 'redoxin' ? 'Fe' : 'Mn', frames, SETTINGS, () => {
    const u = draw();
    return (site) => site.atoms.map(({ source, position }) => displaced(position, u, source));
  });
}

const displaced = (p: Vec3, u: Float64Array, i: number): Vec3 => [p[0] + u[3 * i]!, p[1] + u[3 * i + 1]!, p[2] + u[3 * i + 2]!];

/** The backbone, and the cut ends of side chains. */
function heldAtoms({ atoms }: Model): Set<number> {
  const isHeld = (name: string, residue: string) =>
    (/^(ASP|GLU|HIS|CYS)$/.test(residue) && /^(N|C|O|CA)$/.test(name)) || (/^(ARG|LYS)$/.test(residue) && name === 'CD');
  return new Set(atoms.flatMap(({ name, residue }, i) => (isHeld(name, residue.name) ? [i] : [])));
}

/** Cells of the supercell along a, b, c. */
const REPEATS = [3, 3, 4] as const;

/** A supercell that repeats, a frame drawn for the whole, one of its metal atoms the absorber in turn. */
function crystalTruth(frames: number): EnsembleChi {
  const structure = readStructure(readFileSync(new URL('../tideglass.cif', import.meta.url), 'utf8'));
  const { a, b, c } = structure.cell!;
  const box: Vec3 = [REPEATS[0] * a, REPEATS[1] * b, REPEATS[2] * c];
  const atoms = supercell(structure, [a, b, c]);
  const metals = atoms.flatMap((_, i) => (i % 6 === 0 ? [i] : []));
  const draw = ensemble({ atoms, box }, TEMPERATURE, FROZEN_SPREAD, normalDeviates(12));
  let turn = 0;
  return ensembleChi(structure, 'Mn', frames, SETTINGS, () => {
    const u = draw();
    const metal = metals[(turn++ * 7) % metals.length]!;
    return (site: Site) => site.atoms.map(({ position }) => displaced(position, u, standIn(atoms, box, metal, site, position)));
  });
}

/** Whole cells, atom by atom. Corner metals come first of every six: their surroundings lie as the site's do, those of the other are turned. */
function supercell(structure: Structure, [a, b, c]: Vec3): { element: string; position: Vec3 }[] {
  const u = structure.atoms.find(({ element }) => element === 'O')!.position[0] / a;
  const basis: readonly (readonly [string, Vec3])[] = [
    ['Mn', [0, 0, 0]],
    ['O', [u, u, 0]],
    ['O', [-u, -u, 0]],
    ['Mn', [0.5, 0.5, 0.5]],
    ['O', [0.5 + u, 0.5 - u, 0.5]],
    ['O', [0.5 - u, 0.5 + u, 0.5]],
  ];
  const atoms: { element: string; position: Vec3 }[] = [];
  for (let i = 0; i < REPEATS[0]; i++)
    for (let j = 0; j < REPEATS[1]; j++)
      for (let k = 0; k < REPEATS[2]; k++)
        for (const [element, [x, y, z]] of basis) atoms.push({ element, position: [a * (x + i), b * (y + j), c * (z + k)] });
  return atoms;
}

/** The supercell's atom at a place of the site, the site's absorber laid on `metal`. */
function standIn(atoms: readonly { readonly position: Vec3 }[], box: Vec3, metal: number, site: Site, position: Vec3): number {
  const from = site.atoms[0]!.position;
  const to = atoms[metal]!.position;
  for (let i = 0; i < atoms.length; i++) {
    const p = atoms[i]!.position;
    let far = 0;
    for (let c = 0; c < 3; c++) {
      const d = position[c]! - from[c]! + to[c]! - p[c]!;
      far = Math.max(far, Math.abs(d - box[c]! * Math.round(d / box[c]!)));
    }
    if (far < 0.01) return i;
  }
  throw new Error('demo structure: the supercell lacks an atom of the site');
}
