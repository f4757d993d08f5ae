/**
 * Complex phase shifts of a muffin-tin sphere from the scalar-relativistic radial equation (Koelling & Harmon, J. Phys. C
 * 10, 3107 (1977), spin–orbit dropped), Hartree atomic units, t = ln r, M = 1 + (E − V)/(2c²):
 *
 *   dP/dt =  P + 2 M r Q
 *   dQ/dt = −Q + [l(l + 1)/(2 M r) + r (V − E)] P
 *
 * At the sphere, with D = 2 M_int Q/P the logarithmic derivative of the radial function and z = p R:
 *
 *   t_l = e^{iδ} sin δ = i [p j_l'(z) − D j_l(z)] / [p h_l'(z) − D h_l(z)],   e^{2iδ} = 1 + 2i t_l .
 *
 * Classical Runge–Kutta on the logarithmic mesh, each step divided so that the local phase advances by less than
 * PHASE_STEP; the potential between mesh points by four-point Lagrange interpolation of rV.
 */
import { type BesselOrders, besselOrders, sphericalBesselHankel } from '../numerics/complex-bessel.js';

/** Advance of the local phase in one sub-step, rad; 0.25 changes χ by 2e-4. */
export const PHASE_STEP = 0.06;

export interface SphereWave {
  /** Energy on the scale of the potential, hartree. */
  readonly energy: number;
  /** r·V on the mesh, hartree·bohr (n), V complex. */
  readonly rVRe: Float64Array;
  readonly rVIm: Float64Array;
  /** Interstitial kinetic energy e = E − V_int, hartree, and momentum p = √(2e(1 + e/2c²)), bohr⁻¹. */
  readonly eRe: number;
  readonly eIm: number;
  readonly pRe: number;
  readonly pIm: number;
}

/** Solves one sphere at many energies with its own work arrays. */
export class SphereSolver {
  private readonly r: Float64Array;
  private readonly Z: number;
  private readonly c2: number;
  private readonly h: number;
  private readonly phaseStep: number;
  private readonly bessel: BesselOrders;
  /** Points of the refined mesh: 2 M r, its inverse, and r(V − E), at the ends and middles of sub-steps. */
  private aRe = new Float64Array(0);
  private aIm = new Float64Array(0);
  private wRe = new Float64Array(0);
  private wIm = new Float64Array(0);
  private bRe = new Float64Array(0);
  private bIm = new Float64Array(0);
  /** Length of each sub-step in ln r, and the first sub-step of each mesh interval. */
  private step = new Float64Array(0);
  private readonly firstStep: Int32Array;

  /**
   * @param r   logarithmic mesh ending on the muffin-tin radius, bohr (n)
   * @param Z   nuclear charge, for the start at the nucleus
   * @param c   speed of light, Infinity for the Schrödinger equation
   * @param phaseStep  advance of the local phase in one sub-step, rad
   */
  constructor(r: Float64Array, Z: number, lMax: number, c: number, phaseStep = PHASE_STEP) {
    this.phaseStep = phaseStep;
    this.r = r;
    this.Z = Z;
    this.c2 = c * c;
    this.h = Math.log(r[r.length - 1]! / r[0]!) / (r.length - 1);
    this.bessel = besselOrders(lMax + 1);
    this.firstStep = new Int32Array(r.length);
  }

  /** t_l for l = 0 … lMax into tRe, tIm; orders above are set to 0. */
  solve(wave: SphereWave, lMax: number, tRe: Float64Array, tIm: Float64Array): void {
    this.refine(wave);
    const R = this.r[this.r.length - 1]!;
    sphericalBesselHankel(wave.pRe * R, wave.pIm * R, this.bessel);
    tRe.fill(0);
    tIm.fill(0);
    for (let l = 0; l <= lMax; l++) this.order(l, wave, tRe, tIm);
  }

  /** Lay out the sub-steps for this energy and the coefficients at their ends and middles. */
  private refine({ energy, rVRe, rVIm }: SphereWave): void {
    const { r, h, firstStep } = this;
    const n = r.length;
    let total = 0;
    for (let i = 0; i < n - 1; i++) {
      firstStep[i] = total;
      const kinetic = Math.abs(energy - rVRe[i + 1]! / r[i + 1]!);
      total += Math.floor((Math.sqrt(2 * kinetic) * r[i + 1]! * h) / this.phaseStep) + 1;
    }
    firstStep[n - 1] = total;
    if (this.step.length < total) {
      const points = Math.ceil(1.2 * total);
      this.step = new Float64Array(points);
      for (const name of ['aRe', 'aIm', 'wRe', 'wIm', 'bRe', 'bIm'] as const) this[name] = new Float64Array(2 * points + 1);
    }
    const { step } = this;
    for (let i = 0; i < n - 1; i++) {
      const parts = firstStep[i + 1]! - firstStep[i]!;
      const first = Math.min(Math.max(i - 1, 0), n - 4);
      for (let j = 0; j <= 2 * parts; j++) {
        if (j === 2 * parts && i < n - 2) break; // the next interval begins with this point
        const x = i - first + j / (2 * parts);
        const radius = r[i]! * Math.exp((h * j) / (2 * parts));
        this.setPoint(2 * firstStep[i]! + j, radius, energy, lagrange(rVRe, first, x), lagrange(rVIm, first, x));
      }
      for (let j = 0; j < parts; j++) step[firstStep[i]! + j] = h / parts;
    }
  }

  private setPoint(at: number, r: number, energy: number, rVRe: number, rVIm: number): void {
    const kineticRe = r * energy - rVRe;
    const kineticIm = -rVIm;
    const aRe = 2 * r + kineticRe / this.c2;
    const aIm = kineticIm / this.c2;
    const a2 = aRe * aRe + aIm * aIm;
    this.aRe[at] = aRe;
    this.aIm[at] = aIm;
    this.wRe[at] = aRe / a2;
    this.wIm[at] = -aIm / a2;
    this.bRe[at] = -kineticRe;
    this.bIm[at] = -kineticIm;
  }

  /** Integrate order l from near the nucleus and match it at the sphere. */
  private order(l: number, wave: SphereWave, tRe: Float64Array, tIm: Float64Array): void {
    const { r, h, firstStep, step, aRe, aIm, wRe, wIm, bRe, bIm } = this;
    const n = r.length;
    // r^{l+1} from here grows by 60 decades at most, so nothing under- or overflows.
    const skip = Math.floor(((r.length - 1) * h - (60 / (l + 1)) * Math.LN10) / h);
    const start = Math.min(Math.max(skip, 0), n - 5);
    const from = firstStep[start]!;
    let pRe = 1e-30;
    let pIm = 0;
    let qRe = pRe * this.startRatio(l, r[start]!, wave.energy, wave.rVRe[start]!);
    let qIm = 0;
    const L = l * (l + 1);
    for (let i = from; i < firstStep[n - 1]!; i++) {
      const s = step[i]!;
      const half = 0.5 * s;
      let at = 2 * i;
      // Stage 1 at the beginning, 2 and 3 in the middle, 4 at the end.
      let gRe = L * wRe[at]! + bRe[at]!;
      let gIm = L * wIm[at]! + bIm[at]!;
      const p1 = pRe + aRe[at]! * qRe - aIm[at]! * qIm;
      const p1i = pIm + aRe[at]! * qIm + aIm[at]! * qRe;
      const q1 = -qRe + gRe * pRe - gIm * pIm;
      const q1i = -qIm + gRe * pIm + gIm * pRe;
      at++;
      gRe = L * wRe[at]! + bRe[at]!;
      gIm = L * wIm[at]! + bIm[at]!;
      const mRe = aRe[at]!;
      const mIm = aIm[at]!;
      let u = pRe + half * p1;
      let ui = pIm + half * p1i;
      let v = qRe + half * q1;
      let vi = qIm + half * q1i;
      const p2 = u + mRe * v - mIm * vi;
      const p2i = ui + mRe * vi + mIm * v;
      const q2 = -v + gRe * u - gIm * ui;
      const q2i = -vi + gRe * ui + gIm * u;
      u = pRe + half * p2;
      ui = pIm + half * p2i;
      v = qRe + half * q2;
      vi = qIm + half * q2i;
      const p3 = u + mRe * v - mIm * vi;
      const p3i = ui + mRe * vi + mIm * v;
      const q3 = -v + gRe * u - gIm * ui;
      const q3i = -vi + gRe * ui + gIm * u;
      at++;
      gRe = L * wRe[at]! + bRe[at]!;
      gIm = L * wIm[at]! + bIm[at]!;
      u = pRe + s * p3;
      ui = pIm + s * p3i;
      v = qRe + s * q3;
      vi = qIm + s * q3i;
      const sixth = s / 6;
      pRe += sixth * (p1 + 2 * (p2 + p3) + u + aRe[at]! * v - aIm[at]! * vi);
      pIm += sixth * (p1i + 2 * (p2i + p3i) + ui + aRe[at]! * vi + aIm[at]! * v);
      qRe += sixth * (q1 + 2 * (q2 + q3) - v + gRe * u - gIm * ui);
      qIm += sixth * (q1i + 2 * (q2i + q3i) - vi + gRe * ui + gIm * u);
    }
    // D = 2 M_int Q/P
    const p2 = pRe * pRe + pIm * pIm;
    const ratioRe = (qRe * pRe + qIm * pIm) / p2;
    const ratioIm = (qIm * pRe - qRe * pIm) / p2;
    const mRe = 2 + wave.eRe / this.c2;
    const mIm = wave.eIm / this.c2;
    this.match(l, wave, mRe * ratioRe - mIm * ratioIm, mRe * ratioIm + mIm * ratioRe, tRe, tIm);
  }

  /** Q/P at the first point. */
  private startRatio(l: number, r: number, energy: number, rV: number): number {
    const massExcess = (energy - rV / r) / (2 * this.c2);
    if (massExcess > 1) {
      const g = Math.sqrt(l * (l + 1) + 1 - (this.Z * this.Z) / this.c2);
      return ((g - 1) * this.c2) / this.Z;
    }
    return (l / r - (l === 0 ? this.Z : 0)) / (2 * (1 + massExcess));
  }

  private match(l: number, { pRe, pIm }: SphereWave, dRe: number, dIm: number, tRe: Float64Array, tIm: Float64Array): void {
    const { jRe, jIm, hRe, hIm } = this.bessel;
    const R = this.r[this.r.length - 1]!;
    // p f'(z) = (l/R) f_l − p f_{l+1}
    const numRe = (l / R) * jRe[l]! - (pRe * jRe[l + 1]! - pIm * jIm[l + 1]!) - (dRe * jRe[l]! - dIm * jIm[l]!);
    const numIm = (l / R) * jIm[l]! - (pRe * jIm[l + 1]! + pIm * jRe[l + 1]!) - (dRe * jIm[l]! + dIm * jRe[l]!);
    const denRe = (l / R) * hRe[l]! - (pRe * hRe[l + 1]! - pIm * hIm[l + 1]!) - (dRe * hRe[l]! - dIm * hIm[l]!);
    const denIm = (l / R) * hIm[l]! - (pRe * hIm[l + 1]! + pIm * hRe[l + 1]!) - (dRe * hIm[l]! + dIm * hRe[l]!);
    const d2 = denRe * denRe + denIm * denIm;
    // t = i num/den
    tRe[l] = -(numIm * denRe - numRe * denIm) / d2;
    tIm[l] = (numRe * denRe + numIm * denIm) / d2;
  }
}

/** Value at `x` steps from point `first` of the cubic through four points of y. */
function lagrange(y: Float64Array, first: number, x: number): number {
  const x1 = x - 1;
  const x2 = x - 2;
  const x3 = x - 3;
  return (
    (-x1 * x2 * x3 * y[first]!) / 6 +
    (x * x2 * x3 * y[first + 1]!) / 2 -
    (x * x1 * x3 * y[first + 2]!) / 2 +
    (x * x1 * x2 * y[first + 3]!) / 6
  );
}
