/**
 * Exact curved-wave single scattering (Lee & Pendry, Phys. Rev. B 11, 2795 (1975); Müller & Schaich, Phys. Rev. B 27, 6489
 * (1983); Gurman, Binsted & Ross, J. Phys. C 17, 143 (1984)), averaged over polarisation, ρ = pR complex:
 *
 *   A(k) = −e^{2iδ_{l0}} Σ_l t_l Σ_{l'} (2l + 1)(2l' + 1) (l0 l l'; 0 0 0)² h_{l'}(ρ)²
 *
 * l0 = 1 for K and L1 edges, 2 for the main channel of L2 and L3 (the l0 = 0 channel, some per cent of it, is left out).
 * The sum over l' in closed form:
 *   l0 = 0: (2l + 1) h_l²;   l0 = 1: l h_{l−1}² + (l + 1) h_{l+1}²;
 *   l0 = 2: (3/2) l(l − 1)/(2l − 1) h_{l−2}² + l(l + 1)(2l + 1)/((2l − 1)(2l + 3)) h_l² + (3/2)(l + 1)(l + 2)/(2l + 3) h_{l+2}²
 */
import { bohrFromAngstrom } from '../constants.js';
import { hankelUp } from '../numerics/complex-bessel.js';
import type { ScatteringTable } from './types.js';

/** Weights of h²_{l−l0}, h²_{l−l0+2}, …, h²_{l+l0}; those of negative order are 0. */
export function channelWeights(l0: number, l: number): readonly number[] {
  switch (l0) {
    case 0:
      return [2 * l + 1];
    case 1:
      return [l, l + 1];
    case 2:
      return [
        l < 2 ? 0 : (1.5 * l * (l - 1)) / (2 * l - 1),
        (l * (l + 1) * (2 * l + 1)) / ((2 * l - 1) * (2 * l + 3)),
        (1.5 * (l + 1) * (l + 2)) / (2 * l + 3),
      ];
    default:
      throw new RangeError(`channelWeights: l0 must be 0, 1 or 2, got ${l0}`);
  }
}

/**
 * A(k) of one neighbour on the table's k grid.
 *
 * @param sphere    index of the scatterer's sphere in the table
 * @param distance  Å
 * @param re, im    (nk), filled in place
 */
export function singleScattering(table: ScatteringTable, sphere: number, distance: number, re: Float64Array, im: Float64Array): void {
  const { lMax, pRe, pIm, channels } = table;
  const { tRe, tIm } = table.spheres[sphere]!;
  const R = bohrFromAngstrom(distance);
  const hRe = new Float64Array(lMax + 3);
  const hIm = new Float64Array(lMax + 3);
  const squareRe = new Float64Array(lMax + 3);
  const squareIm = new Float64Array(lMax + 3);
  re.fill(0);
  im.fill(0);
  for (const { l0, weight, re: phaseRe, im: phaseIm } of channels) {
    const weights = Array.from({ length: lMax + 1 }, (_, l) => channelWeights(l0, l));
    for (let i = 0; i < pRe.length; i++) {
      hankelUp(pRe[i]! * R, pIm[i]! * R, hRe, hIm);
      for (let l = 0; l < hRe.length; l++) {
        squareRe[l] = hRe[l]! * hRe[l]! - hIm[l]! * hIm[l]!;
        squareIm[l] = 2 * hRe[l]! * hIm[l]!;
      }
      let sumRe = 0;
      let sumIm = 0;
      for (let l = 0; l <= lMax; l++) {
        const t = tRe[i * (lMax + 1) + l]!;
        const ti = tIm[i * (lMax + 1) + l]!;
        if (t === 0 && ti === 0) continue;
        const w = weights[l]!;
        let gRe = 0;
        let gIm = 0;
        for (let j = 0; j < w.length; j++) {
          const order = l - l0 + 2 * j;
          if (order < 0) continue;
          gRe += w[j]! * squareRe[order]!;
          gIm += w[j]! * squareIm[order]!;
        }
        sumRe += t * gRe - ti * gIm;
        sumIm += t * gIm + ti * gRe;
      }
      re[i]! -= weight * (phaseRe[i]! * sumRe - phaseIm[i]! * sumIm);
      im[i]! -= weight * (phaseRe[i]! * sumIm + phaseIm[i]! * sumRe);
    }
  }
}
