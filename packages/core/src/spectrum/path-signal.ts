/**
 * What one path adds to χ(k), before disorder: A(k) on the scattering room's coarse grid, taken to any k.
 *
 *   A(k) = B(k) e^{2i Re p(k) R} ,     χ = S0² Σ N Im[ A(k) e^{−2σ²k²} e^{iφ_T(k)} ]
 *
 * B is smooth, also through the zeros of its modulus, where ln|A| and its phase are not: so Re B and Im B are what is
 * splined. Å, Å⁻¹ at this door.
 */
import { perAngstromFromPerBohr } from '../constants.js';
import { CubicSpline } from '../numerics/spline.js';
import { SplineStencil } from '../numerics/spline-stencil.js';
import type { Path } from '../paths/types.js';
import type { ScatteringTable } from '../scattering/types.js';

/** The interstitial wave number of a scattering table as a function of k. */
export class InterstitialWave {
  private readonly re: CubicSpline;
  private readonly im: CubicSpline;

  constructor(table: ScatteringTable) {
    this.re = new CubicSpline(table.k, table.pRe.map(perAngstromFromPerBohr));
    this.im = new CubicSpline(table.k, table.pIm.map(perAngstromFromPerBohr));
  }

  /** Re p, Å⁻¹. */
  real(k: number): number {
    return this.re.at(k);
  }

  /** Mean free path λ = 1/Im p, Å: the amplitude of a path falls as e^{−2R/λ}. */
  meanFreePath(k: number): number {
    return 1 / this.im.at(k);
  }

  /** Where the given k lie among the knots that all signals of the table share. */
  stencil(k: Float64Array): SplineStencil {
    return new SplineStencil(this.re.x, k);
  }

  /** Re p and 1/λ = Im p at the points of a stencil, and their slopes by k, Å⁻¹ and no unit (n). */
  evaluate(stencil: SplineStencil, pRe: Float64Array, pSlope: Float64Array, inverseLambda: Float64Array, inverseSlope: Float64Array): void {
    stencil.evaluate(this.re, pRe, pSlope);
    stencil.evaluate(this.im, inverseLambda, inverseSlope);
  }
}

export class PathSignal {
  readonly path: Path;
  private readonly wave: InterstitialWave;
  private readonly bRe: CubicSpline;
  private readonly bIm: CubicSpline;

  /** @param aRe, aIm  A on the table's own k grid (nk) */
  constructor(path: Path, table: ScatteringTable, wave: InterstitialWave, aRe: Float64Array, aIm: Float64Array) {
    this.path = path;
    this.wave = wave;
    const n = table.k.length;
    const bRe = new Float64Array(n);
    const bIm = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      const phase = 2 * perAngstromFromPerBohr(table.pRe[i]!) * path.halfLength;
      const c = Math.cos(phase);
      const s = Math.sin(phase);
      bRe[i] = aRe[i]! * c + aIm[i]! * s;
      bIm[i] = aIm[i]! * c - aRe[i]! * s;
    }
    this.bRe = new CubicSpline(table.k, bRe);
    this.bIm = new CubicSpline(table.k, bIm);
  }

  /** A(k) of one route, without degeneracy, S0² or disorder, into re, im (n); k in Å⁻¹ from the Fermi level (n). */
  evaluate(k: Float64Array, re: Float64Array, im: Float64Array): void {
    const R = this.path.halfLength;
    for (let i = 0; i < k.length; i++) {
      const ki = k[i]!;
      const b = this.bRe.at(ki);
      const d = this.bIm.at(ki);
      const phase = 2 * this.wave.real(ki) * R;
      const c = Math.cos(phase);
      const s = Math.sin(phase);
      re[i] = b * c - d * s;
      im[i] = b * s + d * c;
    }
  }

  /**
   * A and dA/dk at many k, into re, im, dRe, dIm (n).
   *
   * @param stencil  of the knots at the wanted k
   * @param pRe      Re p there, Å⁻¹, and its slope by k (n)
   */
  evaluateWithSlope(
    stencil: SplineStencil,
    pRe: Float64Array,
    pSlope: Float64Array,
    re: Float64Array,
    im: Float64Array,
    dRe: Float64Array,
    dIm: Float64Array,
  ): void {
    const twoR = 2 * this.path.halfLength;
    stencil.evaluate(this.bRe, re, dRe);
    stencil.evaluate(this.bIm, im, dIm);
    for (let i = 0; i < re.length; i++) {
      const b = re[i]!;
      const d = im[i]!;
      const phase = twoR * pRe[i]!;
      const rate = twoR * pSlope[i]!;
      const db = dRe[i]! - rate * d;
      const dd = dIm[i]! + rate * b;
      const c = Math.cos(phase);
      const s = Math.sin(phase);
      re[i] = b * c - d * s;
      im[i] = b * s + d * c;
      dRe[i] = db * c - dd * s;
      dIm[i] = db * s + dd * c;
    }
  }

  /**
   * The effective scattering amplitude |f_eff| = |A| k R² e^{2R/λ} in Å and phase = arg A − 2kR in rad, continuous in k:
   * χ = N S0² |f_eff|/(kR²) e^{−2σ²k²} e^{−2R/λ} sin(2kR + phase).
   */
  effective(k: Float64Array): { amplitude: Float64Array; phase: Float64Array } {
    const R = this.path.halfLength;
    const amplitude = new Float64Array(k.length);
    const phase = new Float64Array(k.length);
    let turns = 0;
    for (let i = 0; i < k.length; i++) {
      const ki = k[i]!;
      const b = this.bRe.at(ki);
      const d = this.bIm.at(ki);
      amplitude[i] = Math.hypot(b, d) * ki * R * R * Math.exp((2 * R) / this.wave.meanFreePath(ki));
      const value = Math.atan2(d, b) + 2 * (this.wave.real(ki) - ki) * R;
      if (i > 0) turns -= Math.round((value + 2 * Math.PI * turns - phase[i - 1]!) / (2 * Math.PI));
      phase[i] = value + 2 * Math.PI * turns;
    }
    return { amplitude, phase };
  }
}
