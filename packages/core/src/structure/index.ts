/** Structures: text → Structure → Site. Å, Å², degrees. */
export { coordinationShell, isMetal, longestBond } from './bonding.js';
export { type CellGeometry, cellGeometry } from './cell.js';
export { formatOperator, parseOperator } from './operators.js';
export { type ReadOptions, readStructure } from './read.js';
export { atomLabel, findSites, frameOf, type SiteOptions } from './sites.js';
export type {
  Atom,
  Cell,
  RefinementStatistics,
  Residue,
  Site,
  SiteAtom,
  Structure,
  StructureFormat,
  SymmetryOperator,
  Vec3,
} from './types.js';
export { type XyzFrame, XyzFrames } from './xyz.js';
