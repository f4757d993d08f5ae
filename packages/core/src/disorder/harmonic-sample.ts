/** Frames drawn from a spring network: every mode an independent Gaussian of its quantum mean square (exact for ρ(Q) of an oscillator). */
import { InputError } from '../errors.js';
import type { Vec3 } from '../structure/types.js';
import type { Frame } from './ensemble.js';
import { meanSquare } from './oscillator.js';
import type { SpringModel } from './springs.js';

/**
 * One frame of a molecule or held cluster at the model's temperature.
 *
 * @param random  uniform in [0, 1)
 * @throws {InputError} a crystal, or a body too large for its modes to be at hand
 */
export function harmonicFrame({ body, modes, temperature }: SpringModel, random: () => number): Frame {
  const set = modes?.[0];
  if (body.lattice || !set) throw new InputError('harmonic sample: needs the normal modes of a molecule or cluster of at most 160 atoms');
  const size = 3 * body.atoms.length;
  const u = new Float64Array(size);
  const top = set.theta.at(-1)!;
  for (let s = 0; s < set.theta.length; s++) {
    const theta = set.theta[s]!;
    const gauss = Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
    if (theta <= 1e-3 * top) continue; // free turns, as in the model
    const q = gauss * Math.sqrt(meanSquare(1, theta, temperature));
    for (let i = 0; i < size; i++) u[i]! += q * set.re[s * size + i]!;
  }
  return body.atoms.map(({ element, position, mass }, i) => {
    const root = 1 / Math.sqrt(mass);
    const moved: Vec3 = [position[0] + root * u[3 * i]!, position[1] + root * u[3 * i + 1]!, position[2] + root * u[3 * i + 2]!];
    return { element, position: moved };
  });
}
