/** The two figures of a prediction: in k as it is measured, in R as it is looked at. */
import type { Prediction } from '@ringtrue/core';
import { lineChart } from './line-chart.js';

const SUPERSCRIPT = ['', '', '²', '³'];

/** kⁿχ(k) from 2 Å⁻¹ on, over its 95 % and 68 % bands where they were computed. @param kWeight n, 1 … 3 */
export function chiInK({ k, chi, structure, bands }: Prediction, kWeight = 3): string {
  const weighted = k.map((value, i) => value ** kWeight * chi[i]!);
  const power = SUPERSCRIPT[kWeight] ?? '';
  const band = (low: 'low95' | 'low68', high: 'high95' | 'high68', opacity: number) =>
    bands
      ? [
          {
            x: bands.k,
            low: bands.k.map((x, i) => x ** kWeight * bands[low][i]!),
            high: bands.k.map((x, i) => x ** kWeight * bands[high][i]!),
            tone: 0,
            opacity,
          },
        ]
      : [];
  return lineChart({
    curves: [{ x: k, y: weighted, tone: 0 }],
    ribbons: [...band('low95', 'high95', 0.14), ...band('low68', 'high68', 0.2)],
    xDomain: [2, k.at(-1)!],
    xLabel: 'k (Å⁻¹)',
    yLabel: `k${power}χ(k) (Å${['', '⁻¹', '⁻²', '⁻³'][kWeight] ?? ''})`,
    description: `Predicted EXAFS of ${structure.file}, weighted with k to the power ${kWeight}, against k`,
  });
}

/** |χ(R)| to 6 Å. */
export function chiInR({ transform, structure }: Prediction): string {
  const { R, real, imaginary, window } = transform;
  const magnitude = R.map((_, i) => Math.hypot(real[i]!, imaginary[i]!));
  return lineChart({
    curves: [{ x: R, y: magnitude, tone: 0 }],
    xDomain: [0, 6],
    xLabel: 'R, not phase-corrected (Å)',
    yLabel: `|χ(R)| (Å${['⁻¹', '⁻²', '⁻³', '⁻⁴'][window.kWeight] ?? ''})`,
    description: `Magnitude of the Fourier transform of the predicted EXAFS of ${structure.file}, k from ${window.kMin} to ${window.kMax} per Å`,
  });
}
