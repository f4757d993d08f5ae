/** Free atoms. Hartree atomic units throughout this room. */
export { groundConfiguration, shellName } from './configurations.js';
export { fermiMomentum, localFunctional, vxcBarthHedin, wignerSeitzRadius } from './functional.js';
export { freeAtom } from './library.js';
export { solveAtom } from './solve-atom.js';
export type { AtomOptions, Edge, FreeAtom } from './types.js';
