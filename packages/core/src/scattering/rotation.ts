/**
 * Rotations between the legs of a path.
 *
 * A frame whose z axis points along leg i is Q_i = R_z(φ) R_y(θ); from one leg to the next the rotation Q_i⁻¹ Q_{i+1} has
 * ZYZ Euler angles (α, β, γ), and D^l_{mm'} = e^{−imα} d^l_{mm'}(β) e^{−im'γ} with d = exp(−iβ J_y).
 */
import type { Vec3 } from '../structure/types.js';

export interface Turn {
  readonly alpha: number;
  readonly cosBeta: number;
  readonly gamma: number;
}

/** Euler angles of the rotation from the frame of one unit vector to that of another. */
export function turnBetween(from: Vec3, to: Vec3): Turn {
  const a = frameOf(from);
  const b = frameOf(to);
  const element = (i: number, j: number): number => a[i]![0] * b[j]![0] + a[i]![1] * b[j]![1] + a[i]![2] * b[j]![2];
  const cosBeta = Math.max(-1, Math.min(1, element(2, 2)));
  const xz = element(0, 2);
  const yz = element(1, 2);
  if (xz * xz + yz * yz < 1e-20) {
    // Straight on or straight back: only α ∓ γ is fixed; γ = 0.
    const alpha = cosBeta > 0 ? Math.atan2(element(1, 0), element(0, 0)) : Math.atan2(-element(0, 1), element(1, 1));
    return { alpha, cosBeta: Math.sign(cosBeta), gamma: 0 };
  }
  return { alpha: Math.atan2(yz, xz), cosBeta, gamma: Math.atan2(element(2, 1), -element(2, 0)) };
}

/** Columns x, y, z of the frame R_z(φ) R_y(θ) along a unit vector. */
export function frameOf(u: Vec3): readonly [Vec3, Vec3, Vec3] {
  const sine = Math.hypot(u[0], u[1]);
  const cosPhi = sine > 1e-12 ? u[0] / sine : 1;
  const sinPhi = sine > 1e-12 ? u[1] / sine : 0;
  return [
    [cosPhi * u[2], sinPhi * u[2], -sine],
    [-sinPhi, cosPhi, 0],
    [cosPhi * sine, sinPhi * sine, u[2]],
  ];
}

/**
 * d^l_{mm'}(β) for l = 0 … out.length − 1, zero where l < max(|m|, |m'|); upward recursion in l from the stretched element.
 * Agrees with the tabulated values to 1e-12 (test/external/rotation.test.ts).
 *
 * @param cosBeta  −1 … 1
 */
export function smallD(m: number, mPrime: number, cosBeta: number, out: Float64Array): Float64Array {
  out.fill(0);
  const j = Math.max(Math.abs(m), Math.abs(mPrime));
  if (j >= out.length) return out;
  out[j] = stretched(j, m, mPrime, cosBeta);
  if (j + 1 >= out.length) return out;
  if (j === 0) out[1] = cosBeta;
  for (let l = Math.max(j, 1); l + 1 < out.length; l++) {
    const up = l * Math.sqrt(((l + 1) ** 2 - m * m) * ((l + 1) ** 2 - mPrime * mPrime));
    const here = (2 * l + 1) * (l * (l + 1) * cosBeta - m * mPrime);
    const down = (l + 1) * Math.sqrt((l * l - m * m) * (l * l - mPrime * mPrime));
    out[l + 1] = (here * out[l]! - down * (l > 0 ? out[l - 1]! : 0)) / up;
  }
  return out;
}

/** d^j with j = max(|m|, |m'|), by symmetry from d^j_{jm} = √C(2j, j+m) cos^{j+m}(β/2) (−sin(β/2))^{j−m}. */
function stretched(j: number, m: number, mPrime: number, cosBeta: number): number {
  if (Math.abs(m) < Math.abs(mPrime)) return parity(m - mPrime) * stretched(j, mPrime, m, cosBeta);
  if (m < 0) return parity(j + mPrime) * stretched(j, j, -mPrime, cosBeta);
  const cosHalf = Math.sqrt(Math.max(0, (1 + cosBeta) / 2));
  const sinHalf = Math.sqrt(Math.max(0, (1 - cosBeta) / 2));
  let binomial = 1;
  for (let i = 1; i <= j - mPrime; i++) binomial *= (2 * j + 1 - i) / i;
  return Math.sqrt(binomial) * cosHalf ** (j + mPrime) * (-sinHalf) ** (j - mPrime);
}

const parity = (n: number): number => (n % 2 === 0 ? 1 : -1);
