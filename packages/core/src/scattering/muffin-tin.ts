/**
 * The overlapped muffin-tin potential of one site. Hartree atomic units, positions in Å at the door.
 *
 *   V(r) = V_own(r) + Σ_neighbours V̄(r),  ρ(r) likewise          (Mattheiss, Phys. Rev. 133, A1399 (1964))
 *   Norman radius:       ∫_0^{R_N} 4π r² ρ dr = Z                   (Norman, Mol. Phys. 31, 1191 (1976))
 *   touching radius:     R_t,i = min_j d_ij R_N,i / (R_N,i + R_N,j)
 *   muffin-tin radius:   R_mt = min(1.15 R_t, 0.999 R_N)
 *   interstitial:        averages of ρ and V over the shells R_mt … R_N, weighted by the number of atoms of each kind
 *   Fermi level:         μ = V_int + v_xc(ρ_int) + k_F²/2
 *
 * Exchange and correlation are left to the energy-dependent part (types.ts, ExchangeCorrelation), evaluated from the
 * overlapped density, not summed atom by atom.
 */
import { vxcBarthHedin } from '../atom/index.js';
import type { FreeAtom } from '../atom/types.js';
import { bohrFromAngstrom } from '../constants.js';
import { InputError } from '../errors.js';
import { CubicSpline } from '../numerics/spline.js';
import type { Site } from '../structure/types.js';
import { Antiderivative, addOverlap } from './overlap.js';
import type { MuffinTin, Sphere } from './types.js';

/** Neighbours of a sphere's centre reach this far; 6.9 Å changes k²χ by 1e-6. */
export const OVERLAP_RADIUS = 7;

/** Spheres may overlap by this factor over touching; 1.00 … 1.25 has no visible effect on χ. */
const OVERLAP_FACTOR = 1.15;

/** Overlapped functions are tabulated to here, bohr: beyond every Norman radius of a bonded atom. */
const OUTER_RADIUS = 10;

/** Mesh of the neighbours' smooth part and step of the spheres' own mesh, in ln r. */
const NEIGHBOUR_STEP = 0.025;
const SPHERE_STEP = 0.0125;
const SPHERE_START = 1e-6;

export interface MuffinTinInput {
  readonly site: Site;
  /** For each atom of the site its kind, 0 the absorber alone, −1 left out. */
  readonly kindOfAtom: Int32Array;
  /** For each kind the atom of the site whose surroundings stand for it. */
  readonly representatives: readonly number[];
  /** For each kind its free atom; the absorber's with its core hole. */
  readonly atoms: readonly FreeAtom[];
  /** Free atom by element for atoms that overlap but belong to no kind (farther than any path). */
  readonly atomOfElement: (element: string) => FreeAtom;
}

/** One centre with its overlapped functions on the atom's own mesh, cut at OUTER_RADIUS. */
interface Centre {
  readonly atom: FreeAtom;
  readonly own: { readonly rCoulomb: CubicSpline; readonly lnDensity: CubicSpline };
  readonly neighbours: { readonly coulomb: CubicSpline; readonly density: CubicSpline };
}

/** ∫_0^r 4π r² f dr of a centre's density and Coulomb potential, and the Norman radius that follows. */
interface Contents {
  readonly electrons: Antiderivative;
  readonly coulomb: Antiderivative;
  readonly normanRadius: number;
}

/**
 * Build the muffin-tin potential of a site.
 *
 * @throws {InputError} an atom is so isolated that its Norman sphere holds more than OUTER_RADIUS
 */
export function buildMuffinTin({ site, kindOfAtom, representatives, atoms, atomOfElement }: MuffinTinInput): MuffinTin {
  const atomOf = (index: number): FreeAtom => {
    const kind = kindOfAtom[index]!;
    return kind >= 0 ? atoms[kind]! : atomOfElement(site.atoms[index]!.element);
  };
  const antiderivatives = new Map<FreeAtom, { coulomb: Antiderivative; density: Antiderivative }>();
  const antiderivativesOf = (atom: FreeAtom) => {
    let found = antiderivatives.get(atom);
    if (!found) {
      found = tabulate(atom);
      antiderivatives.set(atom, found);
    }
    return found;
  };

  const surroundings = representatives.map((index) => neighboursOf(site, index));
  const centres = representatives.map((index, kind): Centre => {
    const shells = surroundings[kind]!.map(({ atom, distance }) => ({
      source: antiderivativesOf(atomOf(atom)),
      distance,
      occupancy: site.atoms[atom]!.occupancy,
    }));
    return overlapAt(atomOf(index), shells);
  });

  const contents = centres.map(contentsOf);

  // The touching radius takes the neighbour's own Norman radius; a neighbour of no kind stands as its element's first kind.
  const normanOf = (index: number): number => {
    const kind = kindOfAtom[index]!;
    if (kind >= 0) return contents[kind]!.normanRadius;
    const alike = representatives.findIndex((r) => site.atoms[r]!.element === site.atoms[index]!.element);
    return alike >= 0 ? contents[alike]!.normanRadius : Number.NaN;
  };

  const spheres = centres.map((centre, kind): Sphere => {
    const own = contents[kind]!.normanRadius;
    let touching = own;
    for (const { atom, distance } of surroundings[kind]!) {
      const other = normanOf(atom);
      if (other > 0) touching = Math.min(touching, (distance * own) / (own + other));
    }
    const muffinTinRadius = Math.min(OVERLAP_FACTOR * touching, 0.999 * own);
    const r = sphereMesh(muffinTinRadius);
    const rCoulomb = new Float64Array(r.length);
    const density = new Float64Array(r.length);
    for (let i = 0; i < r.length; i++) {
      rCoulomb[i] = rCoulombAt(centre, r[i]!);
      density[i] = densityAt(centre, r[i]!);
    }
    return {
      element: site.atoms[representatives[kind]!]!.element,
      Z: centre.atom.Z,
      role: kind === 0 ? 'absorber' : 'scatterer',
      muffinTinRadius,
      normanRadius: own,
      r,
      rCoulomb,
      density,
    };
  });

  const counts = new Float64Array(centres.length);
  kindOfAtom.forEach((kind, index) => {
    if (kind >= 0) counts[kind]! += index === 0 ? 1 : site.atoms[index]!.occupancy;
  });
  const interstitial = averageBetween(contents, spheres, counts);
  const fermiMomentum = Math.cbrt(3 * Math.PI * Math.PI * interstitial.density);
  return {
    spheres,
    sphereOfAtom: kindOfAtom,
    interstitialCoulomb: interstitial.coulomb,
    interstitialDensity: interstitial.density,
    fermiLevel: interstitial.coulomb + vxcBarthHedin(interstitial.density) + 0.5 * fermiMomentum * fermiMomentum,
  };
}

/** Antiderivatives of s V(s) and s ρ(s) of a free atom. */
function tabulate(atom: FreeAtom): { coulomb: Antiderivative; density: Antiderivative } {
  const n = atom.r.length;
  const s2V = new Float64Array(n);
  const s2rho = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    s2V[i] = atom.r[i]! * atom.rCoulomb[i]!;
    s2rho[i] = atom.radialDensity[i]! / (4 * Math.PI);
  }
  return { coulomb: new Antiderivative(atom.x0, atom.dx, s2V), density: new Antiderivative(atom.x0, atom.dx, s2rho) };
}

/** Atoms of the site within OVERLAP_RADIUS of one of them, hydrogens left out; distances in bohr. */
function neighboursOf(site: Site, centre: number): { atom: number; distance: number }[] {
  const [x, y, z] = site.atoms[centre]!.position;
  const found: { atom: number; distance: number }[] = [];
  site.atoms.forEach((other, atom) => {
    if (atom === centre || other.element === 'H') return;
    const distance = Math.hypot(other.position[0] - x, other.position[1] - y, other.position[2] - z);
    if (distance <= OVERLAP_RADIUS) found.push({ atom, distance: bohrFromAngstrom(distance) });
  });
  return found;
}

function overlapAt(
  atom: FreeAtom,
  neighbours: readonly { source: { coulomb: Antiderivative; density: Antiderivative }; distance: number; occupancy: number }[],
): Centre {
  const lnOuter = Math.log(OUTER_RADIUS);
  const n = Math.ceil((lnOuter - Math.log(1e-3)) / NEIGHBOUR_STEP) + 1;
  const lnR = Float64Array.from({ length: n }, (_, i) => lnOuter - (n - 1 - i) * NEIGHBOUR_STEP);
  const r = lnR.map(Math.exp);
  const coulomb = new Float64Array(n);
  const density = new Float64Array(n);
  // Neighbours of one kind at one distance (1e-6 bohr) are averaged once.
  const shells = new Map<string, { source: { coulomb: Antiderivative; density: Antiderivative }; distance: number; count: number }>();
  const sourceNumbers = new Map<object, number>();
  for (const { source, distance, occupancy } of neighbours) {
    if (!sourceNumbers.has(source)) sourceNumbers.set(source, sourceNumbers.size);
    const key = `${sourceNumbers.get(source)} ${Math.round(distance * 1e6)}`;
    const shell = shells.get(key);
    if (shell) shell.count += occupancy;
    else shells.set(key, { source, distance, count: occupancy });
  }
  for (const { source, distance, count } of shells.values()) {
    addOverlap(source.coulomb, distance, count, r, coulomb);
    addOverlap(source.density, distance, count, r, density);
  }
  const ownLnR = atom.r.map(Math.log);
  const lnDensity = new Float64Array(ownLnR.length);
  for (let i = 0; i < ownLnR.length; i++) {
    const radius = atom.r[i]!;
    lnDensity[i] = Math.log(Math.max(atom.radialDensity[i]! / (4 * Math.PI * radius * radius), 1e-300));
  }
  return {
    atom,
    own: { rCoulomb: new CubicSpline(ownLnR, atom.rCoulomb), lnDensity: new CubicSpline(ownLnR, lnDensity) },
    neighbours: { coulomb: new CubicSpline(lnR, coulomb), density: new CubicSpline(lnR, density) },
  };
}

function rCoulombAt(centre: Centre, r: number): number {
  const x = Math.log(r);
  const xNeighbours = Math.max(x, Math.log(1e-3));
  return centre.own.rCoulomb.at(x) + r * centre.neighbours.coulomb.at(xNeighbours);
}

function densityAt(centre: Centre, r: number): number {
  const x = Math.log(r);
  const xNeighbours = Math.max(x, Math.log(1e-3));
  return Math.exp(centre.own.lnDensity.at(x)) + centre.neighbours.density.at(xNeighbours);
}

function contentsOf(centre: Centre): Contents {
  const r = sphereMesh(OUTER_RADIUS);
  const r3rho = new Float64Array(r.length);
  const r3V = new Float64Array(r.length);
  for (let i = 0; i < r.length; i++) {
    const ri = r[i]!;
    r3rho[i] = 4 * Math.PI * ri ** 3 * densityAt(centre, ri);
    r3V[i] = 4 * Math.PI * ri * ri * rCoulombAt(centre, ri);
  }
  const x0 = Math.log(r[0]!);
  const electrons = new Antiderivative(x0, SPHERE_STEP, r3rho);
  return { electrons, coulomb: new Antiderivative(x0, SPHERE_STEP, r3V), normanRadius: normanRadius(electrons, centre.atom.Z) };
}

/** Radius that holds Z electrons, by bisection to 1e-12 relative. */
function normanRadius(electrons: Antiderivative, Z: number): number {
  let low = 0.05;
  let high = OUTER_RADIUS;
  if (!(electrons.at(high) > Z)) {
    throw new InputError(
      `muffin tin: an atom of Z = ${Z} has no neighbour near enough to share its space with (its sphere would exceed ${OUTER_RADIUS} bohr); is the structure complete and in Å?`,
    );
  }
  while (high - low > 1e-12 * high) {
    const middle = 0.5 * (low + high);
    if (electrons.at(middle) < Z) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

/** Logarithmic mesh from SPHERE_START that ends exactly on the radius, bohr. */
function sphereMesh(radius: number): Float64Array {
  const n = Math.ceil(Math.log(radius / SPHERE_START) / SPHERE_STEP) + 1;
  return Float64Array.from({ length: n }, (_, i) => radius * Math.exp(SPHERE_STEP * (i - n + 1)));
}

/** Averages over the shells between muffin-tin and Norman radius. */
function averageBetween(
  contents: readonly Contents[],
  spheres: readonly Sphere[],
  counts: Float64Array,
): { density: number; coulomb: number } {
  let volume = 0;
  let electrons = 0;
  let coulomb = 0;
  spheres.forEach(({ muffinTinRadius, normanRadius: outer }, kind) => {
    const count = counts[kind]!;
    const inside = contents[kind]!;
    volume += count * ((4 * Math.PI) / 3) * (outer ** 3 - muffinTinRadius ** 3);
    electrons += count * (inside.electrons.at(outer) - inside.electrons.at(muffinTinRadius));
    coulomb += count * (inside.coulomb.at(outer) - inside.coulomb.at(muffinTinRadius));
  });
  return { density: electrons / volume, coulomb: coulomb / volume };
}
