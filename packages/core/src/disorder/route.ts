/**
 * The geometry every thermal model shares. With unit vectors e_a along the legs of a closed route, the half path
 * length changes to first order by ½ Σ_a g_a · u_a, g_a = e_{a−1} − e_a (Poiarkova & Rehr, Phys. Rev. B 59, 948 (1999)),
 * so that σ² = ¼ Σ_ab g_a · ⟨u_a u_bᵀ⟩ · g_b. Å, u, K.
 */
import { InputError } from '../errors.js';
import type { ThermalVertex } from './types.js';

/**
 * Leg-direction differences g_a of a closed route, flattened.
 *
 * An atom met twice keeps one entry per visit; the models add them up.
 *
 * @param route  at least two vertices, absorber first, the closing return not repeated
 * @returns (3 · vertices), dimensionless
 * @throws {InputError} fewer than two vertices, two consecutive vertices at one place, a coordinate that is no number
 */
export function routeGradient(route: readonly ThermalVertex[]): Float64Array {
  const n = route.length;
  if (n < 2) throw new InputError(`thermal route: needs at least 2 vertices, got ${n}`);
  const g = new Float64Array(3 * n);
  for (let a = 0; a < n; a++) {
    const b = a + 1 === n ? 0 : a + 1;
    const from = route[a]!;
    const to = route[b]!;
    const x = to.position[0] - from.position[0];
    const y = to.position[1] - from.position[1];
    const z = to.position[2] - from.position[2];
    const length = Math.sqrt(x * x + y * y + z * z);
    if (!(length > 1e-6 && length < Infinity)) {
      throw new InputError(
        `thermal route: vertices ${a} (${from.element}, atom ${from.atom}) and ${b} (${to.element}, atom ${to.atom}) must be apart, distance ${length} Å`,
      );
    }
    g[3 * a]! -= x / length;
    g[3 * a + 1]! -= y / length;
    g[3 * a + 2]! -= z / length;
    g[3 * b]! += x / length;
    g[3 * b + 1]! += y / length;
    g[3 * b + 2]! += z / length;
  }
  return g;
}

/** @throws {InputError} a vertex without a positive mass */
export function checkMasses(route: readonly ThermalVertex[]): void {
  for (const { mass, element, atom } of route) {
    if (!(mass > 0 && mass < Infinity)) throw new InputError(`thermal route: atom ${atom} (${element}) needs a mass > 0 u, got ${mass}`);
  }
}

/** @throws {RangeError} not a finite temperature ≥ 0 K (0 is the zero-point limit) */
export function checkTemperature(who: string, temperature: number): void {
  if (!(temperature >= 0 && temperature < Infinity))
    throw new RangeError(`${who}: temperature must be ≥ 0 K and finite, got ${temperature}`);
}

/** @throws {RangeError} not finite and > 0 */
export function checkPositive(who: string, what: string, unit: string, value: number): void {
  if (!(value > 0 && value < Infinity)) throw new RangeError(`${who}: ${what} must be > 0 ${unit} and finite, got ${value}`);
}
