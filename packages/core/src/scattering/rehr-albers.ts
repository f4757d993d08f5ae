/**
 * Multiple scattering by the separable propagator of Rehr & Albers, Phys. Rev. B 41, 8139 (1990), averaged over polarisation or not.
 *
 * A path 0 → 1 → … → N−1 → 0 has legs i = 0 … N−1, ρ_i = p R_i, z = 1/(iρ), and index λ = (μ, ν):
 *
 *   γ^l_{μν}(ρ) = (−1)^μ N_{lμ} C_l^{(|μ|+ν)}(z) z^{|μ|+ν}/(|μ|+ν)!       N_{lμ} = √((2l+1)(l−|μ|)!/(l+|μ|)!)
 *   γ̃^l_{μν}(ρ) = (2l+1)/N_{lμ} C_l^{(ν)}(z) z^ν/ν!
 *   F^i_{λλ'}   = Σ_l t_l γ^l_λ(ρ_i) D^l_{μμ'}(Q_i⁻¹Q_{i+1}) γ̃^l_λ'(ρ_{i+1})          (at the scatterer between legs i, i+1)
 *   M_{λλ'}     = γ^{l0}_λ(ρ_{N−1}) D^{l0}_{μμ'}(Q_{N−1}⁻¹Q_0) γ̃^{l0}_λ'(ρ_0)               (at the absorber)
 *   A           = e^{2iδ_{l0}} Π e^{iρ_i}/ρ_i · Tr[F^0 F^1 … F^{N−2} M]/(2l0 + 1)
 *
 * In polarised light (polarisation.ts) B_{μμ'} stands in M instead of D^{l0}_{μμ'}.
 *
 * C_0 = 1, C_1 = 1 − z, C_{l+1} = C_{l−1} − (2l+1) z C_l, and its derivatives in z. λ runs over 2ν + |μ| ≤ 2: six terms by
 * default (fifteen reach the exact expansion to 1 %). Accuracy: test/external/multiple-scattering.test.ts.
 *
 * The rotation enters F only through e^{−iμα} on the left and e^{−iμ'γ} on the right, so the costly sum over l depends on two
 * distances and one angle, and is kept for all paths that share them.
 */
import { bohrFromAngstrom } from '../constants.js';
import type { Vec3 } from '../structure/types.js';
import { absorberCoupling, type LightTensor } from './polarisation.js';
import { smallD, type Turn, turnBetween } from './rotation.js';
import type { ScatteringTable } from './types.js';

/** λ = (μ, ν) in the order 2ν + |μ| = 0, 1, 2, 3, 4; the last four make two legs exact for l0 = 2. */
const LAMBDAS: readonly (readonly [mu: number, nu: number])[] = [
  [0, 0],
  [1, 0],
  [-1, 0],
  [0, 1],
  [2, 0],
  [-2, 0],
  [1, 1],
  [-1, 1],
  [3, 0],
  [-3, 0],
  [0, 2],
  [2, 1],
  [-2, 1],
  [4, 0],
  [-4, 0],
  [1, 2],
  [-1, 2],
  [2, 2],
  [-2, 2],
];

export type RehrAlbersTerms = 1 | 3 | 6 | 10 | 15 | 19;

/** γ and γ̃ of one distance: row-major (nk, terms, lMax + 1). */
interface Gammas {
  readonly re: Float64Array;
  readonly im: Float64Array;
  readonly tildeRe: Float64Array;
  readonly tildeIm: Float64Array;
}

/** A matrix for every k: row-major (nk, terms, terms). */
interface Matrices {
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/** Distances (Å) and cosines this alike share their matrices; equal by symmetry, they differ by 1e-12. The phase moves by 1e-7. */
const DISTANCE_GRAIN = 1e-8;
const COSINE_GRAIN = 1e-9;

/** Amplitudes of multiple-scattering paths of one site. */
export class RehrAlbers {
  private readonly table: ScatteringTable;
  private readonly terms: number;
  private readonly gammas = new Map<number, Gammas>();
  private readonly vertices = new Map<string, Matrices>();
  private absorber: Matrices | undefined;
  /** Work: the running product and the next matrix with its phases (terms²). */
  private readonly work: { aRe: Float64Array; aIm: Float64Array; bRe: Float64Array; bIm: Float64Array };

  constructor(table: ScatteringTable, terms: RehrAlbersTerms = 6) {
    this.table = table;
    this.terms = terms;
    const room = () => new Float64Array(terms * terms);
    this.work = { aRe: room(), aIm: room(), bRe: room(), bIm: room() };
  }

  /**
   * A(k) of a closed route on the table's k grid.
   *
   * @param positions  of the vertices, absorber first, Å (N ≥ 2)
   * @param spheres    sphere of each vertex in the table
   * @param re, im     (nk), filled in place
   * @param light      ⟨ε εᵀ⟩ in the axes of the positions; absent: averaged over all directions
   */
  amplitude(positions: readonly Vec3[], spheres: readonly number[], re: Float64Array, im: Float64Array, light?: LightTensor): void {
    const { table, terms } = this;
    const N = positions.length;
    const legs = positions.map((from, i) => legBetween(from, positions[(i + 1) % N]!));
    const turns = legs.map((leg, i) => turnBetween(leg.direction, legs[(i + 1) % N]!.direction));
    // Polarised, the absorber's matrix holds both of its rotations itself.
    if (light) turns[N - 1] = { alpha: 0, cosBeta: 1, gamma: 0 };
    re.fill(0);
    im.fill(0);
    for (const { l0, weight, re: phaseRe, im: phaseIm } of table.channels) {
      // matrices[i] stands at the vertex after leg i; the last is the absorber's.
      const matrices = legs.map((leg, i) => {
        const next = legs[(i + 1) % N]!;
        if (light && i === N - 1) return this.absorberMatrix(l0, leg, next, light);
        return this.matrixAt(i === N - 1 ? -1 - l0 : spheres[i + 1]!, leg.length, next.length, turns[i]!.cosBeta);
      });
      for (let k = 0; k < table.k.length; k++) {
        const trace = this.trace(matrices, turns, k * terms * terms);
        let tRe = (trace[0] * weight) / (2 * l0 + 1);
        let tIm = (trace[1] * weight) / (2 * l0 + 1);
        for (const { length } of legs) {
          const R = bohrFromAngstrom(length);
          const x = table.pRe[k]! * R;
          const y = table.pIm[k]! * R;
          const decay = Math.exp(-y) / (x * x + y * y);
          // e^{iρ}/ρ
          const c = decay * (Math.cos(x) * x + Math.sin(x) * y);
          const s = decay * (Math.sin(x) * x - Math.cos(x) * y);
          [tRe, tIm] = [tRe * c - tIm * s, tRe * s + tIm * c];
        }
        re[k]! += phaseRe[k]! * tRe - phaseIm[k]! * tIm;
        im[k]! += phaseRe[k]! * tIm + phaseIm[k]! * tRe;
      }
    }
  }

  /** Tr of the product of matrices, the phases e^{−iμ(γ_{i−1} + α_i)} between them. */
  private trace(matrices: readonly Matrices[], turns: readonly Turn[], base: number): readonly [number, number] {
    const { terms, work } = this;
    const n = matrices.length;
    this.load(matrices[0]!, base, turns[n - 1]!.gamma + turns[0]!.alpha, work.aRe, work.aIm);
    for (let i = 1; i < n; i++) {
      const next = matrices[i]!;
      this.load(next, base, turns[i - 1]!.gamma + turns[i]!.alpha, work.bRe, work.bIm);
      if (i < n - 1) this.multiply();
    }
    let re = 0;
    let im = 0;
    for (let a = 0; a < terms; a++) {
      for (let b = 0; b < terms; b++) {
        const p = a * terms + b;
        const q = b * terms + a;
        re += work.aRe[p]! * work.bRe[q]! - work.aIm[p]! * work.bIm[q]!;
        im += work.aRe[p]! * work.bIm[q]! + work.aIm[p]! * work.bRe[q]!;
      }
    }
    return [re, im];
  }

  /** One k's matrix with the phase e^{−iμ angle} on its rows. */
  private load({ re, im }: Matrices, base: number, angle: number, outRe: Float64Array, outIm: Float64Array): void {
    const { terms } = this;
    for (let a = 0; a < terms; a++) {
      const phase = -LAMBDAS[a]![0] * angle;
      const c = Math.cos(phase);
      const s = Math.sin(phase);
      for (let b = 0; b < terms; b++) {
        const at = a * terms + b;
        outRe[at] = re[base + at]! * c - im[base + at]! * s;
        outIm[at] = re[base + at]! * s + im[base + at]! * c;
      }
    }
  }

  /** a ← a b */
  private multiply(): void {
    const { terms, work } = this;
    const { aRe, aIm, bRe, bIm } = work;
    const rowRe = new Float64Array(terms);
    const rowIm = new Float64Array(terms);
    for (let i = 0; i < terms; i++) {
      rowRe.fill(0);
      rowIm.fill(0);
      for (let m = 0; m < terms; m++) {
        const x = aRe[i * terms + m]!;
        const y = aIm[i * terms + m]!;
        for (let j = 0; j < terms; j++) {
          rowRe[j]! += x * bRe[m * terms + j]! - y * bIm[m * terms + j]!;
          rowIm[j]! += x * bIm[m * terms + j]! + y * bRe[m * terms + j]!;
        }
      }
      aRe.set(rowRe, i * terms);
      aIm.set(rowIm, i * terms);
    }
  }

  /** F without its phases at a sphere, or M of channel l0 when sphere = −1 − l0. */
  private matrixAt(sphere: number, lengthIn: number, lengthOut: number, cosBeta: number): Matrices {
    const inClass = Math.round(lengthIn / DISTANCE_GRAIN);
    const outClass = Math.round(lengthOut / DISTANCE_GRAIN);
    const angleClass = Math.round(cosBeta / COSINE_GRAIN);
    const key = `${sphere} ${inClass} ${outClass} ${angleClass}`;
    let found = this.vertices.get(key);
    if (!found) {
      found = this.buildMatrix(sphere, this.gammasOf(inClass), this.gammasOf(outClass), angleClass * COSINE_GRAIN);
      this.vertices.set(key, found);
    }
    return found;
  }

  /** M of channel l0 in polarised light, all its rotations in it. */
  private absorberMatrix(l0: number, last: Leg, first: Leg, light: LightTensor): Matrices {
    const { terms, table } = this;
    const width = table.lMax + 1;
    const before = this.gammasOf(Math.round(last.length / DISTANCE_GRAIN));
    const after = this.gammasOf(Math.round(first.length / DISTANCE_GRAIN));
    const coupling = absorberCoupling(l0, light, last.direction, first.direction);
    const size = table.k.length * terms * terms;
    this.absorber ??= { re: new Float64Array(size), im: new Float64Array(size) };
    const out = this.absorber;
    for (let a = 0; a < terms; a++) {
      for (let b = 0; b < terms; b++) {
        const mu = LAMBDAS[a]![0];
        const muPrime = LAMBDAS[b]![0];
        const isInside = Math.abs(mu) <= l0 && Math.abs(muPrime) <= l0;
        const entry = (l0 + mu) * (2 * l0 + 1) + l0 + muPrime;
        const bRe = isInside ? coupling.re[entry]! : 0;
        const bIm = isInside ? coupling.im[entry]! : 0;
        for (let k = 0; k < table.k.length; k++) {
          const left = (k * terms + a) * width + l0;
          const right = (k * terms + b) * width + l0;
          const gRe = before.re[left]! * after.tildeRe[right]! - before.im[left]! * after.tildeIm[right]!;
          const gIm = before.re[left]! * after.tildeIm[right]! + before.im[left]! * after.tildeRe[right]!;
          const at = (k * terms + a) * terms + b;
          out.re[at] = bRe * gRe - bIm * gIm;
          out.im[at] = bRe * gIm + bIm * gRe;
        }
      }
    }
    return out;
  }

  private buildMatrix(sphere: number, before: Gammas, after: Gammas, cosBeta: number): Matrices {
    const { terms, table } = this;
    const width = table.lMax + 1;
    const nk = table.k.length;
    const out = { re: new Float64Array(nk * terms * terms), im: new Float64Array(nk * terms * terms) };
    const l0 = -1 - sphere;
    const t = sphere >= 0 ? table.spheres[sphere]! : undefined;
    const d = new Float64Array(width);
    for (let a = 0; a < terms; a++) {
      for (let b = 0; b < terms; b++) {
        const [mu] = LAMBDAS[a]!;
        const [muPrime] = LAMBDAS[b]!;
        smallD(mu, muPrime, cosBeta, d);
        for (let k = 0; k < nk; k++) {
          const left = (k * terms + a) * width;
          const right = (k * terms + b) * width;
          let re = 0;
          let im = 0;
          const lowest = t ? Math.max(Math.abs(mu), Math.abs(muPrime)) : l0;
          const highest = t ? table.lMax : l0;
          for (let l = lowest; l <= highest; l++) {
            const tRe = t ? t.tRe[k * width + l]! : 1;
            const tIm = t ? t.tIm[k * width + l]! : 0;
            if (tRe === 0 && tIm === 0) break; // orders above the sphere's own cut
            const gRe = before.re[left + l]! * after.tildeRe[right + l]! - before.im[left + l]! * after.tildeIm[right + l]!;
            const gIm = before.re[left + l]! * after.tildeIm[right + l]! + before.im[left + l]! * after.tildeRe[right + l]!;
            re += d[l]! * (tRe * gRe - tIm * gIm);
            im += d[l]! * (tRe * gIm + tIm * gRe);
          }
          const at = (k * terms + a) * terms + b;
          out.re[at] = re;
          out.im[at] = im;
        }
      }
    }
    return out;
  }

  private gammasOf(lengthClass: number): Gammas {
    let found = this.gammas.get(lengthClass);
    if (!found) {
      found = this.buildGammas(bohrFromAngstrom(lengthClass * DISTANCE_GRAIN));
      this.gammas.set(lengthClass, found);
    }
    return found;
  }

  private buildGammas(R: number): Gammas {
    const { terms, table } = this;
    const width = table.lMax + 1;
    const nk = table.k.length;
    const room = () => new Float64Array(nk * terms * width);
    const out = { re: room(), im: room(), tildeRe: room(), tildeIm: room() };
    const orders = 1 + Math.max(...LAMBDAS.slice(0, terms).map(([mu, nu]) => Math.abs(mu) + nu));
    const cRe = new Float64Array(orders * width);
    const cIm = new Float64Array(orders * width);
    for (let k = 0; k < nk; k++) {
      // z = 1/(iρ) = −i ρ*/|ρ|²
      const x = table.pRe[k]! * R;
      const y = table.pIm[k]! * R;
      const n2 = x * x + y * y;
      const zRe = -y / n2;
      const zIm = -x / n2;
      hankelPolynomials(zRe, zIm, width, orders, cRe, cIm);
      scaleByPowers(zRe, zIm, width, orders, cRe, cIm);
      for (let a = 0; a < terms; a++) {
        const [mu, nu] = LAMBDAS[a]!;
        const m = Math.abs(mu);
        for (let l = m; l < width; l++) {
          let ratio = 1; // (l − m)!/(l + m)!
          for (let i = l - m + 1; i <= l + m; i++) ratio /= i;
          const N = Math.sqrt((2 * l + 1) * ratio);
          const at = (k * terms + a) * width + l;
          const sign = mu % 2 === 0 ? N : -N;
          out.re[at] = sign * cRe[(m + nu) * width + l]!;
          out.im[at] = sign * cIm[(m + nu) * width + l]!;
          out.tildeRe[at] = ((2 * l + 1) / N) * cRe[nu * width + l]!;
          out.tildeIm[at] = ((2 * l + 1) / N) * cIm[nu * width + l]!;
        }
      }
    }
    return out;
  }
}

/** C_l^{(n)}(z) for n < orders, row-major (orders, width). */
function hankelPolynomials(zRe: number, zIm: number, width: number, orders: number, re: Float64Array, im: Float64Array): void {
  re.fill(0);
  im.fill(0);
  re[0] = 1;
  re[1] = 1 - zRe;
  im[1] = -zIm;
  if (orders > 1) re[width + 1] = -1;
  for (let l = 1; l + 1 < width; l++) {
    const c = 2 * l + 1;
    for (let n = 0; n < orders; n++) {
      const row = n * width;
      const below = row - width;
      const fRe = zRe * re[row + l]! - zIm * im[row + l]! + (n > 0 ? n * re[below + l]! : 0);
      const fIm = zRe * im[row + l]! + zIm * re[row + l]! + (n > 0 ? n * im[below + l]! : 0);
      re[row + l + 1] = re[row + l - 1]! - c * fRe;
      im[row + l + 1] = im[row + l - 1]! - c * fIm;
    }
  }
}

/** Row n times zⁿ/n!. */
function scaleByPowers(zRe: number, zIm: number, width: number, orders: number, re: Float64Array, im: Float64Array): void {
  let pRe = 1;
  let pIm = 0;
  for (let n = 1; n < orders; n++) {
    [pRe, pIm] = [(pRe * zRe - pIm * zIm) / n, (pRe * zIm + pIm * zRe) / n];
    for (let at = n * width; at < (n + 1) * width; at++) {
      const a = re[at]!;
      const b = im[at]!;
      re[at] = a * pRe - b * pIm;
      im[at] = a * pIm + b * pRe;
    }
  }
}

/** Length in Å, direction a unit vector. */
interface Leg {
  readonly length: number;
  readonly direction: Vec3;
}

function legBetween(from: Vec3, to: Vec3): Leg {
  const d: Vec3 = [to[0] - from[0], to[1] - from[1], to[2] - from[2]];
  const length = Math.hypot(...d);
  return { length, direction: [d[0] / length, d[1] / length, d[2] / length] };
}
