/** evidence: measured spectra, from files to chi(k) with its uncertainty. Å, Å⁻¹, eV, K. */
export { type BackgroundProjector, type BackgroundSettings, backgroundProjector } from './background.js';
