/** The measured spectrum on its way to χ(k), and a series of scans on one spot. */
import type { DoseReport, Reduction } from '@ringtrue/core';
import { WIDTH } from './frame.js';
import { lineChart } from './line-chart.js';
import { type ChartPoint, panelChart } from './panels.js';
import { chiLabel, weigh } from './weighting.js';

/** Absorption with what was laid under and through it, against energy from the edge. @throws {RangeError} chi was ready */
export function absorptionFigure(reduction: Reduction): string {
  const { energyEv, e0, mu, preEdge, postEdge, background, element, edge } = reduction;
  if (energyEv.length === 0) throw new RangeError('absorptionFigure: chi(k) was ready, there is no absorption to draw');
  const x = energyEv.map((energy) => energy - e0);
  const from = (curve: Float64Array, start: number): Float64Array => curve.map((value, i) => (x[i]! >= start ? value : Number.NaN));
  const until = (curve: Float64Array, end: number): Float64Array => curve.map((value, i) => (x[i]! <= end ? value : Number.NaN));
  return lineChart({
    name: 'absorption',
    curves: [
      { x, y: until(preEdge.curve, 60), tone: 3, dashed: true, name: 'pre-edge' },
      { x, y: from(postEdge.curve, 0), tone: 2, dashed: true, name: 'post-edge' },
      { x, y: from(background.curve, 0), tone: 1, name: 'background' },
      { x, y: mu, tone: 0, name: 'measured', className: 'data' },
    ],
    xDomain: [x[0]!, x.at(-1)!],
    xLabel: `energy from the edge, ${e0.toFixed(1)} eV (eV)`,
    yLabel: 'absorption (arb. units)',
    marks: [...preEdge.range, ...postEdge.range],
    description: `Absorption at the ${element ?? ''} ${edge ?? ''} edge with pre-edge, post-edge and background; dashed lines end the ranges`,
  });
}

/** kⁿχ(k) as it was reduced, with one standard deviation. */
export function reducedChi({ k, chi, sigmaChi, noise }: Reduction, kWeight = 2): string {
  const y = weigh(k, chi, kWeight);
  const sd = weigh(k, sigmaChi, kWeight);
  return lineChart({
    name: 'reduced-chi',
    curves: [{ x: k, y, tone: 0, className: 'data' }],
    ribbons: [
      { x: k, low: y.map((v, i) => v - sd[i]!), high: y.map((v, i) => v + sd[i]!), tone: 1, opacity: 0.45, name: '± 1 sd of a point' },
    ],
    xDomain: [Math.max(1.5, k[0]!), k.at(-1)!],
    xLabel: 'k (Å⁻¹)',
    yLabel: chiLabel(kWeight),
    marks: [noise.kMaxUseful],
    description: `Measured EXAFS weighted with k to the power ${kWeight}; the dashed line is where the oscillations drown in noise`,
  });
}

/** Edge energy and amplitude of χ scan by scan, with the drift; scans not to be kept are hollow. */
export function doseFigure({ edgeEnergy, driftPerScan, chiAmplitude, keep }: DoseReport): string {
  const n = edgeEnergy.length;
  const middle = (n + 1) / 2;
  const mean = edgeEnergy.reduce((sum, { value }) => sum + value, 0) / n;
  const kept = new Set(keep);
  const points: ChartPoint[] = edgeEnergy.map(({ value, sd }, s) => ({ x: s + 1, y: value - mean, sd, hollow: !kept.has(s + 1) }));
  const line = (slope: number, at: number): { x: number[]; y: number[] } => ({
    x: [1, n],
    y: [at + slope * (1 - middle), at + slope * (n - middle)],
  });
  const amplitude = chiAmplitude.values.map((value, s): ChartPoint => ({ x: s + 1, y: value, sd: Number.NaN, hollow: !kept.has(s + 1) }));
  return panelChart({
    name: 'dose',
    width: WIDTH,
    panels: [
      { curves: [{ ...line(driftPerScan.value, 0), tone: 1, name: 'drift' }], points, yLabel: 'edge shift (eV)', height: 150 },
      {
        curves: [{ ...line(chiAmplitude.trendPerScan.value, meanOf(chiAmplitude.values)), tone: 1 }],
        points: amplitude,
        yLabel: 'χ amplitude',
        height: 90,
      },
    ],
    xLabel: 'scan (hollow: not to be kept)',
    xDomain: [0.5, n + 0.5],
    whole: true,
    description: `Edge energy and amplitude of the oscillations over ${n} scans; the edge moves by ${driftPerScan.value.toFixed(3)} eV a scan`,
  });
}

const meanOf = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;
