/** Routes of the photoelectron over a site. Å. */
export { enumeratePaths } from './enumerate.js';
export { pathLabel } from './label.js';
export type { Path } from './types.js';
