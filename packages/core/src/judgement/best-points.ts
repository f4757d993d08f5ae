/**
 * The minima of X that matter. X is far from convex where phases fold: the energy origin is tried from three places, and where coordinates
 * are known so badly that the phase 2kδ of a single scatterer may be off by more than a radian, shifts drawn from the prior are tried too
 * (seeded: the same input gives the same minima).
 */
import type { Running } from '../errors.js';
import { normalDeviates } from '../numerics/random.js';
import { type Minimum, minimise } from './minimise.js';
import type { TrialModel } from './trial-model.js';

/** Starts of the energy origin, in standard deviations of its prior. */
const ORIGIN_STARTS = [-1.5, 1.5];
/** Å: 2kδ passes one radian at k = 10 Å⁻¹. */
const FOLDING = 0.05;
const DRAWN_STARTS = 24;
const SEED = 23;
/** Iterations of a rough look, and how far above the best X it may end to be followed. */
const ROUGH = 6;
const PROMISING = 15;
/** Distance in z between minima that are two. */
const APART = 0.3;

/** Local minima, the best first, each once. */
export function bestPoints(model: TrialModel, running?: Running): Minimum[] {
  const found: Minimum[] = [minimise(model, new Float64Array(model.parameters), undefined, running)];
  for (const start of startsOf(model)) {
    const rough = minimise(model, start, ROUGH, running);
    const best = Math.min(...found.map(({ x }) => x));
    if (rough.x > best + PROMISING || found.some((known) => isSame(known.z, rough.z))) continue;
    const settled = minimise(model, rough.z, undefined, running);
    if (!found.some((known) => isSame(known.z, settled.z))) found.push(settled);
  }
  return found.sort((a, b) => a.x - b.x);
}

function startsOf({ list, parameters, bounded }: TrialModel): Float64Array[] {
  const starts = ORIGIN_STARTS.map((z) => Float64Array.from(list, ({ name }) => (name === 'energy-origin' ? z : 0)));
  if (!list.some(({ name, sd }) => name === 'scatterer-shift' && sd >= FOLDING)) return starts;
  const normal = normalDeviates(SEED);
  for (let i = 0; i < DRAWN_STARTS; i++) {
    const z = new Float64Array(parameters);
    list.forEach(({ name }, p) => {
      if (name === 'scatterer-shift' && !bounded[p]) z[p] = normal();
    });
    starts.push(z);
  }
  return starts;
}

const isSame = (a: Float64Array, b: Float64Array): boolean => a.every((value, p) => Math.abs(value - b[p]!) < APART);
