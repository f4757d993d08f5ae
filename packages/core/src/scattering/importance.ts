/**
 * Which paths matter. Cheap first: the plane-wave amplitude
 *
 *   |A| ≈ |e^{2iδ}| Π_j |f_j(θ_j)| Π_i e^{−Im ρ_i}/|ρ_i|,     f(θ) = Σ_l (2l + 1) t_l P_l(cos θ),
 *
 * at a few k; then the curved-wave amplitude at the same k where the first does not decide. What is dropped is summed up.
 */
import { bohrFromAngstrom } from '../constants.js';
import type { Path } from '../paths/types.js';
import type { Site, Vec3 } from '../structure/types.js';
import { PathAmplitudes, type PathAmplitudesOptions } from './path-amplitudes.js';
import type { ScatteringTable } from './types.js';

/** Where paths are weighed, Å⁻¹. */
const PROBES = [3, 5.4, 8.4, 12];
/** The plane wave may be wrong by this factor at short distances: above the threshold divided by it, the exact amplitude decides. */
const DOUBT = 5;
/** Polarised light makes no path stronger than this times its plane wave, which leaves out the turn at the absorber: 3 (ε·first)(ε·last). */
const POLARISED_MOST = 3;
const ANGLES = 128;

export interface Selection {
  readonly kept: readonly Path[];
  /** Σ N|A| of what was dropped over Σ N|A| of all, the largest of the probes: interference can only make it less. */
  readonly neglected: number;
  readonly droppedPaths: number;
}

/**
 * Keep single scattering, and of the rest what reaches `threshold` of the strongest single-scattering path, N|A|, at any probe.
 *
 * @param sphereOfAtom  sphere of each atom of the site
 */
export function selectPaths(
  table: ScatteringTable,
  site: Site,
  sphereOfAtom: Int32Array,
  paths: readonly Path[],
  threshold: number,
  options: PathAmplitudesOptions = {},
): Selection {
  const probe = probeTable(table);
  const n = probe.k.length;
  const factors = angularFactors(probe);
  const exact = new PathAmplitudes(probe, site, sphereOfAtom, options);
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  const positionsOf = (path: Path): Vec3[] => path.vertices.map((vertex) => site.atoms[vertex]!.position);
  const strength = (path: Path): Float64Array => {
    exact.of(path, re, im);
    return Float64Array.from(re, (value, i) => path.degeneracy * Math.hypot(value, im[i]!));
  };
  const strongest = new Float64Array(n);
  const whole = new Float64Array(n);
  const dropped = new Float64Array(n);
  let droppedPaths = 0;
  const single = paths.filter(({ legs }) => legs === 2);
  for (const path of single) {
    strength(path).forEach((value, i) => {
      strongest[i] = Math.max(strongest[i]!, value);
      whole[i]! += value;
    });
  }
  const kept: Path[] = [];
  for (const path of paths) {
    if (path.legs === 2) {
      kept.push(path);
      continue;
    }
    const reaches = (values: Float64Array, part: number): boolean => values.some((value, i) => value >= part * strongest[i]!);
    let weight = planeWave(probe, factors, positionsOf(path), path, sphereOfAtom);
    if (options.light) weight = weight.map((value) => POLARISED_MOST * value);
    if (reaches(weight, threshold / DOUBT)) weight = strength(path);
    weight.forEach((value, i) => {
      whole[i]! += value;
    });
    if (reaches(weight, threshold)) {
      kept.push(path);
      continue;
    }
    droppedPaths++;
    weight.forEach((value, i) => {
      dropped[i]! += value;
    });
  }
  const neglected = Math.max(0, ...dropped.map((value, i) => (whole[i]! > 0 ? value / whole[i]! : 0)));
  return { kept, neglected, droppedPaths };
}

/** The table at the probes alone. */
function probeTable(table: ScatteringTable): ScatteringTable {
  const nearest = PROBES.map((probe) =>
    table.k.reduce((best, k, i) => (Math.abs(k - probe) < Math.abs(table.k[best]! - probe) ? i : best), 0),
  );
  const indices = [...new Set(nearest)];
  const width = table.lMax + 1;
  const pick = (values: Float64Array): Float64Array => Float64Array.from(indices, (i) => values[i]!);
  const rows = (values: Float64Array): Float64Array =>
    Float64Array.from(indices.flatMap((i) => Array.from(values.subarray(i * width, (i + 1) * width))));
  return {
    ...table,
    k: pick(table.k),
    pRe: pick(table.pRe),
    pIm: pick(table.pIm),
    spheres: table.spheres.map(({ element, tRe, tIm }) => ({ element, tRe: rows(tRe), tIm: rows(tIm) })),
    channels: table.channels.map((channel) => ({ ...channel, re: pick(channel.re), im: pick(channel.im) })),
  };
}

/** |f(θ)| by sphere, on evenly spaced θ: row-major (nk, ANGLES + 1). */
function angularFactors({ k, lMax, spheres }: ScatteringTable): Float64Array[] {
  const width = lMax + 1;
  return spheres.map(({ tRe, tIm }) => {
    const out = new Float64Array(k.length * (ANGLES + 1));
    for (let a = 0; a <= ANGLES; a++) {
      const x = Math.cos((Math.PI * a) / ANGLES);
      for (let i = 0; i < k.length; i++) {
        let before = 0;
        let legendre = 1;
        let re = 0;
        let im = 0;
        for (let l = 0; l <= lMax; l++) {
          re += (2 * l + 1) * legendre * tRe[i * width + l]!;
          im += (2 * l + 1) * legendre * tIm[i * width + l]!;
          [before, legendre] = [legendre, ((2 * l + 1) * x * legendre - l * before) / (l + 1)];
        }
        out[i * (ANGLES + 1) + a] = Math.hypot(re, im);
      }
    }
    return out;
  });
}

/** N|A| at the probes in the plane-wave approximation. */
function planeWave(
  { k, pRe, pIm, channels }: ScatteringTable,
  factors: readonly Float64Array[],
  positions: readonly Vec3[],
  path: Path,
  sphereOfAtom: Int32Array,
): Float64Array {
  const out = new Float64Array(k.length).fill(path.degeneracy);
  const N = positions.length;
  const legs = positions.map((from, i) => {
    const to = positions[(i + 1) % N]!;
    const d: Vec3 = [to[0] - from[0], to[1] - from[1], to[2] - from[2]];
    return { d, length: Math.hypot(...d) };
  });
  for (let i = 0; i < k.length; i++) {
    const { re, im } = channels[0]!;
    out[i]! *= Math.hypot(re[i]!, im[i]!);
    legs.forEach(({ length, d }, leg) => {
      const R = bohrFromAngstrom(length);
      out[i]! *= Math.exp(-pIm[i]! * R) / (Math.hypot(pRe[i]!, pIm[i]!) * R);
      if (leg === N - 1) return;
      const next = legs[leg + 1]!;
      const cosine = (d[0] * next.d[0] + d[1] * next.d[1] + d[2] * next.d[2]) / (length * next.length);
      const angle = Math.round((Math.acos(Math.max(-1, Math.min(1, cosine))) / Math.PI) * ANGLES);
      out[i]! *= factors[sphereOfAtom[path.vertices[leg + 1]!]!]![i * (ANGLES + 1) + angle]!;
    });
  }
  return out;
}
