/** @ringtrue/core: from coordinates to a predicted chi(k). Å, Å⁻¹, eV, K at this door. */
export * as constants from './constants.js';
export {
  type Atom,
  type Cell,
  findSites,
  frameOf,
  type ReadOptions,
  readStructure,
  type Site,
  type SiteAtom,
  type SiteOptions,
  type Structure,
  type XyzFrame,
  XyzFrames,
} from './structure/index.js';
