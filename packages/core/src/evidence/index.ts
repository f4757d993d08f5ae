/** evidence: measured spectra, from files to chi(k) with its uncertainty. Å, Å⁻¹, eV, K. */
export { edgeShift, type Merged, mergeScans, type Shift } from './align.js';
export { type BackgroundProjector, type BackgroundSettings, backgroundProjector } from './background.js';
export { type ColumnText, readColumns } from './columns.js';
export type { Noise } from './noise.js';
export type { Glitch } from './pointNoise.js';
export { readScan } from './readScan.js';
export { type Choice, findEdge, type ReduceOptions, type Reduction, reduce } from './reduce.js';
export { parseColumnRoles } from './roles.js';
export type { SelfAbsorption } from './selfAbsorption.js';
export type { AbsorptionScan, ChiScan, ColumnRoles, DataTable, EnergyUnit, MeasuredScan, ReadOptions } from './types.js';
export { writeXdi, type XdiContent } from './writeXdi.js';
export { readXdi, type XdiField, type XdiFile, xdiField } from './xdi.js';
