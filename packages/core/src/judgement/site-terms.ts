/**
 * One site's part of a predicted χ(k), and how it changes with every parameter, in closed form.
 *
 *   u_j = w S0² N_j A_j(k) exp(−2σ²k² − 2δ(1/R + 1/λ)) exp(i[2kδ − 4kσ²(1/R + 1/λ) − (4/3) C₃k³]),    χ = Σ_j Im u_j
 *   σ² = σ²_thermal t + e,   C₃ = C₃,thermal t²,   δ = Σ_p c_p z_p,   k² = k²_data − E0/3.81
 *
 * with t the thermal scale, e the extra static σ² and δ the change of the half length (spectrum/path-sum.ts says where the phases come
 * from; the amplitude's 1/R² and mean free path follow δ to first order). The disorder factor is smooth in k and taken from every
 * sixth point (sparse-nodes.ts). Å, Å⁻¹, Å², eV.
 */
import type { SiteSignal } from '../predict/site-signal.js';
import type { OriginSignals } from './origin-signals.js';
import { SparseNodes } from './sparse-nodes.js';

/**
 * How the parameters act on one site; indices into the parameter vector. A term is a path, or that part of a group of alike paths whose
 * atoms have coordinate errors of their own.
 */
export interface SiteUnknowns {
  readonly energyOrigin: number;
  readonly amplitude: number;
  /** Path of each term, and the routes it stands for (nt). */
  readonly path: Int32Array;
  readonly degeneracy: Float64Array;
  /** Per term (nt). */
  readonly thermalScale: Int32Array;
  readonly extraStatic: Int32Array;
  /** Shift of term j: Σ coefficient · z over entries shiftStart[j] … shiftStart[j + 1] (Å per z). */
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
  private readonly nodes: SparseNodes;
  private readonly factorRe: Float64Array;
  private readonly factorIm: Float64Array;
  /** Of the term at work: Å², Å³, Å, Å⁻¹. */
  private readonly term = { sigma2: 0, c3: 0, shift: 0, inverseR: 0 };

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
    this.nodes = new SparseNodes(atOrigin.kTheory.length);
    this.factorRe = new Float64Array(this.nodes.at.length);
    this.factorIm = new Float64Array(this.nodes.at.length);
  }

  /** Adds the site's part to chi (nk) and, if given, to the derivatives by z, row-major (parameters, nk). */
  addTo(chi: Float64Array, values: ParameterValues, jacobian?: Float64Array): void {
    const { unknowns, atOrigin } = this;
    atOrigin.moveTo(values.value[unknowns.energyOrigin]!);
    for (let j = 0; j < unknowns.path.length; j++) {
      this.prepareFactor(j, values);
      if (jacobian) this.addWithSlopes(j, chi, values, jacobian);
      else this.add(j, chi);
    }
  }

  /** Size, σ², C₃ and shift of term j, and the disorder factor at the nodes. */
  private prepareFactor(j: number, { z, value }: ParameterValues): void {
    const { unknowns, atOrigin, signal, nodes, factorRe, factorIm } = this;
    const { shiftStart, shiftParameter, shiftCoefficient } = unknowns;
    const path = unknowns.path[j]!;
    const { halfLength } = signal.signals[path]!.path;
    const t = value[unknowns.thermalScale[j]!]!;
    const sigma2 = this.sigma2[path]! * t + value[unknowns.extraStatic[j]!]!;
    const c3 = this.c3[path]! * t * t;
    let shift = 0;
    for (let s = shiftStart[j]!; s < shiftStart[j + 1]!; s++) shift += shiftCoefficient[s]! * z[shiftParameter[s]!]!;
    const size = signal.site.weight * value[unknowns.amplitude]! * unknowns.degeneracy[j]!;
    this.term.sigma2 = sigma2;
    this.term.c3 = c3;
    this.term.shift = shift;
    this.term.inverseR = 1 / halfLength;
    const { kTheory, inverseLambda } = atOrigin;
    for (let m = 0; m < nodes.at.length; m++) {
      const i = nodes.at[m]!;
      const k = kTheory[i]!;
      const inverse = 1 / halfLength + inverseLambda[i]!;
      const damping = size * Math.exp(-2 * sigma2 * k * k - 2 * shift * inverse);
      const phase = 2 * k * shift - 4 * k * sigma2 * inverse - (4 / 3) * c3 * k * k * k;
      factorRe[m] = damping * Math.cos(phase);
      factorIm[m] = damping * Math.sin(phase);
    }
  }

  private add(j: number, chi: Float64Array): void {
    const { nodes, factorRe, factorIm } = this;
    const { first, weights } = nodes;
    const { re, im } = this.atOrigin;
    const base = this.unknowns.path[j]! * chi.length;
    for (let i = 0; i < chi.length; i++) {
      const m = first[i]!;
      const w = 4 * i;
      const w0 = weights[w]!;
      const w1 = weights[w + 1]!;
      const w2 = weights[w + 2]!;
      const w3 = weights[w + 3]!;
      const c = w0 * factorRe[m]! + w1 * factorRe[m + 1]! + w2 * factorRe[m + 2]! + w3 * factorRe[m + 3]!;
      const s = w0 * factorIm[m]! + w1 * factorIm[m + 1]! + w2 * factorIm[m + 2]! + w3 * factorIm[m + 3]!;
      chi[i]! += re[base + i]! * s + im[base + i]! * c;
    }
  }

  private addWithSlopes(j: number, chi: Float64Array, { value, slope }: ParameterValues, jacobian: Float64Array): void {
    const { unknowns, atOrigin, nodes, factorRe, factorIm, work } = this;
    const { sigma2, c3, shift, inverseR } = this.term;
    const { first, weights } = nodes;
    const { kTheory, inverseLambda, inverseLambdaSlope, kPerEv, re, im, dRe, dIm } = atOrigin;
    const nk = kTheory.length;
    const dSigma = work.subarray(0, nk);
    const dCubic = work.subarray(nk, 2 * nk);
    const dShift = work.subarray(2 * nk, 3 * nk);
    const originRow = unknowns.energyOrigin * nk;
    const amplitudeRow = unknowns.amplitude * nk;
    const perEv = slope[unknowns.energyOrigin]!;
    const perAmplitude = slope[unknowns.amplitude]! / value[unknowns.amplitude]!;
    const path = unknowns.path[j]!;
    const base = path * nk;
    for (let i = 0; i < nk; i++) {
      const m = first[i]!;
      const w = 4 * i;
      const w0 = weights[w]!;
      const w1 = weights[w + 1]!;
      const w2 = weights[w + 2]!;
      const w3 = weights[w + 3]!;
      const c = w0 * factorRe[m]! + w1 * factorRe[m + 1]! + w2 * factorRe[m + 2]! + w3 * factorRe[m + 3]!;
      const s = w0 * factorIm[m]! + w1 * factorIm[m + 1]! + w2 * factorIm[m + 2]! + w3 * factorIm[m + 3]!;
      const a = re[base + i]!;
      const b = im[base + i]!;
      const uRe = a * c - b * s;
      const uIm = a * s + b * c;
      chi[i]! += uIm;
      const k = kTheory[i]!;
      const k2 = k * k;
      const inverse = inverseR + inverseLambda[i]!;
      const rate = inverseLambdaSlope[i]!;
      dSigma[i] = -2 * k2 * uIm - 4 * k * inverse * uRe;
      dCubic[i] = -(4 / 3) * k2 * k * uRe;
      dShift[i] = 2 * k * uRe - 2 * inverse * uIm;
      const dDamping = -4 * sigma2 * k - 2 * shift * rate;
      const dPhase = 2 * shift - 4 * sigma2 * (inverse + k * rate) - 4 * c3 * k2;
      const direct = dRe[base + i]! * s + dIm[base + i]! * c;
      jacobian[originRow + i]! += perEv * (direct + kPerEv[i]! * (dDamping * uIm + dPhase * uRe));
      jacobian[amplitudeRow + i]! += perAmplitude * uIm;
    }
    const thermal = unknowns.thermalScale[j]!;
    const bySigma = this.sigma2[path]! * slope[thermal]!;
    const byCubic = 2 * this.c3[path]! * value[thermal]! * slope[thermal]!;
    addScaled(jacobian, thermal * nk, dSigma, bySigma, nk);
    if (byCubic !== 0) addScaled(jacobian, thermal * nk, dCubic, byCubic, nk);
    addScaled(jacobian, unknowns.extraStatic[j]! * nk, dSigma, slope[unknowns.extraStatic[j]!]!, nk);
    for (let s = unknowns.shiftStart[j]!; s < unknowns.shiftStart[j + 1]!; s++)
      addScaled(jacobian, unknowns.shiftParameter[s]! * nk, dShift, unknowns.shiftCoefficient[s]!, nk);
  }
}

function addScaled(out: Float64Array, offset: number, row: Float64Array, factor: number, n: number): void {
  for (let i = 0; i < n; i++) out[offset + i]! += factor * row[i]!;
}
