/** evidence: measured spectra, from files to chi(k) with its uncertainty. Å, Å⁻¹, eV, K. */
export { edgeShift, type Merged, mergeScans, type Shift } from './align.js';
export { type BackgroundProjector, type BackgroundSettings, backgroundProjector } from './background.js';
export { type ColumnText, readColumns } from './columns.js';
export { type DoseReport, dose } from './dose.js';
export type { Noise } from './noise.js';
export type { Glitch } from './point-noise.js';
export { readScan } from './read-scan.js';
export { reduce } from './reduce.js';
export type { Choice, ReduceOptions, Reduction } from './reduction.js';
export { parseColumnRoles } from './roles.js';
export type { SelfAbsorption } from './self-absorption.js';
export type { AbsorptionScan, ChiScan, ColumnRoles, DataTable, EnergyUnit, MeasuredScan, ReadOptions } from './types.js';
export { writeXdi, type XdiContent } from './write-xdi.js';
export { readXdi, type XdiField, type XdiFile, xdiField } from './xdi.js';
