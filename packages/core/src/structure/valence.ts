/**
 * Bond-valence sums, Brown & Altermatt, Acta Cryst. B41, 244 (1985): V = Σ exp((R0 − R)/b) over the bonds of the absorber, with R0
 * and b of the oxidation state supposed; the state whose sum comes back to itself is the likely one. sd(V)² = Σ (s_i sd(R_i)/b_i)².
 */
import { VALENCE_ROWS, VALENCE_SOURCES } from './valence-table.js';

export interface ValenceBond {
  readonly element: string;
  /** Å */
  readonly distance: number;
  /** Standard uncertainty of the distance, Å. */
  readonly distanceSd: number;
  readonly occupancy: number;
}

export interface ValenceSum {
  readonly oxidationState: number;
  readonly sum: number;
  /** From the distances alone; the spread of R0 between papers, about 0.02 Å or 5 % of the sum, is not in it. */
  readonly sd: number;
  /** Ligand elements for which no parameter is held: their bonds are not in the sum. */
  readonly missing: readonly string[];
  /** Papers of the parameters used. */
  readonly sources: readonly string[];
}

/** Valence of one bond; R, R0, b in Å. */
export const bondValence = (distance: number, r0: number, b: number): number => Math.exp((r0 - distance) / b);

/** The sum for every oxidation state of the element that the table knows for at least one of the ligands, lowest state first. */
export function bondValenceSums(element: string, bonds: readonly ValenceBond[]): readonly ValenceSum[] {
  const rows = VALENCE_ROWS.filter(([cation]) => cation === element);
  const states = [...new Set(rows.map(([, state]) => state))].sort((a, b) => a - b);
  return states.flatMap((oxidationState) => {
    const missing = new Set<string>();
    const sources = new Set<string>();
    let sum = 0;
    let variance = 0;
    for (const bond of bonds) {
      const row = rows.find(([, state, anion]) => state === oxidationState && anion === bond.element);
      if (!row) {
        missing.add(bond.element);
        continue;
      }
      const [, , , r0, b, source] = row;
      const s = bondValence(bond.distance, r0, b) * bond.occupancy;
      sum += s;
      variance += ((s * bond.distanceSd) / b) ** 2;
      sources.add(VALENCE_SOURCES[source]);
    }
    if (sources.size === 0) return [];
    return [{ oxidationState, sum, sd: Math.sqrt(variance), missing: [...missing], sources: [...sources] }];
  });
}
