/** Attenuation of X-rays by the elements, and their emission lines. cm²/g, eV. */

import type { Edge } from '../atom/types.js';
import { InputError } from '../errors.js';
import { ATTENUATION_ROWS } from './attenuation-table.js';
import { edgeEnergyEv, elementByNumber } from './elements.js';
import { FIRST_L_LINES_Z, L_LINE_ROWS } from './l-lines-table.js';

/** eV: the attenuation table and the edge table come from different tabulations, see attenuation-table.ts. */
const EDGE_MISMATCH = 15;

function rowOf(Z: number): readonly number[] {
  const row = ATTENUATION_ROWS[Z - 1];
  if (!row) throw new InputError(`${elementByNumber(Z).symbol} lies beyond the table of attenuation, which ends at U (92)`);
  return row;
}

/**
 * Mass attenuation coefficient μ/ρ, scattering included, of one element, cm²/g; above the edge at the very edge.
 *
 * Measured: within 0.5 % of the source's own values from 1 to 100 keV (see attenuation-table.ts), which agree with handbooks to 1 or 2 %.
 *
 * @throws {InputError} Z above 92, or energy outside 1 to 100 keV
 */
export function massAttenuation(Z: number, energyEv: number): number {
  const row = rowOf(Z);
  const last = row.length - 2;
  if (!(energyEv >= row[0]! && energyEv <= row[last]!))
    throw new InputError(
      `attenuation of ${elementByNumber(Z).symbol} is tabulated from 1 to 100 keV, ${energyEv.toFixed(1)} eV lies outside`,
    );
  let above = 2;
  while (above < last && row[above]! <= energyEv) above += 2;
  const [e0, mu0, e1, mu1] = [row[above - 2]!, row[above - 1]!, row[above]!, row[above + 1]!];
  return mu0 * (energyEv / e0) ** (Math.log(mu1 / mu0) / Math.log(e1 / e0));
}

/**
 * One shell's absorption on its own: where the attenuation table has the edge, and μ/ρ above it less what the other shells leave, which is
 * the course just below the edge carried on straight in ln μ/ρ against ln E.
 *
 * @throws {InputError} no such edge between 1 and 100 keV
 */
export function shellAttenuation(Z: number, edge: Edge): { readonly energyEv: number; readonly at: (energyEv: number) => number } {
  const row = rowOf(Z);
  const wanted = edgeEnergyEv(Z, edge);
  let best = -1;
  let distance = EDGE_MISMATCH;
  for (let i = 4; i < row.length; i += 2) {
    if (row[i] !== row[i - 2] || Math.abs(row[i]! - wanted) >= distance) continue;
    distance = Math.abs(row[i]! - wanted);
    best = i;
  }
  if (best < 0) {
    throw new InputError(`the ${elementByNumber(Z).symbol} ${edge} edge at ${wanted} eV is not in the table of attenuation, 1 to 100 keV`);
  }
  const [e0, mu0, e1, mu1] = [row[best - 4]!, row[best - 3]!, row[best - 2]!, row[best - 1]!];
  const exponent = Math.log(mu1 / mu0) / Math.log(e1 / e0);
  return { energyEv: e1, at: (energyEv) => massAttenuation(Z, energyEv) - mu1 * (energyEv / e1) ** exponent };
}

/**
 * Energy of the strongest fluorescence after a core hole, eV: Kα1 = K − L3 from the edges, Lα1, Lβ1 or Lβ3 from the table.
 * Measured: within 0.4 eV of the handbook for Kα1 and Lα1 of eleven elements, 3.3 eV for U.
 *
 * @throws {InputError} an L edge of an element lighter than Ni
 */
export function emissionLineEv(Z: number, edge: Edge): number {
  if (edge === 'K') return edgeEnergyEv(Z, 'K') - edgeEnergyEv(Z, 'L3');
  const row = L_LINE_ROWS[Z - FIRST_L_LINES_Z];
  if (!row) throw new InputError(`no ${edge} emission line of ${elementByNumber(Z).symbol} is tabulated; L lines of Ni (28) to U (92) are`);
  return row[{ L1: 0, L2: 1, L3: 2 }[edge]]!;
}
