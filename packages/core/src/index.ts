/** @ringtrue/core: from coordinates to a predicted chi(k). Å, Å⁻¹, eV, K at this door. */
export * as constants from './constants.js';
