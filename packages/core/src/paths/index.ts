/** Routes of the photoelectron over a site. Å. */
export { singleScatteringPaths } from './single.js';
export type { Path } from './types.js';
