/** Panels of curves above one another over a common axis: the ground of every plot against k, R or energy. */
import { scaleLinear } from 'd3-scale';
import { escapeText } from './escape.js';
import {
  FAINT,
  type FrameOptions,
  fixed,
  frame,
  GROUND,
  INK,
  type LegendEntry,
  legend,
  QUIET,
  text,
  tickText,
  toneOf,
  widthOf,
} from './frame.js';

export interface ChartCurve {
  readonly x: ArrayLike<number>;
  readonly y: ArrayLike<number>;
  /** In the legend; curves without one are not named there. */
  readonly name?: string;
  /** Position in the palette, 0 … 5. */
  readonly tone: number;
  readonly dashed?: boolean;
  /** One more class, for a page that wants to find this curve. */
  readonly className?: string;
}

/** The area between two curves. */
export interface ChartRibbon {
  readonly x: ArrayLike<number>;
  readonly low: ArrayLike<number>;
  readonly high: ArrayLike<number>;
  readonly tone: number;
  /** 0 … 1 */
  readonly opacity: number;
  readonly name?: string;
}

/** Values with their standard deviations. */
export interface ChartPoint {
  readonly x: number;
  readonly y: number;
  readonly sd: number;
  readonly hollow?: boolean;
}

export interface Panel {
  readonly curves: readonly ChartCurve[];
  /** Drawn below the curves. */
  readonly ribbons?: readonly ChartRibbon[];
  readonly points?: readonly ChartPoint[];
  readonly yLabel: string;
  /** Curves one below the other: the height of each one's zero, its name written beside it; a bar shows the scale. */
  readonly offsets?: readonly number[];
  /** px, of the plot itself. */
  readonly height: number;
}

export interface PanelChart extends Omit<FrameOptions, 'height'> {
  readonly panels: readonly Panel[];
  /** What and in which unit, e.g. "k (Å⁻¹)". */
  readonly xLabel: string;
  readonly xDomain: readonly [number, number];
  /** Ends of a window, dashed across all panels. */
  readonly marks?: readonly number[];
  /** Whole numbers on the axis only. */
  readonly whole?: boolean;
}

const LEFT = 66;
const RIGHT = 14;
const GAP = 14;
const FOOT = 48;

/** @throws {RangeError} a curve or ribbon whose arrays differ in length */
export function panelChart(chart: PanelChart): string {
  const { panels, xLabel, xDomain, marks = [], width, whole = false } = chart;
  for (const { curves, ribbons = [] } of panels) {
    for (const { x, y } of curves) if (x.length !== y.length) throw new RangeError(`lineChart: ${x.length} x but ${y.length} y values`);
    for (const { x, low, high } of ribbons)
      if (x.length !== low.length || x.length !== high.length)
        throw new RangeError(`lineChart: ${x.length} x but ${low.length} low and ${high.length} high values`);
  }
  const right = width - RIGHT - Math.max(0, ...panels.map(besideWidth));
  const x = scaleLinear([...xDomain], [LEFT, right]);
  const head = legend(entriesOf(panels), LEFT, width - RIGHT);
  let top = head.height + 8;
  const drawn = panels.map((panel) => {
    const here = top;
    top += panel.height + GAP;
    return onePanel(panel, x, here);
  });
  const bottom = top - GAP;
  const inside = marks.filter((value) => value > xDomain[0] && value < xDomain[1]);
  return frame({ ...chart, height: bottom + FOOT }, [
    head.drawn,
    ...drawn,
    ...inside.map(
      (value) =>
        `<line class="window-end" x1="${fixed(x(value))}" x2="${fixed(x(value))}" y1="${head.height + 8}" y2="${bottom}" stroke="${QUIET}" stroke-dasharray="2 3"/>`,
    ),
    ...x
      .ticks(7)
      .filter((value) => !whole || Number.isInteger(value))
      .map(
        (value) =>
          `<line x1="${fixed(x(value))}" x2="${fixed(x(value))}" y1="${bottom}" y2="${bottom + 5}" stroke="${INK}"/>${text(x(value), bottom + 15, tickText(value), { anchor: 'middle' })}`,
      ),
    text((LEFT + right) / 2, bottom + 37, xLabel, { anchor: 'middle' }),
  ]);
}

type Scale = ReturnType<typeof scaleLinear<number, number>>;

/** Room for names beside the curves. */
const besideWidth = ({ offsets, curves }: Panel): number =>
  offsets ? Math.max(...curves.map(({ name = '' }) => widthOf(name, 14))) + 8 : 0;

function onePanel({ curves, ribbons = [], points = [], yLabel, height, offsets }: Panel, x: Scale, top: number): string {
  const xDomain = x.domain() as [number, number];
  const edges = ribbons.flatMap(({ x: at, low, high }) => [
    { x: at, y: low },
    { x: at, y: high },
  ]);
  const errors = points.flatMap((point) => {
    const sd = Number.isFinite(point.sd) ? point.sd : 0;
    return [{ x: [point.x, point.x], y: [point.y - sd, point.y + sd] }];
  });
  const plain = scaleLinear(extent([...curves, ...edges, ...errors], xDomain), [top + height, top]);
  const y = offsets ? plain : plain.nice(5);
  const right = x.range()[1]!;
  const count = Math.max(2, Math.min(5, Math.floor(height / 34)));
  return [
    '<g class="panel">',
    ...(offsets ? namesBeside(curves, offsets, y, right) : yTicks(y, count, right)),
    `<path d="M${LEFT},${fixed(top)}V${fixed(top + height)}H${right}" fill="none" stroke="${INK}"/>`,
    `<text transform="translate(14 ${fixed(top + height / 2)}) rotate(-90)" text-anchor="middle" fill="${INK}">${escapeText(yLabel)}</text>`,
    ...ribbons.map((ribbon) => ribbonOf(ribbon, xDomain, x, y)),
    ...curves.map(
      (curve) =>
        `<path class="curve${curve.className ? ` ${curve.className}` : ''}" d="${pathOf(curve, xDomain, x, y)}" fill="none" stroke="${toneOf(curve.tone)}" stroke-width="1.8" stroke-linejoin="round"${curve.dashed ? ' stroke-dasharray="5 4"' : ''}/>`,
    ),
    ...points.map((point) => pointOf(point, x, y)),
    '</g>',
  ].join('\n');
}

function yTicks(y: Scale, count: number, right: number): string[] {
  return y
    .ticks(count)
    .map(
      (value) =>
        `<line x1="${LEFT}" x2="${right}" y1="${fixed(y(value))}" y2="${fixed(y(value))}" stroke="${FAINT}"/>${text(LEFT - 7, y(value), tickText(value), { anchor: 'end' })}`,
    );
}

/** A zero line and a name for each curve, and a bar of a round length at the left of the first. */
function namesBeside(curves: readonly ChartCurve[], offsets: readonly number[], y: Scale, right: number): string[] {
  const zero = offsets[0]!;
  const length = y.ticks(12)[1]! - y.ticks(12)[0]! || 1;
  const [foot, tip] = [y(zero), y(zero + length)];
  return [
    ...offsets.map((at, j) => {
      const { name = '', tone } = curves[j]!;
      const line = `<line x1="${LEFT}" x2="${right}" y1="${fixed(y(at))}" y2="${fixed(y(at))}" stroke="${FAINT}"/>`;
      return line + text(right + 6, y(at), name, { size: 14, fill: toneOf(tone) });
    }),
    `<path class="scale-bar" d="M${LEFT - 10},${fixed(foot)}h6M${LEFT - 7},${fixed(foot)}V${fixed(tip)}m-3,0h6" fill="none" stroke="${INK}" stroke-width="1.5"/>`,
    text(LEFT - 14, (foot + tip) / 2, tickText(length), { anchor: 'end' }),
  ];
}

function pointOf({ x: at, y: value, sd, hollow }: ChartPoint, x: Scale, y: Scale): string {
  const [cx, cy] = [fixed(x(at)), fixed(y(value))];
  const bar = Number.isFinite(sd)
    ? `<line x1="${cx}" x2="${cx}" y1="${fixed(y(value - sd))}" y2="${fixed(y(value + sd))}" stroke="${toneOf(0)}" stroke-width="1.8"/>`
    : '';
  return `${bar}<circle class="point" cx="${cx}" cy="${cy}" r="4.5" stroke="${toneOf(0)}" stroke-width="1.8" fill="${hollow ? GROUND : toneOf(0)}"/>`;
}

function entriesOf(panels: readonly Panel[]): LegendEntry[] {
  return panels.flatMap(({ curves, ribbons = [], offsets }) => [
    ...(offsets ? [] : curves).flatMap(({ name, tone, dashed }): LegendEntry[] =>
      name ? [{ name, tone, look: dashed ? 'dashed' : 'line' }] : [],
    ),
    ...ribbons.flatMap(({ name, tone, opacity }): LegendEntry[] => (name ? [{ name, tone, look: 'area', opacity }] : [])),
  ]);
}

function extent(curves: readonly Pick<ChartCurve, 'x' | 'y'>[], [from, to]: readonly [number, number]): [number, number] {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const { x, y } of curves) {
    for (let i = 0; i < x.length; i++) {
      if (x[i]! < from || x[i]! > to || !Number.isFinite(y[i]!)) continue;
      low = Math.min(low, y[i]!);
      high = Math.max(high, y[i]!);
    }
  }
  if (!(low < high)) return Number.isFinite(low) ? [low - 1, low + 1] : [0, 1];
  const space = 0.06 * (high - low);
  return [low >= 0 && low < 0.5 * high ? 0 : low - space, high + space];
}

function pathOf({ x: xs, y: ys }: Pick<ChartCurve, 'x' | 'y'>, [from, to]: readonly [number, number], x: Scale, y: Scale): string {
  let path = '';
  let pen = 'M';
  for (let i = 0; i < xs.length; i++) {
    const inside = xs[i]! >= from && xs[i]! <= to && Number.isFinite(ys[i]!);
    if (inside) path += `${pen}${x(xs[i]!).toFixed(2)},${y(ys[i]!).toFixed(2)}`;
    pen = inside ? 'L' : 'M';
  }
  return path;
}

function ribbonOf({ x: xs, low, high, tone, opacity }: ChartRibbon, domain: readonly [number, number], x: Scale, y: Scale): string {
  const back = Array.from(xs).reverse();
  const forth = pathOf({ x: xs, y: high }, domain, x, y);
  const homeward = pathOf({ x: back, y: Array.from(low).reverse() }, domain, x, y).replace('M', 'L');
  return `<path class="ribbon" d="${forth}${homeward}Z" fill="${toneOf(tone)}" fill-opacity="${opacity}"/>`;
}
