/** One row a thing, named at the left, drawn along a common axis, with a remark at the right. */
import { scaleLinear } from 'd3-scale';
import { cut, FAINT, FONT_SIZE, fixed, frame, INK, type LegendEntry, legend, QUIET, text, tickText, WIDTH, widthOf } from './frame.js';

export type RowScale = ReturnType<typeof scaleLinear<number, number>>;

export interface ChartRow {
  readonly label: string;
  /** At the right: the numbers themselves. */
  readonly remark: string;
  /** What stands in the row, at height y. */
  readonly draw: (x: RowScale, y: number) => string;
}

export interface RowChart {
  readonly name: string;
  readonly description: string;
  readonly rows: readonly ChartRow[];
  readonly xLabel: string;
  readonly xDomain: readonly [number, number];
  readonly remarkHeading?: string;
  /** Areas behind all rows: from, to, opacity of ink. */
  readonly spans?: readonly (readonly [number, number, number])[];
  /** Line across all rows. */
  readonly zero?: number;
  readonly legend?: readonly LegendEntry[];
}

const ROW = 28;
const SMALL = 14;

export function rowChart(chart: RowChart): string {
  const { rows, xLabel, xDomain, spans = [], zero, remarkHeading = '' } = chart;
  const width = WIDTH;
  const left = Math.min(240, Math.max(60, ...rows.map(({ label }) => widthOf(label, SMALL) + 12)));
  const remarks = Math.max(widthOf(remarkHeading, SMALL), ...rows.map(({ remark }) => widthOf(remark, SMALL)));
  const right = width - (remarks > 0 ? remarks + 14 : 16);
  const head = legend(chart.legend ?? [], 4, width - 4);
  const top = head.height + (remarkHeading ? 24 : 8);
  const bottom = top + ROW * Math.max(1, rows.length);
  const x = scaleLinear([...xDomain], [left, right]);
  const clip = (value: number): number => Math.min(Math.max(value, xDomain[0]), xDomain[1]);
  return frame({ name: chart.name, description: chart.description, width, height: bottom + 48 }, [
    head.drawn,
    ...spans.map(([from, to, opacity]) => {
      const [a, b] = [x(clip(from)), x(clip(to))];
      return `<rect class="span" x="${fixed(a)}" y="${top}" width="${fixed(b - a)}" height="${bottom - top}" fill="${INK}" fill-opacity="${opacity}"/>`;
    }),
    ...x
      .ticks(Math.max(2, Math.floor((right - left) / 52)))
      .map(
        (value) =>
          `<line x1="${fixed(x(value))}" x2="${fixed(x(value))}" y1="${top}" y2="${bottom + 4}" stroke="${FAINT}"/>${text(x(value), bottom + 14, tickText(value), { anchor: 'middle' })}`,
      ),
    zero === undefined ? '' : `<line x1="${fixed(x(zero))}" x2="${fixed(x(zero))}" y1="${top}" y2="${bottom}" stroke="${QUIET}"/>`,
    `<line x1="${fixed(left)}" x2="${fixed(right)}" y1="${bottom}" y2="${bottom}" stroke="${INK}"/>`,
    remarkHeading ? text(width - 4, top - 10, remarkHeading, { anchor: 'end', size: SMALL, fill: QUIET }) : '',
    ...rows.map(({ label, remark, draw }, i) => {
      const y = top + ROW * (i + 0.5);
      return `<g class="row"><title>${titleOf(label)}</title>${text(left - 8, y, cut(label, left - 10, SMALL), { anchor: 'end', size: SMALL })}${draw(x, y)}${remark ? text(width - 4, y, remark, { anchor: 'end', size: SMALL }) : ''}</g>`;
    }),
    text(axisTitleAt(xLabel, left, right, width), bottom + 36, xLabel, { anchor: 'middle' }),
  ]);
}

const titleOf = (label: string): string => label.replace(/[&<>]/g, (sign) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;' })[sign]!);

/** Under the middle of the axis, moved so that it stays inside the figure. */
function axisTitleAt(words: string, left: number, right: number, width: number): number {
  const half = widthOf(words, FONT_SIZE) / 2;
  return Math.min(Math.max((left + right) / 2, half + 2), width - half - 2);
}
