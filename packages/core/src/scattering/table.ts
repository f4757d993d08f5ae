/**
 * From a muffin-tin potential to all that paths need: complex momentum, t-matrices and absorber phases on a coarse k grid.
 * Hartree atomic units inside; k in Å⁻¹ at the door.
 *
 *   V_int(E) = V_int + V_xc(ρ_int, k),  e = μ + k²/2 − V_int(E),  p = √(2e (1 + e/2c²)),  Im p > 0
 */
import type { Edge } from '../atom/types.js';
import { perBohrFromPerAngstrom, SPEED_OF_LIGHT } from '../constants.js';
import { checkRunning, type Running } from '../errors.js';
import { SphereSolver } from './phase-shifts.js';
import type { ExchangeCorrelation, MuffinTin, ScatteringTable } from './types.js';

/** Highest angular momentum ever carried. */
const L_MAX = 25;

/** The coarse grid, Å⁻¹: 0.6 … 6 by 0.2, then by 0.4. Twice finer changes χ by 4e-4. */
export function scatteringGrid(kMax: number): Float64Array {
  const k: number[] = [];
  for (let i = 0; i <= 27; i++) k.push(0.6 + 0.2 * i);
  while (k.at(-1)! < kMax + 0.4) k.push(k.at(-1)! + 0.4);
  return Float64Array.from(k);
}

/**
 * @param k  Å⁻¹ above the Fermi level (nk), ascending, > 0
 * @throws {CancelledError} asked to stop
 */
export function scatteringTable(
  potential: MuffinTin,
  xc: ExchangeCorrelation,
  edge: Edge,
  k: Float64Array,
  running?: Running,
): ScatteringTable {
  const nk = k.length;
  const momenta = interstitialMomenta(potential, xc, k);
  const { pRe, pIm } = momenta;
  const largest = Math.max(...potential.spheres.map(({ muffinTinRadius }) => muffinTinRadius));
  const lMax = orderFor(pRe[nk - 1]!, largest);
  const width = lMax + 1;
  const spheres = potential.spheres.map((sphere, index) => {
    const { r, density, rCoulomb, muffinTinRadius, Z, element } = sphere;
    const solver = new SphereSolver(r, Z, lMax, SPEED_OF_LIGHT);
    const tRe = new Float64Array(nk * width);
    const tIm = new Float64Array(nk * width);
    const rVRe = new Float64Array(r.length);
    const rVIm = new Float64Array(r.length);
    for (let i = 0; i < nk; i++) {
      checkRunning(running);
      running?.onProgress?.(`phase shifts of ${element}`, (index * nk + i) / (nk * potential.spheres.length));
      const kAtomic = perBohrFromPerAngstrom(k[i]!);
      xc.evaluate(density, kAtomic, rVRe, rVIm);
      for (let j = 0; j < r.length; j++) {
        rVRe[j] = rCoulomb[j]! + r[j]! * rVRe[j]!;
        rVIm[j]! *= r[j]!;
      }
      const energy = potential.fermiLevel + 0.5 * kAtomic * kAtomic;
      const wave = { energy, rVRe, rVIm, eRe: momenta.eRe[i]!, eIm: momenta.eIm[i]!, pRe: pRe[i]!, pIm: pIm[i]! };
      solver.solve(
        wave,
        orderFor(pRe[i]!, muffinTinRadius),
        tRe.subarray(i * width, (i + 1) * width),
        tIm.subarray(i * width, (i + 1) * width),
      );
    }
    return { element, tRe, tIm };
  });
  const l0 = edge === 'K' || edge === 'L1' ? 1 : 2;
  const re = new Float64Array(nk);
  const im = new Float64Array(nk);
  for (let i = 0; i < nk; i++) {
    // e^{2iδ} = 1 + 2it
    re[i] = 1 - 2 * spheres[0]!.tIm[i * width + l0]!;
    im[i] = 2 * spheres[0]!.tRe[i * width + l0]!;
  }
  return { edge, k, pRe, pIm, lMax, spheres, channels: [{ l0, weight: 1, re, im }] };
}

/** Angular momenta that a sphere of this radius scatters. */
const orderFor = (p: number, radius: number): number => Math.min(L_MAX, Math.floor(1.15 * p * radius) + 9);

function interstitialMomenta(potential: MuffinTin, xc: ExchangeCorrelation, k: Float64Array) {
  const nk = k.length;
  const out = { eRe: new Float64Array(nk), eIm: new Float64Array(nk), pRe: new Float64Array(nk), pIm: new Float64Array(nk) };
  const rho = Float64Array.of(potential.interstitialDensity);
  const re = new Float64Array(1);
  const im = new Float64Array(1);
  for (let i = 0; i < nk; i++) {
    const kAtomic = perBohrFromPerAngstrom(k[i]!);
    xc.evaluate(rho, kAtomic, re, im);
    const eRe = potential.fermiLevel + 0.5 * kAtomic * kAtomic - potential.interstitialCoulomb - re[0]!;
    const eIm = -im[0]!;
    out.eRe[i] = eRe;
    out.eIm[i] = eIm;
    // p² = 2e + e²/c²
    const c2 = SPEED_OF_LIGHT * SPEED_OF_LIGHT;
    const squareRe = 2 * eRe + (eRe * eRe - eIm * eIm) / c2;
    const squareIm = 2 * eIm + (2 * eRe * eIm) / c2;
    const modulus = Math.hypot(squareRe, squareIm);
    out.pRe[i] = Math.sqrt(0.5 * (modulus + squareRe));
    out.pIm[i] = squareIm / (2 * out.pRe[i]!);
  }
  return out;
}
