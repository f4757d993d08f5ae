/**
 * The dipole transition in linearly polarised light, seen from the frames of the first and the last leg of a path.
 *
 * The light enters through the tensor E = ⟨ε εᵀ⟩ (trace 1): ε εᵀ of one direction, the mean of it over the directions in which the
 * symmetry of a crystal turns an absorber; a third of unity is the mean over all directions. The weight of the final states |l0 m⟩,
 * normalised to the unit matrix for that mean, is with an s core level (K, L1)
 *
 *   W = 3 Σ_ij E_ij |x_i⟩⟨x_j| ,
 *
 * with a p level (L2, L3; both the same: the spin is summed over, so each j holds the orbital directions a equally)
 *
 *   W = 3 Σ_a Σ_ij E_ij |T^{ia}⟩⟨T^{ja}| ,   T^{ia} = ½(x_i x_aᵀ + x_a x_iᵀ) − ⅓ δ_ia ,
 *
 * and a path takes B_{μμ'} = ⟨μ|R(Q)⁻¹ W R(Q')|μ'⟩. A vector or tensor is turned by turning its components, so no rotation
 * matrices of angular momentum are needed: ⟨1 ±1|v⟩ = ∓(v_x ∓ i v_y)/√2, ⟨2 0|T⟩ = √(3/2) T_zz, ⟨2 ±1|T⟩ = ∓(T_xz ∓ i T_yz),
 * ⟨2 ±2|T⟩ = ½(T_xx − T_yy) ∓ i T_xy.
 *
 * Left out: the s final states of L2 and L3. Averaged over directions they hardly count; in polarised light they interfere with the
 * d states, which can change the *anisotropy* by some ten per cent (Heald & Stern, Phys. Rev. B 16, 5549 (1977); figure from memory).
 */
import type { Vec3 } from '../structure/types.js';
import { frameOf } from './rotation.js';

/** ⟨ε εᵀ⟩, row-major (9): symmetric, trace 1. */
export type LightTensor = ArrayLike<number>;

/** Complex components ⟨μ|·⟩ of each state that is summed over: row-major (states, 2 l0 + 1), μ = −l0 … l0. */
interface Components {
  readonly states: number;
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/**
 * B_{μμ'} of one path, row-major (2 l0 + 1)², μ = −l0 … l0.
 *
 * @param l0     1 or 2
 * @param last   unit vector of the last leg, whose frame stands on the left
 * @param first  unit vector of the first leg
 */
export function absorberCoupling(
  l0: number,
  light: LightTensor,
  last: Vec3,
  first: Vec3,
): { readonly re: Float64Array; readonly im: Float64Array } {
  const width = 2 * l0 + 1;
  const left = componentsIn(l0, last);
  const right = componentsIn(l0, first);
  const perDirection = left.states / 3;
  const out = { re: new Float64Array(width * width), im: new Float64Array(width * width) };
  for (let i = 0; i < 3; i++) {
    for (let j = 0; j < 3; j++) {
      const weight = 3 * light[3 * i + j]!;
      if (weight === 0) continue;
      for (let a = 0; a < perDirection; a++) {
        const x = (i * perDirection + a) * width;
        const y = (j * perDirection + a) * width;
        for (let m = 0; m < width; m++) {
          for (let n = 0; n < width; n++) {
            out.re[m * width + n]! += weight * (left.re[x + m]! * right.re[y + n]! + left.im[x + m]! * right.im[y + n]!);
            out.im[m * width + n]! += weight * (left.im[x + m]! * right.re[y + n]! - left.re[x + m]! * right.im[y + n]!);
          }
        }
      }
    }
  }
  return out;
}

/** The states x_i (l0 = 1), or T^{ia} with a running fastest (l0 = 2), in the frame along a unit vector. */
function componentsIn(l0: number, along: Vec3): Components {
  const frame = frameOf(along);
  const axis = (i: number): Vec3 => [frame[0][i]!, frame[1][i]!, frame[2][i]!];
  const states = l0 === 1 ? 3 : 9;
  const width = 2 * l0 + 1;
  const re = new Float64Array(states * width);
  const im = new Float64Array(states * width);
  for (let i = 0; i < 3; i++) {
    const u = axis(i);
    if (l0 === 1) {
      const at = 3 * i;
      re[at + 1] = u[2];
      re[at + 2] = -u[0] * Math.SQRT1_2;
      im[at + 2] = u[1] * Math.SQRT1_2;
      re[at] = u[0] * Math.SQRT1_2;
      im[at] = u[1] * Math.SQRT1_2;
      continue;
    }
    for (let a = 0; a < 3; a++) {
      const w = axis(a);
      const T = (p: 0 | 1 | 2, q: 0 | 1 | 2): number => 0.5 * (u[p] * w[q] + w[p] * u[q]) - (p === q && i === a ? 1 / 3 : 0);
      const at = 5 * (3 * i + a);
      re[at + 2] = Math.sqrt(1.5) * T(2, 2);
      re[at + 3] = -T(0, 2);
      im[at + 3] = T(1, 2);
      re[at + 1] = T(0, 2);
      im[at + 1] = T(1, 2);
      re[at] = re[at + 4] = 0.5 * (T(0, 0) - T(1, 1));
      im[at] = T(0, 1);
      im[at + 4] = -T(0, 1);
    }
  }
  return { states, re, im };
}
