/**
 * The amplitude A(k) of a path, whatever the light: averaged over polarisation every member of a group has the same amplitude, and
 * single scattering is exact; in polarised light members stand differently to the electric vector, and the mean over them is taken.
 */
import type { Path } from '../paths/types.js';
import type { Site, Vec3 } from '../structure/types.js';
import type { LightTensor } from './polarisation.js';
import { RehrAlbers, type RehrAlbersTerms } from './rehr-albers.js';
import { singleScattering } from './single-scattering.js';
import type { ScatteringTable } from './types.js';

export interface PathAmplitudesOptions {
  /** Terms of the separable propagator for multiple scattering; default 6. */
  readonly terms?: RehrAlbersTerms;
  /** Absent: averaged over all directions. */
  readonly light?: LightTensor | undefined;
}

export class PathAmplitudes {
  private readonly table: ScatteringTable;
  private readonly site: Site;
  private readonly sphereOfAtom: Int32Array;
  private readonly light: LightTensor | undefined;
  private readonly multiple: RehrAlbers;
  /** With enough terms to be exact for two legs; used in polarised light only. */
  private readonly single: RehrAlbers;
  private readonly memberRe: Float64Array;
  private readonly memberIm: Float64Array;

  /** @param sphereOfAtom  sphere of each atom of the site */
  constructor(table: ScatteringTable, site: Site, sphereOfAtom: Int32Array, { terms = 6, light }: PathAmplitudesOptions = {}) {
    this.table = table;
    this.site = site;
    this.sphereOfAtom = sphereOfAtom;
    this.light = light;
    this.multiple = new RehrAlbers(table, terms);
    this.single = new RehrAlbers(table, table.channels.some(({ l0 }) => l0 === 2) ? 19 : 10);
    this.memberRe = new Float64Array(table.k.length);
    this.memberIm = new Float64Array(table.k.length);
  }

  /**
   * Mean amplitude of the routes of a group, on the table's k grid.
   *
   * @param re, im  (nk), filled in place
   */
  of(path: Path, re: Float64Array, im: Float64Array): void {
    const { table, light, multiple, single, memberRe, memberIm } = this;
    if (!light) {
      if (path.legs === 2) singleScattering(table, this.sphereOfAtom[path.vertices[1]!]!, path.halfLength, re, im);
      else multiple.amplitude(this.positions(path.vertices), this.spheres(path.vertices), re, im);
      return;
    }
    const kernel = path.legs === 2 ? single : multiple;
    let total = 0;
    re.fill(0);
    im.fill(0);
    for (const route of path.members) {
      const share = this.occupancy(route);
      kernel.amplitude(this.positions(route), this.spheres(route), memberRe, memberIm, light);
      total += share;
      for (let i = 0; i < re.length; i++) {
        re[i]! += share * memberRe[i]!;
        im[i]! += share * memberIm[i]!;
      }
    }
    for (let i = 0; i < re.length; i++) {
      re[i]! /= total;
      im[i]! /= total;
    }
  }

  private positions(route: readonly number[]): Vec3[] {
    return route.map((vertex) => this.site.atoms[vertex]!.position);
  }

  private spheres(route: readonly number[]): number[] {
    return route.map((vertex) => this.sphereOfAtom[vertex]!);
  }

  /** Routes over partly occupied atoms count in part; the absorber is there. */
  private occupancy(route: readonly number[]): number {
    let share = 1;
    for (const vertex of new Set(route)) if (vertex !== 0) share *= this.site.atoms[vertex]!.occupancy;
    return share;
  }
}
