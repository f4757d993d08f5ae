/**
 * The electric vector of a polarised experiment on an oriented crystal, as the scattering room wants it.
 *
 * A crystal turns each absorber by its symmetry operators g: its symmetry-equivalent absorbers see the light from other sides. Site
 * and spectrum stand for all of them once the tensor is averaged, ⟨(g⁻¹ε)(g⁻¹ε)ᵀ⟩ over all operators; in a cubic crystal that is a
 * third of unity, and the direction does not matter.
 */
import { type Diagnostic, InputError } from '../errors.js';
import type { LightTensor } from '../scattering/index.js';
import { cellGeometry } from '../structure/index.js';
import type { Structure, Vec3 } from '../structure/types.js';
import type { PredictOptions } from './types.js';

/**
 * @param vector  in the file's Cartesian axes, any length
 * @returns ⟨ε εᵀ⟩, row-major (9)
 * @throws {InputError} the vector has no direction
 */
export function lightTensor({ cell, operators }: Structure, vector: Vec3): LightTensor {
  const length = Math.hypot(...vector);
  if (!(vector.length === 3 && length > 0 && length < Infinity)) {
    throw new InputError(`the electric vector must have three finite parts, not all 0, like 0,0,1; got ${vector.join(',')}`);
  }
  const e = vector.map((x) => x / length);
  const out = new Float64Array(9);
  const turned = cell
    ? operators.map(({ rotation }) => cartesian(rotation, cellGeometry(cell)))
    : [Float64Array.of(1, 0, 0, 0, 1, 0, 0, 0, 1)];
  for (const g of turned) {
    // g⁻¹ = gᵀ for a turn
    const seen = [0, 1, 2].map((j) => g[j]! * e[0]! + g[3 + j]! * e[1]! + g[6 + j]! * e[2]!);
    for (let i = 0; i < 3; i++) for (let j = 0; j < 3; j++) out[3 * i + j]! += (seen[i]! * seen[j]!) / turned.length;
  }
  return out;
}

/** What a reader of a polarised prediction should know. */
export function lightNotes({ edge }: PredictOptions): Diagnostic[] {
  return [
    {
      code: 'polarised',
      message:
        "The light is taken as fully polarised along the electric vector, in the file's Cartesian axes, on one oriented crystal; N counts neighbours whatever their direction, shares are what this light sees.",
    },
    ...(edge === 'L2' || edge === 'L3'
      ? [
          {
            code: 'polarised-s-channel',
            message: `At the ${edge} edge transitions to s states are left out: in polarised light they interfere with those to d states, which can change the difference between directions by some ten per cent.`,
          },
        ]
      : []),
  ];
}

/** A g A⁻¹ */
function cartesian(rotation: readonly number[], { toCartesian, toFractional }: ReturnType<typeof cellGeometry>): Float64Array {
  return product(product(toCartesian, rotation), toFractional);
}

function product(a: ArrayLike<number>, b: ArrayLike<number>): Float64Array {
  return Float64Array.from({ length: 9 }, (_, at) => {
    const row = 3 * Math.floor(at / 3);
    const column = at % 3;
    return a[row]! * b[column]! + a[row + 1]! * b[3 + column]! + a[row + 2]! * b[6 + column]!;
  });
}
