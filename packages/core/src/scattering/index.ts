/** Scattering by one site: potentials, self-energy, phase shifts, amplitudes. Hartree units inside, Å and Å⁻¹ at the door. */
export { exchangeCorrelation } from './exchange-correlation.js';
export { selectPaths } from './importance.js';
export { type ScattererKinds, scattererKinds } from './kinds.js';
export { buildMuffinTin, OVERLAP_RADIUS } from './muffin-tin.js';
export { PathAmplitudes } from './path-amplitudes.js';
export type { LightTensor } from './polarisation.js';
export { RehrAlbers, type RehrAlbersTerms } from './rehr-albers.js';
export { singleScattering } from './single-scattering.js';
export { scatteringGrid, scatteringTable } from './table.js';
export type { ExchangeCorrelation, MuffinTin, ScatteringTable, SelfEnergyName, Sphere } from './types.js';
