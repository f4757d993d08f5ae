/** spectrum: k grids, windows, Fourier transforms. Å, Å⁻¹, eV. */
export { type ComparisonInR, compareInR } from './compare.js';
export { energyEvFromK, K_STEP, kFromEnergyEv, uniformGridOf, uniformKGrid } from './grid.js';
export { type Information, informationContent } from './information.js';
export { InterstitialWave, PathSignal } from './path-signal.js';
export { type PathDisorder, PathSum } from './path-sum.js';
export {
  type BackTransform,
  backTransform,
  fourierTransform,
  TRANSFORM_POINTS,
  type Transform,
  type TransformPlan,
  type TransformSettings,
  transformPlan,
  windowOf,
} from './transform.js';
export { type WindowName, type WindowSpec, windowValues } from './windows.js';
