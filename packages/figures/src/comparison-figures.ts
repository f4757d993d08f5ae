/** Measured and predicted, in k and in R, over the bands of before and after, with what is left below. */
import type { Band, Comparison, EvidenceSummary } from '@ringtrue/core';
import { WIDTH } from './frame.js';
import { type ChartRibbon, panelChart } from './panels.js';
import { chiLabel, magnitudeLabel, weigh } from './weighting.js';

/** What of the evidence a comparison needs. */
type Window = Pick<EvidenceSummary, 'kRange' | 'rRange' | 'kWeight'>;

/** Prior 95 % wide and pale, posterior 95 % and 68 % on it. */
function ribbons(x: ArrayLike<number>, prior: Band, posterior: Band, weighed: (y: ArrayLike<number>) => ArrayLike<number>): ChartRibbon[] {
  return [
    { x, low: weighed(prior.low95), high: weighed(prior.high95), tone: 5, opacity: 0.22, name: 'expected, 95 %' },
    { x, low: weighed(posterior.low95), high: weighed(posterior.high95), tone: 1, opacity: 0.25, name: 'after, 95 %' },
    { x, low: weighed(posterior.low68), high: weighed(posterior.high68), tone: 1, opacity: 0.3 },
  ];
}

const difference = (a: ArrayLike<number>, b: ArrayLike<number>): Float64Array => Float64Array.from(a, (value, i) => value - b[i]!);

/** kⁿχ(k): measured, at the best point, expected before; residual below, on the same scale. */
export function comparisonInK(comparison: Comparison, { kRange, kWeight }: Window): string {
  const { k, data, model, prior, bands, file } = comparison;
  const weighed = (y: ArrayLike<number>): Float64Array => weigh(k, y, kWeight);
  const residual = weighed(difference(data, model));
  return panelChart({
    name: 'comparison-k',
    width: WIDTH,
    panels: [
      {
        curves: [
          { x: k, y: weighed(prior), tone: 5, dashed: true, name: 'expected', className: 'prior' },
          { x: k, y: weighed(model), tone: 1, name: 'best point', className: 'model' },
          { x: k, y: weighed(data), tone: 0, name: 'measured', className: 'data' },
        ],
        ribbons: bands ? ribbons(k, bands.priorK, bands.posteriorK, weighed) : [],
        yLabel: chiLabel(kWeight),
        height: 200,
      },
      { curves: [{ x: k, y: residual, tone: 0, className: 'residual' }], yLabel: 'residual', height: 70 },
    ],
    xLabel: 'k (Å⁻¹)',
    xDomain: [Math.max(k[0]!, kRange[0] - 1), Math.min(k.at(-1)!, kRange[1] + 1)],
    marks: kRange,
    description: `Measured EXAFS of ${file} and its prediction, weighted with k to the power ${kWeight}, with bands of 95 % and the residual below`,
  });
}

/** |χ(R)|, and below it the modulus of the difference of the complex transforms. */
export function comparisonInR(comparison: Comparison, { rRange, kWeight }: Window): string {
  const { R, dataR, modelR, priorR, bands, file } = comparison;
  const modulus = ({ real, imaginary }: Comparison['dataR']): Float64Array => real.map((value, i) => Math.hypot(value, imaginary[i]!));
  const residual = dataR.real.map((value, i) => Math.hypot(value - modelR.real[i]!, dataR.imaginary[i]! - modelR.imaginary[i]!));
  return panelChart({
    name: 'comparison-r',
    width: WIDTH,
    panels: [
      {
        curves: [
          { x: R, y: modulus(priorR), tone: 5, dashed: true, name: 'expected', className: 'prior' },
          { x: R, y: modulus(modelR), tone: 1, name: 'best point', className: 'model' },
          { x: R, y: modulus(dataR), tone: 0, name: 'measured', className: 'data' },
        ],
        ribbons: bands ? ribbons(R, bands.priorR, bands.posteriorR, (y) => y) : [],
        yLabel: magnitudeLabel(kWeight),
        height: 200,
      },
      { curves: [{ x: R, y: residual, tone: 0, className: 'residual' }], yLabel: '|residual|', height: 70 },
    ],
    xLabel: 'R, not phase-corrected (Å)',
    xDomain: [0, Math.min(R.at(-1)!, Math.max(6, rRange[1] + 0.5))],
    marks: rRange,
    description: `Magnitude of the Fourier transform of ${file} and of its prediction, with bands of 95 % and the modulus of the residual below`,
  });
}
