/**
 * One block of frames to sums: for every path Σ A(k) e^{−2i Re p R₀} and the power sums of its half length. Plain data in, plain
 * data out, nothing remembered: a block gives the same bits wherever it is computed, and blocks added in their order give the
 * same average for any number of workers. Å; k on the scattering table's coarse grid.
 */
import { bohrFromAngstrom } from '../constants.js';
import { RehrAlbers, type ScatteringTable, singleScattering } from '../scattering/index.js';
import type { Vec3 } from '../structure/types.js';
import { NearestCopy } from './ensemble-frames.js';
import {
  type DistanceTable,
  exactAmplitude,
  featureCount,
  features,
  type RouteAtoms,
  type RouteGroup,
  routeGeometry,
  stripLegs,
} from './ensemble-routes.js';

/** Of a five-legged route: ten distances, quadratic. */
const MOST_TERMS = 66;

/** All a worker needs to know of one site. */
export interface SitePlan {
  readonly atoms: RouteAtoms;
  readonly table: ScatteringTable;
  readonly groups: readonly RouteGroup[];
  /** By sphere; absent for spheres that scatter in no path. */
  readonly single: readonly (DistanceTable | undefined)[];
}

/** How frames are packed and what is computed of them. */
export interface BlockPlan {
  readonly atomCount: number;
  /** Numbers of one frame. */
  readonly frameSize: number;
  /** Which cell vectors repeat; absent for molecules. */
  readonly repeats?: readonly [boolean, boolean, boolean];
  readonly sites: readonly SitePlan[];
}

/** Sums of one site over a block. */
export interface SiteSums {
  /** Row-major (groups, nk). */
  readonly re: Float64Array;
  readonly im: Float64Array;
  /** Σ w (R − R₀)ⁿ, n = 1 … 4, over frames and routes: (groups × 4). */
  readonly moments: Float64Array;
}

export interface BlockSums {
  readonly frames: number;
  readonly sites: readonly SiteSums[];
}

/** @param frames  packed, whole frames */
export function blockSums(plan: BlockPlan, frames: Float64Array): BlockSums {
  const count = frames.length / plan.frameSize;
  const sites = plan.sites.map((site): SiteSums => {
    const sums = emptySums(site);
    const kernel = new SiteKernel(plan, site);
    for (let f = 0; f < count; f++) kernel.add(frames.subarray(f * plan.frameSize, (f + 1) * plan.frameSize), sums);
    return sums;
  });
  return { frames: count, sites };
}

export function emptySums({ table, groups }: SitePlan): SiteSums {
  const size = groups.length * table.k.length;
  return { re: new Float64Array(size), im: new Float64Array(size), moments: new Float64Array(4 * groups.length) };
}

export class SiteKernel {
  private readonly plan: BlockPlan;
  private readonly site: SitePlan;
  private readonly xyz: Float64Array;
  private readonly used: readonly number[];
  private readonly d = new Float64Array(3);
  private readonly tRe: Float64Array;
  private readonly tIm: Float64Array;
  private readonly deviation = new Float64Array(16);
  private readonly terms = new Float64Array(MOST_TERMS);
  private readonly p2Re: Float64Array;
  private readonly p2Im: Float64Array;

  constructor(plan: BlockPlan, site: SitePlan) {
    const nk = site.table.k.length;
    this.plan = plan;
    this.site = site;
    this.xyz = new Float64Array(site.atoms.reference.length);
    this.used = [...new Set(site.groups.flatMap(({ routes }) => [...routes]))].sort((a, b) => a - b);
    this.tRe = new Float64Array(nk);
    this.tIm = new Float64Array(nk);
    this.p2Re = site.table.pRe.map((p) => 2 * p);
    this.p2Im = site.table.pIm.map((p) => 2 * p);
  }

  /** Adds one packed frame. */
  add(frame: Float64Array, sums: SiteSums): void {
    const { site } = this;
    const nk = site.table.k.length;
    const xyz = this.places(frame);
    let multiple: RehrAlbers | undefined;
    for (const [g, group] of site.groups.entries()) {
      const re = sums.re.subarray(g * nk, (g + 1) * nk);
      const im = sums.im.subarray(g * nk, (g + 1) * nk);
      for (let member = 0; member < group.weights.length; member++) {
        const { halfLength, product } = routeGeometry(group, member, xyz, this.deviation);
        if (group.legs === 2) this.singleT(group.spheres[1]!, halfLength);
        else if (group.polynomial.length > 0) this.polynomialT(group);
        else {
          multiple ??= new RehrAlbers(site.table);
          exactAmplitude(multiple, group, member, xyz, this.tRe, this.tIm);
          stripLegs(site.table, halfLength, product, this.tRe, this.tIm);
        }
        this.addRoute(group, group.weights[member]!, halfLength, product, re, im);
        const x = halfLength - group.halfLength;
        let power = group.weights[member]!;
        for (let n = 0; n < 4; n++) sums.moments[4 * g + n]! += power *= x;
      }
    }
  }

  /** Site atoms of a frame, relative to the absorber; each at the copy nearest to its place in the mean surroundings. */
  places(frame: Float64Array): Float64Array {
    const { xyz, d, plan } = this;
    const { source, operation, reference } = this.site.atoms;
    const copy = plan.repeats ? new NearestCopy(frame.subarray(3 * plan.atomCount), plan.repeats) : undefined;
    const centre: Vec3 = [frame[3 * source[0]!]!, frame[3 * source[0]! + 1]!, frame[3 * source[0]! + 2]!];
    for (const i of this.used) {
      const at = 3 * source[i]!;
      const [x, y, z] = [frame[at]!, frame[at + 1]!, frame[at + 2]!];
      for (let c = 0; c < 3; c++) {
        const moved = operation
          ? operation[12 * i + 3 * c]! * x +
            operation[12 * i + 3 * c + 1]! * y +
            operation[12 * i + 3 * c + 2]! * z +
            operation[12 * i + 9 + c]!
          : frame[at + c]!;
        d[c] = moved - centre[c]! - reference[3 * i + c]!;
      }
      copy?.apply(d);
      for (let c = 0; c < 3; c++) xyz[3 * i + c] = reference[3 * i + c]! + d[c]!;
    }
    return xyz;
  }

  /** out += w T Π(1/R) e^{−2 Im p R} e^{2i Re p (R − R₀)} */
  private addRoute(group: RouteGroup, weight: number, halfLength: number, product: number, re: Float64Array, im: Float64Array): void {
    const { tRe, tIm, p2Re, p2Im } = this;
    const R = bohrFromAngstrom(halfLength);
    const x = bohrFromAngstrom(halfLength - group.halfLength);
    const scale = weight / product;
    for (let k = 0; k < tRe.length; k++) {
      const size = scale * Math.exp(-p2Im[k]! * R);
      const c = size * Math.cos(p2Re[k]! * x);
      const s = size * Math.sin(p2Re[k]! * x);
      re[k]! += tRe[k]! * c - tIm[k]! * s;
      im[k]! += tRe[k]! * s + tIm[k]! * c;
    }
  }

  private polynomialT({ polynomial, distances }: RouteGroup): void {
    const { tRe, tIm, terms } = this;
    const nk = tRe.length;
    const n = featureCount(distances.length);
    features(this.deviation, distances.length, terms);
    tRe.fill(0);
    tIm.fill(0);
    for (let j = 0; j < n; j++) {
      const f = terms[j]!;
      const row = 2 * j * nk;
      for (let k = 0; k < nk; k++) {
        tRe[k]! += f * polynomial[row + 2 * k]!;
        tIm[k]! += f * polynomial[row + 2 * k + 1]!;
      }
    }
  }

  /** T of single scattering: four nodes about the distance (cubic), or computed where the nodes do not reach. */
  private singleT(sphere: number, r: number): void {
    const { tRe, tIm } = this;
    const nk = tRe.length;
    const nodes = this.site.single[sphere];
    const at = nodes ? (r - nodes.start) / nodes.step : -1;
    const first = Math.floor(at) - 1;
    if (!nodes || first < 0 || 2 * nk * (first + 4) > nodes.values.length) {
      singleScattering(this.site.table, sphere, r, tRe, tIm);
      stripLegs(this.site.table, r, bohrFromAngstrom(r) ** 2, tRe, tIm);
      return;
    }
    const t = at - first - 1;
    const w0 = (-t * (t - 1) * (t - 2)) / 6;
    const w1 = ((t + 1) * (t - 1) * (t - 2)) / 2;
    const w2 = (-(t + 1) * t * (t - 2)) / 2;
    const w3 = ((t + 1) * t * (t - 1)) / 6;
    const { values } = nodes;
    const a = 2 * first * nk;
    const step = 2 * nk;
    for (let k = 0; k < nk; k++) {
      const i = a + 2 * k;
      tRe[k] = w0 * values[i]! + w1 * values[i + step]! + w2 * values[i + 2 * step]! + w3 * values[i + 3 * step]!;
      tIm[k] = w0 * values[i + 1]! + w1 * values[i + step + 1]! + w2 * values[i + 2 * step + 1]! + w3 * values[i + 3 * step + 1]!;
    }
  }
}

/** a ← a + b. */
export function addSums(a: SiteSums, b: SiteSums): void {
  for (const key of ['re', 'im', 'moments'] as const) {
    const [into, from] = [a[key], b[key]];
    for (let i = 0; i < into.length; i++) into[i]! += from[i]!;
  }
}
