/**
 * One bound level of a central potential: the radial Dirac equation, and its c → ∞ limit, on a logarithmic mesh.
 *
 * With t = ln r, P = r g (large component), S = c r f (small component times c), a = 1/c², κ = −(l + 1) for j = l + ½ and l
 * for j = l − ½, E without rest mass:
 *
 *   dP/dt = −κ P + [2 r + a (E r − rV)] S
 *   dS/dt =  κ S − (E r − rV) P
 *
 * a = 0 and κ = −(l + 1) is the Schrödinger equation exactly. Integrated by classical Runge–Kutta, outward from the
 * nucleus and inward from the decaying tail, matched at the outermost classical turning point; the jump of S there gives
 * the energy correction dE = P [S_out − S_in] / ∫(P² + a S²) dr. Hartree atomic units.
 */
import { ConvergenceError } from '../errors.js';

export interface LogMesh {
  /** r_i = exp(x0 + i dx), bohr. */
  readonly r: Float64Array;
  readonly x0: number;
  readonly dx: number;
}

export function logMesh(x0: number, dx: number, n: number): LogMesh {
  return { r: Float64Array.from({ length: n }, (_, i) => Math.exp(x0 + i * dx)), x0, dx };
}

/** r·V on the mesh points and half-way between them (4-point Lagrange), hartree·bohr. */
export interface MeshPotential {
  readonly rV: Float64Array;
  readonly rVHalf: Float64Array;
}

/** Fill the half-way values from the mesh values, weights (−1, 9, 9, −1)/16. */
export function fillHalfPoints({ rV, rVHalf }: MeshPotential): void {
  const n = rV.length;
  for (let i = 1; i < n - 2; i++) rVHalf[i] = (9 * (rV[i]! + rV[i + 1]!) - rV[i - 1]! - rV[i + 2]!) / 16;
  rVHalf[0] = (5 * rV[0]! + 15 * rV[1]! - 5 * rV[2]! + rV[3]!) / 16;
  rVHalf[n - 2] = (5 * rV[n - 1]! + 15 * rV[n - 2]! - 5 * rV[n - 3]! + rV[n - 4]!) / 16;
}

export interface LevelRequest {
  readonly Z: number;
  readonly n: number;
  readonly kappa: number;
  /** 1/c²; 0 for the Schrödinger equation. */
  readonly a: number;
  /** First guess, hartree. */
  readonly guess: number;
}

/** Relative change of the energy at which a level counts as found. */
const TOLERANCE = 1e-12;
const MAX_TRIALS = 120;
/** Amplitudes are scaled down past this, so that none overflows. */
const HUGE = 1e60;
/** The inward integration starts this many decay lengths beyond the turning point. */
const TAIL = 40;

/** Integrates levels on one mesh with its own work arrays. */
export class RadialSolver {
  private readonly mesh: LogMesh;
  private readonly rHalf: Float64Array;
  /** Components of the level solved last, normalised ∫(P² + a S²) dr = 1 (n each). */
  readonly P: Float64Array;
  readonly S: Float64Array;

  constructor(mesh: LogMesh) {
    this.mesh = mesh;
    this.rHalf = mesh.r.map((r) => r * Math.exp(mesh.dx / 2));
    this.P = new Float64Array(mesh.r.length);
    this.S = new Float64Array(mesh.r.length);
  }

  /**
   * Energy of the level with n − l − 1 nodes, hartree; its components stand in P and S afterwards.
   *
   * @throws {ConvergenceError} no bound level with that many nodes was found
   */
  solve(potential: MeshPotential, { Z, n, kappa, a, guess }: LevelRequest): number {
    const { P, S, mesh } = this;
    const l = kappa < 0 ? -kappa - 1 : kappa;
    const nodesWanted = n - l - 1;
    let low = -0.75 * Z * Z - 1;
    if (a > 0) low *= 1 + Z * Z * a;
    let high = 0;
    let energy = guess > low && guess < -1e-6 ? guess : -0.5 * (Z / n) ** 2;
    let change = Number.POSITIVE_INFINITY;
    for (let trial = 0; trial < MAX_TRIALS; trial++) {
      const match = this.turningPoint(potential.rV, energy, l);
      if (match < 10) {
        low = energy;
        energy = 0.5 * (low + high);
        continue;
      }
      const nodes = this.outward(potential, energy, kappa, a, Z, match);
      if (nodes !== nodesWanted) {
        if (nodes > nodesWanted) high = energy;
        else low = energy;
        energy = 0.5 * (low + high);
        if (high - low < 1e-13 * Math.abs(low)) break;
        continue;
      }
      const outwardS = S[match]!;
      const outwardP = P[match]!;
      const start = this.inward(potential, energy, kappa, a, match);
      const scale = outwardP / P[match]!;
      for (let i = match; i <= start; i++) {
        P[i]! *= scale;
        S[i]! *= scale;
      }
      P.fill(0, start + 1);
      S.fill(0, start + 1);
      let norm = 0;
      for (let i = 0; i <= start; i++) norm += (P[i]! * P[i]! + a * S[i]! * S[i]!) * mesh.r[i]!;
      norm *= mesh.dx;
      change = (outwardP * (outwardS - S[match]!)) / norm;
      if (change > 0) low = energy;
      else high = energy;
      if (Math.abs(change) <= TOLERANCE * Math.abs(energy)) {
        const factor = Math.sign(P[match]! || 1) / Math.sqrt(norm);
        for (let i = 0; i <= start; i++) {
          P[i]! *= factor;
          S[i]! *= factor;
        }
        return energy + change;
      }
      const next = energy + change;
      energy = next > low && next < high ? next : 0.5 * (low + high);
    }
    throw new ConvergenceError(`level n = ${n}, κ = ${kappa} of Z = ${Z}`, MAX_TRIALS, Math.abs(change / energy));
  }

  /** Index of the outermost point where the radial kinetic energy is still positive; −1 when nowhere. */
  private turningPoint(rV: Float64Array, energy: number, l: number): number {
    const { r } = this.mesh;
    const barrier = 0.5 * l * (l + 1);
    let i = r.length - 2;
    while (i >= 0 && !((energy * r[i]! - rV[i]!) * r[i]! > barrier)) i--;
    return i < r.length - 2 ? i : r.length - 20;
  }

  /** Integrate from the nucleus to `match`; returns the number of nodes of P on the way. */
  private outward(potential: MeshPotential, E: number, kappa: number, a: number, Z: number, match: number): number {
    const gamma = Math.sqrt(kappa * kappa - Z * Z * a);
    this.P[0] = 1e-30;
    // (γ + κ)/(Z a) and −Z/(γ − κ) are equal; the second does not cancel for κ < 0.
    this.S[0] = 1e-30 * (kappa < 0 ? -Z / (gamma - kappa) : (gamma + kappa) / (Z * a));
    return this.march(potential, E, kappa, a, 0, match);
  }

  /** Integrate from the tail down to `match`; returns the index where the tail starts. */
  private inward(potential: MeshPotential, E: number, kappa: number, a: number, match: number): number {
    const { r } = this.mesh;
    const lambda = Math.sqrt(-2 * E - a * E * E);
    const reach = r[match]! + TAIL / lambda;
    let start = match + 10;
    while (start < r.length - 1 && r[start]! < reach) start++;
    this.P[start] = 1e-30;
    this.S[start] = (1e-30 * (-lambda + kappa / r[start]!)) / (2 + a * (E - potential.rV[start]! / r[start]!));
    this.march(potential, E, kappa, a, start, match);
    return start;
  }

  /** Runge–Kutta steps from mesh point `from`, whose values stand in P and S, to `to`; returns the sign changes of P. */
  private march({ rV, rVHalf }: MeshPotential, E: number, kappa: number, a: number, from: number, to: number): number {
    const { mesh, rHalf, P, S } = this;
    const { r } = mesh;
    const step = to > from ? 1 : -1;
    const h = step * mesh.dx;
    let p = P[from]!;
    let s = S[from]!;
    let v = E * r[from]! - rV[from]!;
    let m = 2 * r[from]! + a * v;
    let nodes = 0;
    for (let i = from; i !== to; i += step) {
      const half = step > 0 ? i : i - 1;
      const next = i + step;
      const vHalf = E * rHalf[half]! - rVHalf[half]!;
      const mHalf = 2 * rHalf[half]! + a * vHalf;
      const vNext = E * r[next]! - rV[next]!;
      const mNext = 2 * r[next]! + a * vNext;
      const p1 = -kappa * p + m * s;
      const s1 = kappa * s - v * p;
      let pt = p + 0.5 * h * p1;
      let st = s + 0.5 * h * s1;
      const p2 = -kappa * pt + mHalf * st;
      const s2 = kappa * st - vHalf * pt;
      pt = p + 0.5 * h * p2;
      st = s + 0.5 * h * s2;
      const p3 = -kappa * pt + mHalf * st;
      const s3 = kappa * st - vHalf * pt;
      pt = p + h * p3;
      st = s + h * s3;
      const p4 = -kappa * pt + mNext * st;
      const s4 = kappa * st - vNext * pt;
      const before = p;
      p += (h / 6) * (p1 + 2 * (p2 + p3) + p4);
      s += (h / 6) * (s1 + 2 * (s2 + s3) + s4);
      if (p * before < 0) nodes++;
      if (p > HUGE || p < -HUGE) {
        for (let j = from; j !== next; j += step) {
          P[j]! /= HUGE;
          S[j]! /= HUGE;
        }
        p /= HUGE;
        s /= HUGE;
      }
      P[next] = p;
      S[next] = s;
      v = vNext;
      m = mNext;
    }
    return nodes;
  }
}
