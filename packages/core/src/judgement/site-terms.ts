/**
 * One site's part of a predicted χ(k), and how it changes with every parameter, in closed form.
 *
 *   u_j = w S0² N_j A_j(k) exp(−2σ²k² − 2δ(1/R + 1/λ)) exp(i[2kδ − 4kσ²(1/R + 1/λ) − (4/3) C₃k³]),    χ = Σ_j Im u_j
 *   σ² = σ²_thermal t + e,   C₃ = C₃,thermal t²,   δ = Σ_p c_p z_p,   k² = k²_data − E0/3.81
 *
 * with t the thermal scale, e the extra static σ² and δ the change of the half length (spectrum/path-sum.ts says where the phases come
 * from; the amplitude's 1/R² and mean free path follow δ to first order). Å, Å⁻¹, Å², eV.
 */
import type { SiteSignal } from '../predict/site-signal.js';
import type { OriginSignals } from './origin-signals.js';

/** How the parameters act on the paths of one site; indices into the parameter vector. */
export interface SiteUnknowns {
  readonly energyOrigin: number;
  readonly amplitude: number;
  /** Per path (np). */
  readonly thermalScale: Int32Array;
  readonly extraStatic: Int32Array;
  /** Shift of path j: Σ coefficient · z over entries shiftStart[j] … shiftStart[j + 1] (Å per z). */
  readonly shiftStart: Int32Array;
  readonly shiftParameter: Int32Array;
  readonly shiftCoefficient: Float64Array;
}

/** Values of the parameters as the kernel wants them, and their derivatives by z. */
export interface ParameterValues {
  readonly z: Float64Array;
  readonly value: Float64Array;
  readonly slope: Float64Array;
}

export class SiteTerms {
  readonly signal: SiteSignal;
  readonly unknowns: SiteUnknowns;
  private readonly sigma2: Float64Array;
  private readonly c3: Float64Array;
  private readonly atOrigin: OriginSignals;
  private readonly work: Float64Array;

  /**
   * @param atOrigin  amplitudes on the grid of the data; models of one site may share it
   * @param sigma2    thermal σ² of every path, Å² (np)
   * @param c3        third cumulant of every path, Å³ (np)
   */
  constructor(atOrigin: OriginSignals, sigma2: Float64Array, c3: Float64Array, unknowns: SiteUnknowns) {
    this.signal = atOrigin.signal;
    this.atOrigin = atOrigin;
    this.unknowns = unknowns;
    this.sigma2 = sigma2;
    this.c3 = c3;
    this.work = new Float64Array(3 * atOrigin.kTheory.length);
  }

  /** Adds the site's part to chi (nk) and, if given, to the derivatives by z, row-major (parameters, nk). */
  addTo(chi: Float64Array, { z, value, slope }: ParameterValues, jacobian?: Float64Array): void {
    const { unknowns, atOrigin, work, signal } = this;
    const { shiftStart, shiftParameter, shiftCoefficient } = unknowns;
    atOrigin.moveTo(value[unknowns.energyOrigin]!);
    const { kTheory: k, inverseLambda, inverseLambdaSlope, kPerEv, re, im, dRe, dIm } = atOrigin;
    const nk = k.length;
    const dSigma = work.subarray(0, nk);
    const dCubic = work.subarray(nk, 2 * nk);
    const dShift = work.subarray(2 * nk, 3 * nk);
    const originRow = unknowns.energyOrigin * nk;
    const amplitudeRow = unknowns.amplitude * nk;
    const perEv = slope[unknowns.energyOrigin]!;
    const perAmplitude = slope[unknowns.amplitude]! / value[unknowns.amplitude]!;
    for (let j = 0; j < signal.signals.length; j++) {
      const { degeneracy, halfLength } = signal.signals[j]!.path;
      const t = value[unknowns.thermalScale[j]!]!;
      const sigma2 = this.sigma2[j]! * t + value[unknowns.extraStatic[j]!]!;
      const c3 = this.c3[j]! * t * t;
      let shift = 0;
      for (let s = shiftStart[j]!; s < shiftStart[j + 1]!; s++) shift += shiftCoefficient[s]! * z[shiftParameter[s]!]!;
      const size = signal.site.weight * value[unknowns.amplitude]! * degeneracy;
      const base = j * nk;
      for (let i = 0; i < nk; i++) {
        const ki = k[i]!;
        const k2 = ki * ki;
        const inverse = 1 / halfLength + inverseLambda[i]!;
        const damping = size * Math.exp(-2 * sigma2 * k2 - 2 * shift * inverse);
        const phase = 2 * ki * shift - 4 * ki * sigma2 * inverse - (4 / 3) * c3 * k2 * ki;
        const c = damping * Math.cos(phase);
        const s = damping * Math.sin(phase);
        const a = re[base + i]!;
        const b = im[base + i]!;
        const uRe = a * c - b * s;
        const uIm = a * s + b * c;
        chi[i]! += uIm;
        if (jacobian === undefined) continue;
        dSigma[i] = -2 * k2 * uIm - 4 * ki * inverse * uRe;
        dCubic[i] = -(4 / 3) * k2 * ki * uRe;
        dShift[i] = 2 * ki * uRe - 2 * inverse * uIm;
        const rate = inverseLambdaSlope[i]!;
        const dDamping = -4 * sigma2 * ki - 2 * shift * rate;
        const dPhase = 2 * shift - 4 * sigma2 * (inverse + ki * rate) - 4 * c3 * k2;
        const direct = dRe[base + i]! * s + dIm[base + i]! * c;
        jacobian[originRow + i]! += perEv * (direct + kPerEv[i]! * (dDamping * uIm + dPhase * uRe));
        jacobian[amplitudeRow + i]! += perAmplitude * uIm;
      }
      if (jacobian === undefined) continue;
      const thermal = unknowns.thermalScale[j]!;
      const bySigma = this.sigma2[j]! * slope[thermal]!;
      const byCubic = 2 * this.c3[j]! * t * slope[thermal]!;
      addScaled(jacobian, thermal * nk, dSigma, bySigma, nk);
      if (byCubic !== 0) addScaled(jacobian, thermal * nk, dCubic, byCubic, nk);
      addScaled(jacobian, unknowns.extraStatic[j]! * nk, dSigma, slope[unknowns.extraStatic[j]!]!, nk);
      for (let s = shiftStart[j]!; s < shiftStart[j + 1]!; s++)
        addScaled(jacobian, shiftParameter[s]! * nk, dShift, shiftCoefficient[s]!, nk);
    }
  }
}

function addScaled(out: Float64Array, offset: number, row: Float64Array, factor: number, n: number): void {
  for (let i = 0; i < n; i++) out[offset + i]! += factor * row[i]!;
}
