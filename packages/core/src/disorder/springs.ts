/**
 * Spring network: σ² of every path from the coordinates alone. A model Hessian (spring-terms.ts, spring-forms.ts), its
 * modes, quantum mean squares (normal-modes.ts). Harmonic, no Coulomb field (no LO–TO splitting), no free parameter.
 */
import { InputError } from '../errors.js';
import type { Vec3 } from '../structure/types.js';
import { nearestImage, reciprocal } from './lattice.js';
import { bodyModes, forEachOverlap, latticeModes, type ModeSet, type Pull, rigidMotions } from './normal-modes.js';
import { HBAR2_PER_U_KB, KELVIN_PER_WAVENUMBER, occupation } from './oscillator.js';
import { recursion } from './recursion.js';
import { checkPositive, checkTemperature, routeGradient } from './route.js';
import { orderedUff, type SpringForm } from './spring-forms.js';
import { piecesOf, type SpringBody, type SpringTerm, springTerms } from './spring-terms.js';
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
  /** The normal modes; absent where the recursion took their place. */
  readonly modes?: readonly ModeSet[];
  /** Vibrations that move this route's half length: weights adding up to 1 over wavenumber bins (centres, cm⁻¹). */
  projectedDensity(
    route: readonly ThermalVertex[],
    binWidth?: number,
  ): { readonly wavenumber: Float64Array; readonly weight: Float64Array };
}

/** A vertex must lie this near a body's atom (or a copy of it), Å; alternate positions of one atom share its motion. */
const SNAP = 1;
/** More atoms than this are not diagonalised: (3n)³ against some 40 sparse products for each route. */
const DIAGONALISE = 160;
/** A mode this much slower than the fastest is a free turn of some part (3 cm⁻¹ at most), and left out like the rigid motions. */
const FREE = 1e-3;

/**
 * Thermal model of a molecule (free), a cluster (held at its edge) or a crystal (repeating by `body.lattice`).
 *
 * Measured, nothing fitted: docs/disorder-accuracy.md. In short: stretching frequencies of molecules 11 % rms, bends 23 %, optical
 * phonons of crystals 25 %; first-shell σ² of Cu, Ag, Au, ZnS, Cr2O3 within the scatter of the literature. Known to fall short:
 * iron, nickel, platinum, germanium, rutile and oxides of alkaline earths come out 15–100 % too high in frequency.
 *
 * @throws {InputError} no or one atom, an element without constants, atoms on top of each other, a mass missing, parts
 *   that no spring joins
 * @throws {RangeError} temperature below 0 K or not finite
 */
export function springNetwork(body: SpringBody, { temperature, form = orderedUff, meshLength = 18 }: SpringOptions): SpringModel {
  checkTemperature('springNetwork', temperature);
  checkPositive('springNetwork', 'mesh length', 'Å', meshLength);
  checkBody(body);
  const terms = springTerms(body, form);
  if (!body.edge?.length && new Set(piecesOf(body.atoms.length, terms)).size > 1)
    throw new InputError(
      'spring network: parts of the structure are held together by no spring (an atom or molecule too far from all others)',
    );
  const { modes, overlaps } = vibrations(body, terms, meshLength);
  const highest = modes ? Math.max(...modes.map(({ theta }) => theta.at(-1) ?? 0)) : undefined;

  const locate = locator(body);
  const pullsOf = (route: readonly ThermalVertex[]): Pull[] => {
    const g = routeGradient(route);
    return route.map((vertex, a) => ({ ...locate(vertex), g: [g[3 * a]!, g[3 * a + 1]!, g[3 * a + 2]!] }));
  };
  const met = new WeakMap<readonly ThermalVertex[], [theta: number, squared: number][]>(); // σ² is asked for twice, at T and at 0
  const spectrumOf = (route: readonly ThermalVertex[]): [theta: number, squared: number][] => {
    const known = met.get(route);
    if (known) return known;
    const list: [number, number][] = [];
    overlaps(pullsOf(route), (theta, squared) => list.push([theta, squared]));
    const top = highest ?? list.reduce((max, [theta]) => Math.max(max, theta), 0);
    const moving = list.filter(([theta]) => theta > FREE * top);
    met.set(route, moving);
    return moving;
  };
  const at = (route: readonly ThermalVertex[], kelvin: number) =>
    spectrumOf(route).reduce((sum, [theta, squared]) => sum + 0.125 * HBAR2_PER_U_KB * (squared / theta) * occupation(theta, kelvin), 0);

  return {
    name: 'springs',
    temperature,
    inputs: {
      'force constants': form.name,
      boundary: body.lattice ? 'infinite crystal' : body.edge ? `cluster, ${body.edge.length} outer atoms held` : 'free molecule',
      'atoms moved': body.atoms.length,
      ...(body.lattice ? { 'wave vectors': modes!.length } : {}),
      ...(highest === undefined ? {} : { 'highest mode, cm⁻¹': Math.round(highest / KELVIN_PER_WAVENUMBER) }),
    },
    body,
    ...(modes ? { modes } : {}),
    sigma2: (route) => at(route, temperature),
    sigma2AtZero: (route) => at(route, 0),
    projectedDensity: (route, binWidth = 10) => {
      checkPositive('projectedDensity', 'bin width', 'cm⁻¹', binWidth);
      const spectrum = spectrumOf(route);
      const binOf = (theta: number) => Math.floor(theta / KELVIN_PER_WAVENUMBER / binWidth);
      const weight = new Float64Array(spectrum.reduce((max, [theta]) => Math.max(max, binOf(theta)), 0) + 1);
      const total = spectrum.reduce((sum, [, squared]) => sum + squared, 0);
      for (const [theta, squared] of spectrum) weight[binOf(theta)]! += squared / total;
      return { wavenumber: Float64Array.from(weight, (_, i) => (i + 0.5) * binWidth), weight };
    },
  };
}

type Overlaps = (pulls: readonly Pull[], visit: (theta: number, squared: number) => void) => void;

function vibrations(
  body: SpringBody,
  terms: readonly SpringTerm[],
  meshLength: number,
): { modes?: readonly ModeSet[]; overlaps: Overlaps } {
  const rigid = body.lattice || body.edge?.length ? [] : rigidMotions(body);
  if (!body.lattice && body.atoms.length > DIAGONALISE) {
    const spectrum = recursion(body, terms, rigid);
    return {
      overlaps: (pulls, visit) => {
        const { theta, squared } = spectrum(pulls);
        for (let s = 0; s < theta.length; s++) visit(theta[s]!, squared[s]!);
      },
    };
  }
  const modes = body.lattice
    ? latticeModes(body, terms, body.lattice.map((v) => Math.max(1, Math.ceil(meshLength / Math.hypot(...v)))) as [number, number, number])
    : [bodyModes(body, terms, rigid)];
  return {
    modes,
    overlaps: (pulls, visit) => {
      for (const set of modes) forEachOverlap(set, body, pulls, visit);
    },
  };
}

function checkBody(body: SpringBody): void {
  const least = body.lattice ? 1 : 2;
  if (body.atoms.length < least) throw new InputError(`spring network: needs at least ${least} atoms, got ${body.atoms.length}`);
  for (const [i, { mass, element, position }] of body.atoms.entries()) {
    if (!(mass > 0 && mass < Infinity)) throw new InputError(`spring network: atom ${i} (${element}) needs a mass > 0 u, got ${mass}`);
    if (!position.every(Number.isFinite)) throw new InputError(`spring network: atom ${i} (${element}) has a coordinate that is no number`);
  }
}

/** Finds the body's atom, or the copy of it, that stands at a vertex. */
function locator(body: SpringBody): (vertex: ThermalVertex) => { atom: number; position: Vec3 } {
  const inverse = body.lattice ? reciprocal(body.lattice) : undefined;
  const memo = new Map<string, { atom: number; position: Vec3 }>();
  return (vertex) => {
    const p = vertex.position;
    const key = `${p[0].toFixed(4)} ${p[1].toFixed(4)} ${p[2].toFixed(4)}`;
    let found = memo.get(key);
    if (!found) {
      let best = SNAP;
      for (const [atom, { position }] of body.atoms.entries()) {
        let d: Vec3 = [p[0] - position[0], p[1] - position[1], p[2] - position[2]];
        if (body.lattice && inverse) d = nearestImage(d, body.lattice, inverse);
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
