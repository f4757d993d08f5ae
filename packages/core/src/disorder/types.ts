/**
 * Thermal disorder behind one interface. σ² of a path is the mean-square fluctuation of its half path length,
 * σ² = ¼ Σ_i Σ_j ⟨[(u_i − u_i⁺)·û_i][(u_j − u_j⁺)·û_j]⟩ (Poiarkova & Rehr, Phys. Rev. B 59, 948 (1999)).
 */
import type { Vec3 } from '../structure/types.js';

/** A vertex of a path as the thermal models see it. */
export interface ThermalVertex {
  /** Index into Site.atoms. */
  readonly atom: number;
  /** Å. */
  readonly position: Vec3;
  /** Atomic mass, u. */
  readonly mass: number;
  readonly element: string;
}

export interface ThermalModel {
  readonly name: 'debye' | 'einstein' | 'springs' | 'none';
  /** K. */
  readonly temperature: number;
  /** What the model assumed, in words and numbers, for reports. */
  readonly inputs: Readonly<Record<string, number | string>>;
  /** σ² of the half path length, Å², of the closed route through these vertices (absorber first). */
  sigma2(route: readonly ThermalVertex[]): number;
  /** The zero-temperature value for the same route, Å²; needed by the third cumulant. */
  sigma2AtZero(route: readonly ThermalVertex[]): number;
  /** Which part of the model this route's number comes from, where it has parts. */
  origin?(route: readonly ThermalVertex[]): string;
}
