import type { Prediction } from '@ringtrue/core';

export interface Table {
  /** File name without ending. */
  readonly name: string;
  readonly title: string;
  /** Headings with their units. */
  readonly columns: readonly string[];
  readonly rows: readonly (readonly (string | number)[])[];
}

/** The tables of a prediction: shells, paths and the curves. */
export function tablesOf({ shells, paths, k, chi, transform }: Prediction): { shells: Table; paths: Table; chi: Table; transform: Table } {
  return {
    shells: {
      name: 'shells',
      title: 'Shells: like scatterers within the resolution of the data',
      columns: ['shell', 'N', 'mean R (Å)', 'thermal σ² (Å²)', 'static σ² (Å²)', 'total σ² (Å²)', 'share'],
      rows: shells.map(({ label, count, meanDistance, sigma2, share }) => [
        label,
        count,
        meanDistance,
        sigma2.thermal,
        sigma2.static,
        sigma2.total,
        share,
      ]),
    },
    paths: {
      name: 'paths',
      title: 'Paths',
      columns: ['path', 'legs', 'N', 'half length (Å)', 'thermal σ² (Å²)', 'share'],
      rows: paths.map(({ label, legs, degeneracy, halfLength, sigma2, share }) => [
        label,
        legs,
        degeneracy,
        halfLength,
        sigma2.thermal,
        share,
      ]),
    },
    chi: { name: 'chi', title: 'χ(k)', columns: ['k (Å⁻¹)', 'chi'], rows: Array.from(k, (value, i) => [value, chi[i]!]) },
    transform: {
      name: 'transform',
      title: 'χ(R)',
      columns: ['R not phase-corrected (Å)', 'real', 'imaginary'],
      rows: Array.from(transform.R, (value, i) => [value, transform.real[i]!, transform.imaginary[i]!]),
    },
  };
}
