/**
 * The sum over paths, χ(k) = S0² Σ N Im[ A(k) e^{−2σ²k²} e^{iφ_T} ]. The signals of all paths are evaluated once for an
 * energy origin; disorder and S0² are then cheap factors. Å, Å⁻¹, Å², eV.
 *
 * φ_T = −4kσ²(1/R + 1/λ) − (4/3) C3 k³: the shift of the effective distribution by 1/R² and the mean free path (Bunker,
 * Nucl. Instrum. Meth. 207, 437 (1983); Tranquada & Ingalls, Phys. Rev. B 28, 3520 (1983)) and the third cumulant.
 */
import { EV_PER_K_SQUARED } from '../constants.js';
import type { InterstitialWave, PathSignal } from './path-signal.js';

/** What disorder does to one path. */
export interface PathDisorder {
  /** Total σ² of the half path length, Å². */
  readonly sigma2: number;
  /** Third cumulant of the half path length, Å³. */
  readonly c3: number;
  /** Change of the half path length, Å, small: it moves the phase by 2k shift. Default 0. */
  readonly shift?: number;
}

/** All paths of one site, evaluated on a k grid for one energy origin. */
export class PathSum {
  readonly signals: readonly PathSignal[];
  /** Theory wave numbers, k_th² = k² − e0/3.81, held at the lowest computed one below it (nk). */
  private readonly kTheory: Float64Array;
  private readonly inverseLambda: Float64Array;
  /** A of every path, row-major (paths, nk). */
  private readonly re: Float64Array;
  private readonly im: Float64Array;

  /**
   * @param k         data wave numbers, Å⁻¹ (nk)
   * @param e0        eV; positive when the theory's zero lies above the data's
   * @param kMinimum  lowest wave number the scattering was computed for, Å⁻¹
   */
  constructor(signals: readonly PathSignal[], wave: InterstitialWave, k: Float64Array, e0: number, kMinimum: number) {
    const nk = k.length;
    this.signals = signals;
    this.kTheory = k.map((value) => Math.sqrt(Math.max(value * value - e0 / EV_PER_K_SQUARED, kMinimum * kMinimum)));
    this.inverseLambda = this.kTheory.map((value) => 1 / wave.meanFreePath(value));
    this.re = new Float64Array(nk * signals.length);
    this.im = new Float64Array(nk * signals.length);
    signals.forEach((signal, j) => {
      signal.evaluate(this.kTheory, this.re.subarray(j * nk, (j + 1) * nk), this.im.subarray(j * nk, (j + 1) * nk));
    });
  }

  /** Path j's part of χ, degeneracy and S0² included, into out (nk). */
  path(j: number, disorder: PathDisorder, s02: number, out: Float64Array): Float64Array {
    return this.accumulate(j, disorder, s02, out.fill(0));
  }

  /** χ(k) of all paths into out (nk). */
  sum(disorder: readonly PathDisorder[], s02: number, out: Float64Array): Float64Array {
    out.fill(0);
    for (let j = 0; j < this.signals.length; j++) this.accumulate(j, disorder[j]!, s02, out);
    return out;
  }

  private accumulate(j: number, { sigma2, c3, shift = 0 }: PathDisorder, s02: number, out: Float64Array): Float64Array {
    const { kTheory, re, im, inverseLambda } = this;
    const { degeneracy, halfLength } = this.signals[j]!.path;
    const nk = kTheory.length;
    const base = j * nk;
    for (let i = 0; i < nk; i++) {
      const k = kTheory[i]!;
      const damping = s02 * degeneracy * Math.exp(-2 * sigma2 * k * k);
      const phase = 2 * k * shift - 4 * k * sigma2 * (1 / halfLength + inverseLambda[i]!) - (4 / 3) * c3 * k * k * k;
      out[i]! += damping * (im[base + i]! * Math.cos(phase) + re[base + i]! * Math.sin(phase));
    }
    return out;
  }
}
