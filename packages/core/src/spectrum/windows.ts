/**
 * Windows for the Fourier transform: flat at 1, with a sill of stated width at either end.
 *
 * The sill rises over t = (k − kMin)/sill from 0 to 1 and mirrors at kMax:
 *   hann            sin²(πt/2)
 *   sine            sin(πt/2)
 *   welch           1 − (1 − t)²
 *   kaiser-bessel   I₀(β√(1 − (1 − t)²)) / I₀(β), β = `shape`
 * With sill = (kMax − kMin)/2 these are the full windows of the textbooks (Harris, Proc. IEEE 66, 51 (1978)).
 * Sill 0 is the rectangle. All are zero outside [kMin, kMax].
 */

export type WindowName = 'hann' | 'sine' | 'welch' | 'kaiser-bessel';

export interface WindowSpec {
  readonly window: WindowName;
  /** Å⁻¹ (or Å in the backward direction) */
  readonly kMin: number;
  readonly kMax: number;
  /** Width of either sill, same unit; at most half the range. */
  readonly sill: number;
  /** β of the Kaiser–Bessel window, default 4; other windows have no shape. */
  readonly shape?: number;
}

/** Modified Bessel function I₀(x), power series (DLMF 10.25.2); relative error ≤ 4e-16 for x ≤ 20. */
function besselI0(x: number): number {
  const quarter = (x * x) / 4;
  let term = 1;
  let sum = 1;
  for (let n = 1; term > 1e-17 * sum; n++) {
    term *= quarter / (n * n);
    sum += term;
  }
  return sum;
}

function sillValue(name: WindowName, t: number, shape: number): number {
  switch (name) {
    case 'hann':
      return Math.sin((Math.PI / 2) * t) ** 2;
    case 'sine':
      return Math.sin((Math.PI / 2) * t);
    case 'welch':
      return 1 - (1 - t) * (1 - t);
    case 'kaiser-bessel':
      return besselI0(shape * Math.sqrt(Math.max(0, 1 - (1 - t) * (1 - t)))) / besselI0(shape);
  }
}

/**
 * Window values at the given abscissae.
 *
 * @param x    abscissae, Å⁻¹ or Å (n)
 * @returns    values in [0, 1] (n)
 * @throws {RangeError} range empty, or sill negative or wider than half the range
 */
export function windowValues(x: Float64Array, { window, kMin, kMax, sill, shape = 4 }: WindowSpec): Float64Array {
  if (!(kMax > kMin)) throw new RangeError(`window: the range must not be empty, got ${kMin} to ${kMax}`);
  if (!(sill >= 0 && sill <= (kMax - kMin) / 2 + 1e-12)) {
    throw new RangeError(`window: the sill must lie between 0 and half the range (${((kMax - kMin) / 2).toFixed(3)}), got ${sill}`);
  }
  const w = new Float64Array(x.length);
  for (let i = 0; i < x.length; i++) {
    const inside = Math.min(x[i]! - kMin, kMax - x[i]!);
    if (inside >= -1e-12) w[i] = inside >= sill ? 1 : sillValue(window, Math.max(0, inside) / sill, shape);
  }
  return w;
}
