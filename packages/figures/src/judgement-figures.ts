/** What a judgement found, drawn row by row: strain, distances, disorder, ranking. */
import type { CandidateJudgement, DisorderRow, FittedParameter, Judgement, Overlength } from '@ringtrue/core';
import { decimals, fixed, GROUND, INK, QUIET, text, toneOf } from './frame.js';
import { type ChartRow, type RowScale, rowChart } from './row-chart.js';

const bar = (x: RowScale, from: number, to: number, y: number, width: number, colour: string): string =>
  `<line x1="${fixed(x(from))}" x2="${fixed(x(to))}" y1="${fixed(y)}" y2="${fixed(y)}" stroke="${colour}" stroke-width="${width}"/>`;

const dot = (x: RowScale, at: number, y: number, colour: string, hollow = false): string =>
  `<circle cx="${fixed(x(at))}" cy="${fixed(y)}" r="5" fill="${hollow ? GROUND : colour}" stroke="${colour}" stroke-width="2"/>`;

/** 2.003(19): the standard uncertainty in units of the last digit, as crystallographers write it; thousandths. */
const withSu = (value: number, sd: number): string => `${value.toFixed(3)}(${Math.max(1, Math.round(1000 * sd))})`;

/** The words of the result in the words of a reader. */
const UNKNOWNS: Readonly<Record<string, string>> = {
  'energy-origin': 'energy origin',
  amplitude: 'S0²',
  'thermal-scale': 'thermal scale',
  'extra-static': 'extra static σ²',
  'class-shift': 'ΔR',
  'scatterer-shift': 'own ΔR',
};

/** "thermal scale, first shell" */
export const unknownInWords = ({ name, shell }: Pick<FittedParameter, 'name' | 'shell'>): string =>
  `${UNKNOWNS[name] ?? name}${shell ? `, ${shell}` : ''}`;

/**
 * Every unknown in standard deviations of what was expected of it: grey bands of one and two, the place it took and its own
 * spread. Of the scatterers' own shifts, many and alike, those beyond one are drawn.
 */
export function strainChart({ file, parameters }: Pick<CandidateJudgement, 'file' | 'parameters'>): string {
  const shown = parameters.filter(({ name, strain }) => name !== 'scatterer-shift' || Math.abs(strain) > 1);
  const most = Math.max(3.2, ...shown.map(({ strain, sd, prior }) => Math.abs(strain) + sd / prior.sd + 0.3));
  return rowChart({
    name: 'strain',
    description: `How far each unknown of ${file} moved from what was expected of it, in standard deviations`,
    xLabel: 'strain (prior standard deviations)',
    xDomain: [-most, most],
    spans: [
      [-2, 2, 0.07],
      [-1, 1, 0.09],
    ],
    zero: 0,
    rows: shown.map((parameter): ChartRow => {
      const { strain, sd, prior } = parameter;
      const own = sd / prior.sd;
      const colour = toneOf(Math.abs(strain) > 2 ? 1 : 0);
      return {
        label: unknownInWords(parameter),
        remark: decimals(strain, 1),
        draw: (x, y) => bar(x, strain - own, strain + own, y, 2.5, colour) + dot(x, strain, y, colour),
      };
    }),
  });
}

/** What has to be added to each distance: ring where the structure puts it, dot where the data do, bars of one and two sd. */
export function overlengthChart(file: string, { shells }: Pick<Overlength, 'shells'>): string {
  const reach =
    Math.max(0.03, ...shells.map(({ deltaR, sd, detectable }) => Math.max(Math.abs(deltaR) + 2 * sd, Math.min(detectable, 0.25)))) * 1.06;
  return rowChart({
    name: 'overlength',
    description: `Distances of ${file} and the distances the data want, with errors`,
    xLabel: 'change of distance the data want (Å)',
    xDomain: [-reach, reach],
    zero: 0,
    remarkHeading: 'structure → data (Å)',
    legend: [
      { name: '1 and 2 sd', tone: 1, look: 'line' },
      { name: 'not detectable', tone: 5, look: 'area', opacity: 0.25 },
    ],
    rows: shells.map(({ label, structureDistance, deltaR, sd, detectable }): ChartRow => {
      const colour = toneOf(Math.abs(deltaR) > 2 * sd ? 1 : 0);
      return {
        label,
        remark: `${structureDistance.toFixed(3)} → ${withSu(structureDistance + deltaR, sd)}`,
        draw: (x, y) => {
          const blind = Math.min(detectable, reach);
          const area = `<rect x="${fixed(x(-blind))}" y="${fixed(y - 9)}" width="${fixed(x(blind) - x(-blind))}" height="18" fill="${toneOf(5)}" fill-opacity="0.25"/>`;
          const bars = bar(x, deltaR - 2 * sd, deltaR + 2 * sd, y, 1.4, colour) + bar(x, deltaR - sd, deltaR + sd, y, 3.4, colour);
          return area + dot(x, 0, y, QUIET, true) + bars + dot(x, deltaR, y, colour);
        },
      };
    }),
  });
}

/** Å²: a shell beyond it has no amplitude left (e^(−2σ²k²) below 0.003 at 10 Å⁻¹); longer bars are cut and say their length. */
const BEYOND = 0.03;

/** Predicted σ² of each shell, thermal and static, and what the data want. 10⁻³ Å². */
export function disorderChart(file: string, rows: readonly DisorderRow[]): string {
  const largest = Math.max(1e-4, ...rows.map((row) => Math.max(row.thermal + row.static, row.wanted)));
  const most = 1060 * Math.min(largest, BEYOND);
  const held = (value: number): number => Math.min(1000 * value, most);
  return rowChart({
    name: 'disorder',
    description: `Mean-square relative displacement of each shell of ${file}: thermal, static, and wanted by the data`,
    xLabel: 'σ² (10⁻³ Å²)',
    xDomain: [0, most],
    remarkHeading: 'N',
    legend: [
      { name: 'thermal', tone: 0, look: 'bar' },
      { name: 'static', tone: 2, look: 'bar' },
      { name: 'wanted by the data', tone: 1, look: 'line' },
    ],
    rows: rows.map(
      ({ label, thermal, static: still, wanted, count }): ChartRow => ({
        label,
        remark: String(Number(count.toFixed(1))),
        draw: (x, y) => {
          const bars = bar(x, 0, held(thermal), y, 12, toneOf(0)) + bar(x, held(thermal), held(thermal + still), y, 12, toneOf(2));
          if (1000 * Math.max(thermal + still, wanted) > most)
            return (
              bars +
              text(x(most) - 4, y, `${Math.round(1000 * (thermal + still))}, wanted ${Math.round(1000 * wanted)} ›`, {
                anchor: 'end',
                size: 12,
                fill: '#ffffff',
              })
            );
          return `${bars}<line x1="${fixed(x(1000 * wanted))}" x2="${fixed(x(1000 * wanted))}" y1="${fixed(y - 11)}" y2="${fixed(y + 11)}" stroke="${toneOf(1)}" stroke-width="3.5"/>`;
        },
      }),
    ),
  });
}

const FINDINGS: Readonly<Record<string, string>> = {
  consistent: '✓ consistent',
  'consistent-under-strain': '✓ under strain',
  'in-tension': '? in tension',
  inconsistent: '✗ inconsistent',
  undecided: '… undecided',
};

/** Candidates by evidence, best first, ln Z below the best; a dashed line at ln 10, within which the data cannot tell them apart. */
export function rankingChart({ candidates }: Pick<Judgement, 'candidates'>): string {
  const order = [...candidates].sort((a, b) => b.logEvidence - a.logEvidence);
  const best = order[0]!.logEvidence;
  const worst = Math.max(4, ...order.map(({ logEvidence }) => best - logEvidence));
  return rowChart({
    name: 'ranking',
    description: 'Candidates ranked by evidence: ln Z below the best, with the finding of each',
    xLabel: 'ln Z below the best (grey: not told apart)',
    xDomain: [0, worst * 1.05],
    spans: [[0, Math.LN10, 0.12]],
    rows: order.map(
      ({ file, finding, logEvidence }, i): ChartRow => ({
        label: file,
        remark: FINDINGS[finding] ?? finding,
        draw: (x, y) => bar(x, 0, best - logEvidence, y, 3, INK) + dot(x, best - logEvidence, y, toneOf(i === 0 ? 0 : 1)),
      }),
    ),
  });
}
