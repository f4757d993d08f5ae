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

  /** d Re p/dk, no unit. */
  realSlope(k: number): number {
    return this.re.slopeAt(k);
  }

  /** Mean free path λ = 1/Im p, Å: the amplitude of a path falls as e^{−2R/λ}. */
  meanFreePath(k: number): number {
    return 1 / this.im.at(k);
  }

  /** Im p = 1/λ, Å⁻¹, and its slope by k: what derivatives want. */
  inverseMeanFreePath(k: number): number {
    return this.im.at(k);
  }

  inverseMeanFreePathSlope(k: number): number {
    return this.im.slopeAt(k);
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

  /** As `evaluate`, and dA/dk into dRe, dIm (n). */
  evaluateWithSlope(k: Float64Array, re: Float64Array, im: Float64Array, dRe: Float64Array, dIm: Float64Array): void {
    const R = this.path.halfLength;
    for (let i = 0; i < k.length; i++) {
      const ki = k[i]!;
      const b = this.bRe.at(ki);
      const d = this.bIm.at(ki);
      const phase = 2 * this.wave.real(ki) * R;
      const rate = 2 * this.wave.realSlope(ki) * R;
      const db = this.bRe.slopeAt(ki) - rate * d;
      const dd = this.bIm.slopeAt(ki) + rate * b;
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
