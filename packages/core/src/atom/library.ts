/** Free atoms depend on the element alone: solved once, then kept. */
import { solveAtom } from './solve-atom.js';
import type { Edge, FreeAtom } from './types.js';

const kept = new Map<string, FreeAtom>();

/** The Dirac atom with von Barth–Hedin exchange and correlation, neutral, or with a core hole and Z + 1 valence. */
export function freeAtom(Z: number, coreHole?: Edge): FreeAtom {
  const key = `${Z}${coreHole ?? ''}`;
  let atom = kept.get(key);
  if (!atom) {
    atom = solveAtom(coreHole ? { Z, coreHole } : { Z });
    kept.set(key, atom);
  }
  return atom;
}
