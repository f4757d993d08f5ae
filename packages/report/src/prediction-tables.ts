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
  const hasBound = shells.some(({ bFactorBound }) => bFactorBound !== undefined);
  const hasCumulants = paths.some(({ cumulants }) => cumulants !== undefined);
  return {
    shells: {
      name: 'shells',
      title: 'Shells: like scatterers within the resolution of the data',
      columns: [
        'shell',
        'N',
        'mean R (Å)',
        'thermal σ² (Å²)',
        'static σ² (Å²)',
        'total σ² (Å²)',
        'third cumulant (Å³)',
        'hidden by one shell',
        ...(hasBound ? ['B-factor bound, not added (Å²)'] : []),
        'share',
      ],
      rows: shells.map(({ label, count, meanDistance, sigma2, thirdCumulant, hiddenByOneShell, bFactorBound, share }) => [
        label,
        count,
        meanDistance,
        sigma2.thermal,
        sigma2.static,
        sigma2.total,
        thirdCumulant,
        hiddenByOneShell,
        ...(hasBound ? [bFactorBound ?? ''] : []),
        share,
      ]),
    },
    paths: {
      name: 'paths',
      title: 'Paths',
      columns: [
        'path',
        'legs',
        'N',
        'half length (Å)',
        'thermal σ² (Å²)',
        'from',
        ...(hasCumulants ? ['error of σ² (Å²)', 'third cumulant (Å³)', 'fourth cumulant (Å⁴)'] : []),
        'share',
      ],
      rows: paths.map(({ label, legs, degeneracy, halfLength, sigma2, cumulants, share }) => [
        label,
        legs,
        degeneracy,
        halfLength,
        sigma2.thermal,
        sigma2.from,
        ...(cumulants ? [cumulants.error.variance, cumulants.third, cumulants.fourth] : []),
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
