/** The figures of a prediction: in k as it is measured, in R as it is looked at, and what it is made of. */
import type { Prediction } from '@ringtrue/core';
import { WIDTH } from './frame.js';
import { lineChart } from './line-chart.js';
import { type ChartRibbon, type Panel, panelChart } from './panels.js';
import { chiLabel, magnitudeLabel, weigh } from './weighting.js';

/** kⁿχ(k) from 2 Å⁻¹ on, over its 95 % and 68 % bands where they were computed. @param kWeight n, 0 … 3 */
export function chiInK({ k, chi, structure, bands }: Prediction, kWeight = 3): string {
  const band = (low: 'low95' | 'low68', high: 'high95' | 'high68', opacity: number, name: string): ChartRibbon[] =>
    bands
      ? [{ x: bands.k, low: weigh(bands.k, bands[low], kWeight), high: weigh(bands.k, bands[high], kWeight), tone: 0, opacity, name }]
      : [];
  return lineChart({
    name: 'chi-k',
    curves: [{ x: k, y: weigh(k, chi, kWeight), tone: 0, ...(bands ? { name: 'predicted' } : {}) }],
    ribbons: [...band('low95', 'high95', 0.16, '95 %'), ...band('low68', 'high68', 0.3, '68 %')],
    xDomain: [2, k.at(-1)!],
    xLabel: 'k (Å⁻¹)',
    yLabel: chiLabel(kWeight),
    description: `Predicted EXAFS of ${structure.file}, weighted with k to the power ${kWeight}, against k`,
  });
}

/** |χ(R)| to 6 Å. */
export function chiInR({ transform, structure }: Prediction): string {
  const { R, real, imaginary, window } = transform;
  const magnitude = R.map((_, i) => Math.hypot(real[i]!, imaginary[i]!));
  return lineChart({
    name: 'chi-r',
    curves: [{ x: R, y: magnitude, tone: 0 }],
    xDomain: [0, 6],
    xLabel: 'R, not phase-corrected (Å)',
    yLabel: magnitudeLabel(window.kWeight),
    description: `Magnitude of the Fourier transform of the predicted EXAFS of ${structure.file}, k from ${window.kMin} to ${window.kMax} per Å`,
  });
}

/** kⁿ times the parts of χ, one panel each, all on one scale: the strongest shells, and what remains. @throws {RangeError} no parts */
export const contributionsByShell = (prediction: Prediction, kWeight = 3): string => contributions(prediction, 'byShell', kWeight);

/** The same by number of legs: single scattering, then 3, 4 and 5 legs. @throws {RangeError} no parts */
export const contributionsByOrder = (prediction: Prediction, kWeight = 3): string => contributions(prediction, 'byOrder', kWeight);

function contributions({ k, chi, structure, contributions: parts }: Prediction, kind: 'byShell' | 'byOrder', kWeight: number): string {
  if (!parts) throw new RangeError('contributions: the prediction was made without `bands`, which compute its parts too');
  const inside = (values: ArrayLike<number>): Float64Array =>
    Float64Array.from(weigh(k, values, kWeight), (y, i) => (k[i]! < 2 ? Number.NaN : y));
  const curves = [
    { name: 'all', y: inside(chi), tone: 5 },
    ...parts[kind].map(({ label, chi: part }, j) => ({ name: label, y: inside(part), tone: j % 5 })),
  ];
  const span = ({ y }: { y: Float64Array }): number =>
    y.reduce((most, value) => (Number.isFinite(value) ? Math.max(most, Math.abs(value)) : most), 0);
  // One below the other on one scale, as near as they come without crossing, names kept apart.
  const heights = curves.map(span);
  const least = 0.32 * Math.max(...heights);
  const offsets = [0];
  for (let j = 1; j < curves.length; j++) offsets.push(offsets[j - 1]! - Math.max(least, 0.85 * (heights[j - 1]! + heights[j]!)));
  const reach = heights[0]! - offsets.at(-1)! + heights.at(-1)!;
  const panel: Panel = {
    curves: curves.map(({ name, y, tone }, j) => ({ x: k, y: y.map((value) => value + offsets[j]!), tone, name })),
    offsets,
    yLabel: chiLabel(kWeight),
    height: Math.max(150, (20 * reach) / least),
  };
  return panelChart({
    name: kind === 'byShell' ? 'parts-by-shell' : 'parts-by-order',
    width: WIDTH,
    panels: [panel],
    xLabel: 'k (Å⁻¹)',
    xDomain: [2, k.at(-1)!],
    description: `Parts of the predicted EXAFS of ${structure.file} by ${kind === 'byShell' ? 'shell' : 'order of scattering'}, offset below one another on one scale`,
  });
}
