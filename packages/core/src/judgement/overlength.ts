/**
 * Are the structure's distances those of the data? Refits with free distances: one common stretch, and one shift per shell class.
 * The scatterers' own shifts (coordinates) and the classes' (theory) stay in the fit with their priors, so that the posterior width
 * of a free distance is data, coordinates and theory together: s² = s_fit² + s_coord² + s_theory². Å.
 */
import type { PathClass } from '../predict/unknowns.js';
import { type Minimum, minimise } from './minimise.js';
import { covarianceOf } from './posterior.js';
import type { Trial, TrialSpectrum } from './trial.js';
import { carriedOver, type Freedom, type TrialModel, trialModel } from './trial-model.js';
import type { Overlength, ShellStretch } from './types.js';

/** A lengthening counts from here, in standard deviations and in Å. */
const LEAST_Z = 2;
const LEAST_SHIFT = 0.02;
/** z that 95 % confidence (two-sided) and 80 % power ask for: 1.960 + 0.842. */
const DETECTABLE = 2.802;
/** Å: what no data of this kind should need to be told; beyond it, nothing is detectable. */
const BLIND = 0.25;
/** Starts of the refits: the phase 2kR folds at about 0.15 Å. */
const STRETCH_STARTS = [-0.06, -0.03, 0.03, 0.06];
const SHIFT_STARTS = [-0.15, -0.1, -0.05, 0.05, 0.1, 0.15];
/** Iterations of a rough look, and how far above the known minimum it may end to be followed. */
const ROUGH = 2;
const PROMISING = 20;

const FREE_CLASSES: readonly PathClass[] = ['nearest', 'metal', 'beyond'];

/** @param best  of the fit with distances held, over the same spectra */
export function overlength(trial: Trial, model: TrialModel, best: Minimum, spread: number): Overlength {
  const stretched = refit(trial, model, best, spread, 'stretch');
  const s = stretched.model.indexOf('free-stretch')!;
  const stretchSd = stretched.model.list[s]!.sd;
  const value = stretched.minimum.z[s]! * stretchSd;
  const sd = Math.sqrt(covarianceOf(stretched.minimum).get(s, s)) * stretchSd;

  const freed = refit(trial, model, best, spread, 'classes');
  const covariance = covarianceOf(freed.minimum);
  const shells = trial.spectra
    .filter((spectrum, i, all) => all.findIndex(({ element }) => element === spectrum.element) === i)
    .flatMap((spectrum) =>
      FREE_CLASSES.flatMap((kind): (ShellStretch & { kind: PathClass })[] => {
        const p = freed.model.indexOf(`free-shift ${spectrum.element} ${kind}`);
        if (p === undefined) return [];
        const unit = freed.model.list[p]!.sd;
        const deltaR = freed.minimum.z[p]! * unit;
        const shellSd = Math.sqrt(covariance.get(p, p)) * unit;
        const { label, distance } = describeClass(spectrum, kind);
        return [{ kind, label, structureDistance: distance, deltaR, sd: shellSd, z: deltaR / shellSd, detectable: DETECTABLE * shellSd }];
      }),
    );
  const first = shells.find(({ kind }) => kind === 'nearest');
  const detectable = Math.max(LEAST_SHIFT, first?.detectable ?? Infinity);
  const telling = shells.filter(({ kind }) => kind !== 'beyond');
  const verdict = verdictOf(telling, detectable);
  return {
    stretch: { value, sd, z: value / sd, gain: Math.max(0, best.x - stretched.minimum.x) },
    shells: shells.map(({ kind: _, ...shell }) => shell),
    gain: Math.max(0, best.x - freed.minimum.x),
    freed: shells.length,
    verdict,
    sentence: sentenceOf(verdict, telling, detectable),
    detectable,
  };
}

function verdictOf(shells: readonly ShellStretch[], detectable: number): Overlength['verdict'] {
  const counts = ({ z, deltaR }: ShellStretch): boolean => Math.abs(z) >= LEAST_Z && Math.abs(deltaR) >= LEAST_SHIFT;
  const strongest = shells.filter(counts).sort((a, b) => Math.abs(b.z) - Math.abs(a.z))[0];
  if (strongest) return strongest.deltaR < 0 ? 'overlong' : 'too-short';
  return detectable > BLIND ? 'not-detectable' : 'none';
}

const EXPLANATIONS =
  'Possible reasons, in no order of likelihood: reduction by the beam of the diffraction experiment; a different state in crystal and sample; restraints or resolution in the refinement; mixed occupancy.';

function sentenceOf(verdict: Overlength['verdict'], shells: readonly ShellStretch[], detectable: number): string {
  const moved = shells
    .filter(({ z, deltaR }) => Math.abs(z) >= LEAST_Z && Math.abs(deltaR) >= LEAST_SHIFT)
    .map(
      ({ label, deltaR, sd, structureDistance }) =>
        `${label} by ${Math.abs(deltaR).toFixed(3)} ± ${sd.toFixed(3)} Å (${structureDistance.toFixed(3)} Å in the structure, ${(structureDistance + deltaR).toFixed(3)} Å wanted by the data)`,
    );
  switch (verdict) {
    case 'overlong':
      return `Distances of the structure are longer than the data's: ${moved.join('; ')}. ${EXPLANATIONS}`;
    case 'too-short':
      return `Distances of the structure are shorter than the data's: ${moved.join('; ')}. Possible reasons, in no order of likelihood: a different state in crystal and sample; restraints or resolution in the refinement; an optimised model that binds too tightly.`;
    case 'none':
      return `No lengthening of the first shell is seen; one of ${detectable.toFixed(3)} Å would have been (95 % confidence, 80 % power).`;
    case 'not-detectable':
      return `These data and coordinates could not have shown a lengthening of the first shell below ${detectable.toFixed(2)} Å.`;
  }
}

/** "Mn–O/N first shell" and its mean distance over all sites of a spectrum. */
export function describeClass(spectrum: TrialSpectrum, kind: PathClass): { label: string; distance: number; count: number } {
  const elements = new Map<string, number>();
  let count = 0;
  let sum = 0;
  for (const { signal, classes } of spectrum.sites) {
    for (const { legs, vertices, degeneracy, halfLength } of signal.paths) {
      if (legs !== 2 || classes[vertices[1]!] !== kind) continue;
      const { element } = signal.site.atoms[vertices[1]!]!;
      const weight = signal.site.weight * degeneracy;
      elements.set(element, (elements.get(element) ?? 0) + weight);
      count += weight;
      sum += weight * halfLength;
    }
  }
  const names = [...elements.entries()].sort((a, b) => b[1] - a[1]).map(([element]) => element);
  const shown = kind === 'beyond' ? 'far neighbours' : names.join('/');
  const what = kind === 'nearest' ? ' first shell' : '';
  return { label: `${spectrum.element}–${shown}${what}`, distance: count > 0 ? sum / count : 0, count };
}

/** The best fit with distances free, from several starts; every parameter known by its key begins where the held fit ended. */
function refit(trial: Trial, held: TrialModel, best: Minimum, spread: number, freedom: Freedom): { model: TrialModel; minimum: Minimum } {
  const model = trialModel(trial.spectra, spread, freedom);
  const free = model.list.flatMap(({ name }, p) => (name === 'free-stretch' || name === 'free-shift' ? [p] : []));
  let minimum = minimise(model, carriedOver(model, held, best));
  for (const p of free) {
    const { sd } = model.list[p]!;
    const looks = (freedom === 'stretch' ? STRETCH_STARTS : SHIFT_STARTS).map((start) => {
      const moved = Float64Array.from(minimum.z);
      moved[p] = start / sd;
      return minimise(model, moved, ROUGH);
    });
    const [likely] = looks.sort((a, b) => a.x - b.x);
    if (likely!.x > minimum.x + PROMISING) continue;
    const tried = minimise(model, likely!.z);
    if (tried.x < minimum.x - 1e-3) minimum = tried;
  }
  return { model, minimum };
}
