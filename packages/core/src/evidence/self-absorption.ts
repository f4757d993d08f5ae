/**
 * Self-absorption of fluorescence in a thick, flat sample (Tröger, Arvanitis, Baberschke, Michaelis, Grimm & Zschech,
 * Phys. Rev. B 46, 3283 (1992), eq. 5):
 *
 *   chi = chi_measured / (1 − s(E)),    s(E) = μ_a(E) / (μ_total(E) + g μ_total(E_f)),    g = sin(in)/sin(out)
 *
 * μ_a is the absorber's shell, μ_total the whole sample at the incident and at the fluorescence energy. The smooth fluorescence itself goes
 * with s(E), not with μ_a(E): chi_measured is the oscillation in units of step · s(E)/s(E0). First order in chi: what
 * comes back is chi/(1 + s chi), so that crests stay low by the part s chi of themselves.
 */

import type { Edge } from '../atom/types.js';
import {
  type Constituent,
  elementBySymbol,
  emissionLineEv,
  massAttenuation,
  parseComposition,
  shellAttenuation,
} from '../elements/index.js';
import { InputError } from '../errors.js';
import { atomicDecay } from './normalise.js';

interface Angles {
  /** Degrees between beam and surface, and between surface and detector. Default 45, 45. */
  readonly angleIn?: number;
  readonly angleOut?: number;
}

/** The sample's absorptions, known to the user; all of it falls alike above the edge. */
export interface StatedAbsorption extends Angles {
  /** Absorption of the absorber's shell just above the edge, any unit. */
  readonly absorber: number;
  /** Absorption of the whole sample just above the edge, the same unit. */
  readonly total: number;
  /** Absorption of the whole sample at the energy of the fluorescence, the same unit. */
  readonly atFluorescence: number;
}

/** What the sample is made of; its absorptions are computed from the elements' own. */
export interface SampleComposition extends Angles {
  /** A formula like "Fe2O3", or parts by mass like "Fe:0.05,Si:0.44,O:0.51". */
  readonly composition: string;
}

export type SelfAbsorption = StatedAbsorption | SampleComposition;

export interface Damping {
  /** Factors by which the measured chi has to be multiplied; 1 below the edge (n). */
  readonly factor: Float64Array;
  /** s(E)/s(E0), course of the smooth fluorescence; 1 below the edge (n). */
  readonly course: Float64Array;
  /** In words, what the correction rests on. */
  readonly basis: string;
}

/**
 * Damping of the fluorescence on the energies of a scan.
 *
 * @param energyEv  eV (n)
 * @param e0        eV
 * @param element   absorber; needed when a composition is given
 * @throws {InputError} absorptions not positive or the absorber's above the total, angles outside (0, 90], a composition that cannot be
 *   read or lacks the absorber, energies outside 1 to 100 keV
 */
export function selfAbsorption(
  energyEv: Float64Array,
  e0: number,
  given: SelfAbsorption,
  element: string | undefined,
  edge: Edge,
): Damping {
  const { angleIn = 45, angleOut = 45 } = given;
  if (!(angleIn > 0 && angleIn <= 90 && angleOut > 0 && angleOut <= 90)) {
    throw new InputError(`self-absorption: angles in (0, 90] degrees are needed, got ${angleIn}, ${angleOut}`);
  }
  const { absorber, total, atFluorescence, basis } =
    'composition' in given ? computed(energyEv, e0, given, element, edge) : stated(atomicDecay(energyEv, e0), given);
  const fixed = (Math.sin((angleIn * Math.PI) / 180) / Math.sin((angleOut * Math.PI) / 180)) * atFluorescence;
  const share = (i: number) => absorber[i]! / (total[i]! + fixed);
  const first = energyEv.findIndex((e) => e >= e0);
  const above = (i: number) => i >= first && first >= 0;
  return {
    factor: energyEv.map((_, i) => (above(i) ? 1 / (1 - share(i)) : 1)),
    course: energyEv.map((_, i) => (above(i) ? share(i) / share(first) : 1)),
    basis: `${basis}; thick flat sample, beam ${angleIn}° and detector ${angleOut}° from its surface`,
  };
}

interface Absorptions {
  /** Of the absorber's shell and of the whole sample; only what is above the edge counts (n) */
  readonly absorber: Float64Array;
  readonly total: Float64Array;
  readonly atFluorescence: number;
  readonly basis: string;
}

function stated(decay: Float64Array, { absorber, total, atFluorescence }: StatedAbsorption): Absorptions {
  if (!(absorber > 0 && total >= absorber && atFluorescence > 0)) {
    throw new InputError(
      `self-absorption: 0 < absorber ≤ total and fluorescence > 0 are needed, got ${absorber}, ${total}, ${atFluorescence}`,
    );
  }
  return { absorber: decay.map((a) => a * absorber), total: decay.map((a) => a * total), atFluorescence, basis: 'absorptions as given' };
}

function computed(
  energyEv: Float64Array,
  e0: number,
  { composition }: SampleComposition,
  element: string | undefined,
  edge: Edge,
): Absorptions {
  const parts = parseComposition(composition);
  if (!element) throw new InputError('self-absorption: the absorbing element has to be stated');
  const { Z, symbol } = elementBySymbol(element);
  const own = parts.find((part) => part.Z === Z);
  if (!own) throw new InputError(`self-absorption: "${composition}" holds no ${symbol}, the absorbing element`);
  const shell = shellAttenuation(Z, edge);
  const line = emissionLineEv(Z, edge);
  const atFluorescence = mixture(parts, line);
  // The scan's edge is laid on the table's, so that the step falls where it was measured
  const onTable = (of: (energyEv: number) => number) => energyEv.map((e) => (e < e0 ? 0 : of(e - e0 + shell.energyEv)));
  const [step, whole, after] = [own.massFraction * shell.at(shell.energyEv), mixture(parts, shell.energyEv), atFluorescence].map((mu) =>
    mu.toPrecision(3),
  );
  return {
    absorber: onTable((e) => own.massFraction * shell.at(e)),
    total: onTable((e) => mixture(parts, e)),
    atFluorescence,
    basis: `${composition} by its elements' attenuation: shell ${step}, sample ${whole} cm²/g at the edge, ${after} at the fluorescence (${line.toFixed(0)} eV)`,
  };
}

const mixture = (parts: readonly Constituent[], energyEv: number): number =>
  parts.reduce((sum, { Z, massFraction }) => sum + massFraction * massAttenuation(Z, energyEv), 0);
