/**
 * The three invented sites the judgement is calibrated on, each predicted once: a monomer, a dimer, a crystal. What a trial changes
 * (coordinates, disorder, noise) comes from truth.ts.
 */
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { type Body, ensemble } from '../../demo-structures/make/vibrations.js';
import { readStructure, reduce } from '../../packages/core/src/index.js';
import { dataVector } from '../../packages/core/src/judgement/data-vector.js';
import { rivalsOf } from '../../packages/core/src/judgement/rivals.js';
import { prepareTrial, type Trial, type TrialSpectrum } from '../../packages/core/src/judgement/trial.js';
import { normalDeviates } from '../../packages/core/src/numerics/random.js';
import { ENERGY_ORIGIN } from '../../packages/core/src/predict/unknowns.js';

export const TEMPERATURE = 10;
export const R_RANGE = [1, 3.5] as const;
export const K_GRID_MAX = 14.5;

export interface CalibrationSystem {
  readonly name: 'monomer' | 'dimer' | 'crystal';
  /** The candidate as predicted; its data vector is a placeholder until a trial has made data. */
  readonly trial: Trial;
  /** The same site with one neighbour of the first shell missing: a wrong topology. */
  readonly wrong: TrialSpectrum;
  /** Thermal displacements of the truth, Å (3 · atoms of the body), from force constants of their own. */
  readonly displacements: (normal: () => number) => () => Float64Array;
  /** Key of the coordinate error an atom has: atoms that symmetry makes alike share it, as they do in a refinement. */
  readonly errorKey: (site: number, atom: number) => string;
  /** Body index of an atom of a site. */
  readonly bodyIndex: (site: number, atom: number) => number;
}

const SOURCES = {
  monomer: { file: 'redoxin-site.xyz', absorber: 'Fe', maxLegs: 4, radius: 4.5 },
  dimer: { file: 'oxidase-model-one.xyz', absorber: 'Mn', maxLegs: 2, radius: 4.5 },
  crystal: { file: 'tideglass.cif', absorber: 'Mn', maxLegs: 3, radius: 4.5 },
} as const;

/** Atoms of the crystal farther out than this are tied to their places, Å. */
const HELD_FROM = 5.5;
const BODY_RADIUS = 7;

export function calibrationSystem(name: CalibrationSystem['name']): CalibrationSystem {
  const { file, absorber, maxLegs, radius } = SOURCES[name];
  const structure = readStructure(readFileSync(fileURLToPath(new URL(`../../demo-structures/${file}`, import.meta.url)), 'utf8'));
  const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  const placeholder = dataVector(flatReduction(), { kRange: [3, 12], rRange: R_RANGE, kWeight: 3 }, 0.1, name);
  const request = { vector: placeholder, absorber, edge: 'K', temperature: TEMPERATURE, file: name, energyOrigin: ENERGY_ORIGIN } as const;
  const trial = prepareTrial(structure, [request], { radius, maxLegs }, clock);
  const { sites } = trial.spectra[0]!;
  if (name === 'crystal') {
    const atoms = sites[0]!.signal.site.atoms.filter(({ distance }) => distance <= BODY_RADIUS);
    const held = new Set(atoms.flatMap(({ distance }, i) => (distance > HELD_FROM ? [i] : [])));
    return withBody(name, trial, { atoms, held }, (_, atom) => atom);
  }
  return withBody(name, trial, { atoms: structure.atoms }, (site, atom) => sites[site]!.signal.site.atoms[atom]!.source);
}

function withBody(name: CalibrationSystem['name'], trial: Trial, body: Body, bodyIndex: CalibrationSystem['bodyIndex']): CalibrationSystem {
  // the modes are those of the body, whoever draws: the source of chance is put in for each trial
  let source: () => number = () => 0;
  const next = ensemble(body, TEMPERATURE, 0, () => source());
  const { sites } = trial.spectra[0]!;
  const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  return {
    name,
    trial,
    wrong: rivalsOf(trial, clock).next().value!.spectra[0]!,
    displacements: (normal) => () => {
      source = normal;
      return next();
    },
    errorKey: (site, atom) => {
      const { source: listed, distance } = sites[site]!.signal.site.atoms[atom]!;
      return name === 'crystal' ? `${listed} ${distance.toFixed(3)}` : String(listed);
    },
    bodyIndex,
  };
}

/** Something that oscillates, on the grid all trials use. */
function flatReduction() {
  const k = Float64Array.from({ length: Math.round((K_GRID_MAX - 0.5) / 0.05) + 1 }, (_, i) => 0.5 + 0.05 * i);
  const normal = normalDeviates(1);
  return reduce([
    {
      kind: 'chi',
      title: 'placeholder',
      columns: {},
      guess: '',
      diagnostics: [],
      k,
      chi: k.map(() => 0.01 * normal()),
      lines: Int32Array.from(k, (_, i) => i + 1),
    },
  ]);
}
