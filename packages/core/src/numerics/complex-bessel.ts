/**
 * Spherical Bessel j_l and Hankel h_l^(1) of complex argument.
 *
 * h_l grows with l and is carried upward from h_0 = −i e^{iz}/z (DLMF 10.51.1). j_l dies away for l > |z|; its ratios
 * r_l = j_l/j_{l−1} are carried downward, r_l = z/(2l + 1 − z r_{l+1}) (DLMF 10.10.1), and then multiplied up from the larger
 * of j_0 = sin z/z and j_1 = (j_0 − cos z)/z.
 *
 * Measured against 40-digit values for l ≤ 25, |z| 0.3 … 60 (test/external/complex-bessel.test.ts): 1e-12 of |h_l| and |j_l|.
 */
export interface BesselOrders {
  readonly jRe: Float64Array;
  readonly jIm: Float64Array;
  readonly hRe: Float64Array;
  readonly hIm: Float64Array;
}

/** Room for the orders 0 … lMax. */
export function besselOrders(lMax: number): BesselOrders {
  const room = () => new Float64Array(lMax + 1);
  return { jRe: room(), jIm: room(), hRe: room(), hIm: room() };
}

/**
 * Fill j_l(z) and h_l^(1)(z) for l = 0 … lMax, lMax ≥ 1.
 *
 * @param x, y  z = x + iy, y ≥ 0, z ≠ 0
 * @throws {RangeError} z is zero, not finite, or has a negative imaginary part
 */
export function sphericalBesselHankel(x: number, y: number, out: BesselOrders): void {
  if (!(x * x + y * y > 0 && x * x + y * y < Infinity && y >= 0)) {
    throw new RangeError(`sphericalBesselHankel: z must be finite, not 0, with Im z ≥ 0, got ${x} + ${y} i`);
  }
  hankelUp(x, y, out.hRe, out.hIm);
  besselRatios(x, y, out.jRe, out.jIm);
}

/** h_l^(1)(z) alone, l = 0 … hRe.length − 1. */
export function hankelUp(x: number, y: number, hRe: Float64Array, hIm: Float64Array): void {
  const lMax = hRe.length - 1;
  const n2 = x * x + y * y;
  const iRe = x / n2;
  const iIm = -y / n2;
  const decay = Math.exp(-y);
  const eRe = decay * Math.cos(x);
  const eIm = decay * Math.sin(x);
  // h_0 = −i e^{iz}/z
  hRe[0] = eRe * iIm + eIm * iRe;
  hIm[0] = -(eRe * iRe - eIm * iIm);
  // h_1 = h_0/z − i h_0
  if (lMax >= 1) {
    hRe[1] = hRe[0]! * iRe - hIm[0]! * iIm + hIm[0]!;
    hIm[1] = hRe[0]! * iIm + hIm[0]! * iRe - hRe[0]!;
  }
  for (let l = 1; l < lMax; l++) {
    const c = 2 * l + 1;
    hRe[l + 1] = c * (iRe * hRe[l]! - iIm * hIm[l]!) - hRe[l - 1]!;
    hIm[l + 1] = c * (iRe * hIm[l]! + iIm * hRe[l]!) - hIm[l - 1]!;
  }
}

function besselRatios(x: number, y: number, jRe: Float64Array, jIm: Float64Array): void {
  const lMax = jRe.length - 1;
  const n2 = x * x + y * y;
  // The unknown start has died out below 1e-16 by the time l reaches lMax, or the turning point where it stops mattering.
  const size = Math.sqrt(n2);
  const start = Math.ceil(Math.max(lMax, size)) + 14 + Math.ceil(8 * Math.cbrt(size));
  let rRe = 0;
  let rIm = 0;
  for (let l = start; l >= 1; l--) {
    const dRe = 2 * l + 1 - (x * rRe - y * rIm);
    const dIm = -(x * rIm + y * rRe);
    const d2 = dRe * dRe + dIm * dIm;
    rRe = (x * dRe + y * dIm) / d2;
    rIm = (y * dRe - x * dIm) / d2;
    if (l <= lMax) {
      jRe[l] = rRe;
      jIm[l] = rIm;
    }
  }
  const s = Math.sin(x) * Math.cosh(y);
  const sIm = Math.cos(x) * Math.sinh(y);
  const c = Math.cos(x) * Math.cosh(y);
  const cIm = -Math.sin(x) * Math.sinh(y);
  const j0Re = (s * x + sIm * y) / n2;
  const j0Im = (sIm * x - s * y) / n2;
  const uRe = j0Re - c;
  const uIm = j0Im - cIm;
  const j1Re = (uRe * x + uIm * y) / n2;
  const j1Im = (uIm * x - uRe * y) / n2;
  jRe[0] = j0Re;
  jIm[0] = j0Im;
  let from = 1;
  if (lMax >= 1 && j1Re * j1Re + j1Im * j1Im > j0Re * j0Re + j0Im * j0Im) {
    jRe[1] = j1Re;
    jIm[1] = j1Im;
    from = 2;
  }
  for (let l = from; l <= lMax; l++) {
    const re = jRe[l]! * jRe[l - 1]! - jIm[l]! * jIm[l - 1]!;
    jIm[l] = jRe[l]! * jIm[l - 1]! + jIm[l]! * jRe[l - 1]!;
    jRe[l] = re;
  }
}
