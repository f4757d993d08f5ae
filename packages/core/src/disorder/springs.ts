/**
 * Spring network: σ² of every path from the coordinates alone. A model Hessian (spring-terms.ts, spring-forms.ts), its
 * modes, quantum mean squares (normal-modes.ts). Harmonic, no Coulomb field (no LO–TO splitting), no free parameter.
 */
import { InputError } from '../errors.js';
import type { Vec3 } from '../structure/types.js';
import { forEachOverlap, freeModes, latticeModes, type ModeSet, type Pull, projectedMeanSquare } from './normal-modes.js';
import { KELVIN_PER_WAVENUMBER } from './oscillator.js';
import { checkPositive, checkTemperature, routeGradient } from './route.js';
import { orderedUff, type SpringForm } from './spring-forms.js';
import { type SpringBody, springTerms } from './spring-terms.js';
import type { ThermalModel, ThermalVertex } from './types.js';

export interface SpringOptions {
  /** K, ≥ 0. */
  readonly temperature: number;
  /** Default: Rappé et al. times Pauling bond order. */
  readonly form?: SpringForm;
  /** Crystal only: the mesh over the zone spans supercells at least this long, Å. Default 18. */
  readonly meshLength?: number;
}

export interface SpringModel extends ThermalModel {
  readonly body: SpringBody;
  readonly modes: readonly ModeSet[];
  /** Largest and smallest wavenumber met, cm⁻¹, rigid motions left out. */
  readonly range: { readonly lowest: number; readonly highest: number };
  /** Vibrations that move this route's half length: weights adding up to 1 over wavenumber bins (centres, cm⁻¹). */
  projectedDensity(
    route: readonly ThermalVertex[],
    binWidth?: number,
  ): { readonly wavenumber: Float64Array; readonly weight: Float64Array };
}

/** A vertex must lie this near a body's atom (or a copy of it), Å; alternate positions of one atom share its motion. */
const SNAP = 1;

/**
 * Thermal model of a molecule (free) or a crystal (repeating by `body.lattice`).
 *
 * @throws {InputError} no or one atom, an element without constants, atoms on top of each other, a mass missing, an atom
 *   nothing holds
 * @throws {RangeError} temperature below 0 K or not finite
 */
export function springNetwork(body: SpringBody, { temperature, form = orderedUff, meshLength = 18 }: SpringOptions): SpringModel {
  checkTemperature('springNetwork', temperature);
  checkPositive('springNetwork', 'mesh length', 'Å', meshLength);
  if (body.atoms.length < (body.lattice ? 1 : 2))
    throw new InputError(`spring network: needs at least ${body.lattice ? 1 : 2} atoms, got ${body.atoms.length}`);
  for (const [i, { mass, element, position }] of body.atoms.entries()) {
    if (!(mass > 0 && mass < Infinity)) throw new InputError(`spring network: atom ${i} (${element}) needs a mass > 0 u, got ${mass}`);
    if (!position.every(Number.isFinite)) throw new InputError(`spring network: atom ${i} (${element}) has a coordinate that is no number`);
  }
  const terms = springTerms(body, form);
  const modes = body.lattice
    ? latticeModes(body, terms, body.lattice.map((v) => Math.max(1, Math.ceil(meshLength / Math.hypot(...v)))) as [number, number, number])
    : [freeModes(body, terms)];
  let lowest = Infinity;
  let highest = 0;
  for (const { theta } of modes) {
    lowest = Math.min(lowest, theta[0] ?? Infinity);
    highest = Math.max(highest, theta.at(-1) ?? 0);
  }
  if (!(lowest > 1e-3 * highest))
    throw new InputError('spring network: part of the structure is held by no spring (an atom or molecule too far from all others)');

  const locate = locator(body);
  const pullsOf = (route: readonly ThermalVertex[]): Pull[] => {
    const g = routeGradient(route);
    return route.map((vertex, a) => ({ ...locate(vertex), g: [g[3 * a]!, g[3 * a + 1]!, g[3 * a + 2]!] }));
  };
  const at = (route: readonly ThermalVertex[], kelvin: number) => 0.25 * projectedMeanSquare(modes, body, pullsOf(route), kelvin);

  return {
    name: 'springs',
    temperature,
    inputs: {
      'force constants': form.name,
      boundary: body.lattice ? 'infinite crystal' : 'free molecule',
      'atoms moved': body.atoms.length,
      'wave vectors': modes.length,
      'lowest mode, cm⁻¹': lowest / KELVIN_PER_WAVENUMBER,
      'highest mode, cm⁻¹': highest / KELVIN_PER_WAVENUMBER,
    },
    body,
    modes,
    range: { lowest: lowest / KELVIN_PER_WAVENUMBER, highest: highest / KELVIN_PER_WAVENUMBER },
    sigma2: (route) => at(route, temperature),
    sigma2AtZero: (route) => at(route, 0),
    projectedDensity: (route, binWidth = 10) => {
      checkPositive('projectedDensity', 'bin width', 'cm⁻¹', binWidth);
      const bins = Math.floor(highest / KELVIN_PER_WAVENUMBER / binWidth) + 1;
      const weight = new Float64Array(bins);
      let total = 0;
      const pulls = pullsOf(route);
      for (const set of modes)
        forEachOverlap(set, body, pulls, (theta, squared) => {
          weight[Math.min(bins - 1, Math.floor(theta / KELVIN_PER_WAVENUMBER / binWidth))]! += set.weight * squared;
          total += set.weight * squared;
        });
      return { wavenumber: Float64Array.from(weight, (_, i) => (i + 0.5) * binWidth), weight: weight.map((w) => w / total) };
    },
  };
}

/** Finds the body's atom, or the copy of it, that stands at a vertex. */
function locator(body: SpringBody): (vertex: ThermalVertex) => { atom: number; position: Vec3 } {
  const inverse = body.lattice ? invert(body.lattice) : undefined;
  const memo = new Map<string, { atom: number; position: Vec3 }>();
  return (vertex) => {
    const p = vertex.position;
    const key = `${p[0].toFixed(4)} ${p[1].toFixed(4)} ${p[2].toFixed(4)}`;
    let found = memo.get(key);
    if (!found) {
      let best = SNAP;
      for (const [atom, { position }] of body.atoms.entries()) {
        let d: Vec3 = [p[0] - position[0], p[1] - position[1], p[2] - position[2]];
        if (body.lattice && inverse) {
          const f = inverse.map((row) => Math.round(row[0] * d[0] + row[1] * d[1] + row[2] * d[2]));
          d = [0, 1, 2].map((c) => d[c]! - body.lattice!.reduce((sum, v, i) => sum + f[i]! * v[c]!, 0)) as unknown as Vec3;
        }
        const distance = Math.hypot(...d);
        if (distance < best) {
          best = distance;
          found = { atom, position: [p[0] - d[0], p[1] - d[1], p[2] - d[2]] };
        }
      }
      if (!found)
        throw new InputError(
          `spring network: no atom of the network within ${SNAP} Å of atom ${vertex.atom} (${vertex.element}) at ${key}`,
        );
      memo.set(key, found);
    }
    return found;
  };
}

/** Rows of the inverse of the matrix whose columns are the lattice vectors. */
function invert([a, b, c]: readonly [Vec3, Vec3, Vec3]): readonly Vec3[] {
  const cross = (u: Vec3, v: Vec3): Vec3 => [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]];
  const bc = cross(b, c);
  const volume = a[0] * bc[0] + a[1] * bc[1] + a[2] * bc[2];
  return [bc, cross(c, a), cross(a, b)].map((v) => [v[0] / volume, v[1] / volume, v[2] / volume] as Vec3);
}
