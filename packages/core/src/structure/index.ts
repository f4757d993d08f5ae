/** Structures: text → Structure → Site. Å, Å², degrees. */
export { coordinationShell, isMetal, longestBond } from './bonding.js';
export { type CellGeometry, cellGeometry } from './cell.js';
export { type DescribedNeighbour, type DescribedSite, type DescribeOptions, describeSites, type SitesDescription } from './describe.js';
export { formatOperator, parseOperator } from './operators.js';
export {
  blowSigma,
  type CoordinatePrecision,
  coordinatePrecision,
  type DpiInput,
  distanceSd,
  dpiFromR,
  dpiFromRFree,
} from './precision.js';
export { type ReadOptions, readStructure } from './read.js';
export { atomLabel, findSites, frameOf, type SiteOptions } from './sites.js';
export type {
  Atom,
  Cell,
  Link,
  RefinementStatistics,
  Residue,
  Site,
  SiteAtom,
  Structure,
  StructureFormat,
  SymmetryOperator,
  Vec3,
} from './types.js';
export { bondValence, bondValenceSums, type ValenceBond, type ValenceSum } from './valence.js';
export { structureOfFrame, type XyzFrame, XyzFrames } from './xyz.js';
