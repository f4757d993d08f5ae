/**
 * Curves over a common axis. Sizes are in CSS pixels and the text in them is legible at 8 cm width. Colours come through
 * custom properties, so a page can set its own for light and dark; the fallbacks serve a file on its own.
 */
import { format } from 'd3-format';
import { scaleLinear } from 'd3-scale';
import { escapeText } from './escape.js';

export interface ChartCurve {
  readonly x: ArrayLike<number>;
  readonly y: ArrayLike<number>;
  /** In the legend; curves without one are not named there. */
  readonly name?: string;
  /** Position in the palette, 0 … 5. */
  readonly tone: number;
  readonly dashed?: boolean;
}

/** The area between two curves. */
export interface ChartRibbon {
  readonly x: ArrayLike<number>;
  readonly low: ArrayLike<number>;
  readonly high: ArrayLike<number>;
  readonly tone: number;
  /** 0 … 1 */
  readonly opacity: number;
}

export interface LineChart {
  readonly curves: readonly ChartCurve[];
  /** Drawn below the curves. */
  readonly ribbons?: readonly ChartRibbon[];
  /** What and in which unit, e.g. "k (Å⁻¹)". */
  readonly xLabel: string;
  readonly yLabel: string;
  readonly xDomain: readonly [number, number];
  /** For screen readers: what the figure shows. */
  readonly description: string;
  readonly width?: number;
  readonly height?: number;
}

/** Six tones told apart with any colour vision and on light and dark ground; our own values. */
const TONES = ['#1f5fa8', '#c4571a', '#2f8f6b', '#8a5bb0', '#a08a1c', '#6b7480'];
const MARGIN = { top: 14, right: 16, bottom: 50, left: 68 };

/** @throws {RangeError} a curve whose x and y differ in length */
export function lineChart({ curves, ribbons = [], xLabel, yLabel, xDomain, description, width = 640, height = 300 }: LineChart): string {
  for (const { x, y } of curves) if (x.length !== y.length) throw new RangeError(`lineChart: ${x.length} x but ${y.length} y values`);
  const x = scaleLinear([...xDomain], [MARGIN.left, width - MARGIN.right]);
  const edges = ribbons.flatMap(({ x: at, low: lower, high: upper }) => [
    { x: at, y: lower },
    { x: at, y: upper },
  ]);
  const [low, high] = extent([...curves, ...edges], xDomain);
  const y = scaleLinear([low, high], [height - MARGIN.bottom, MARGIN.top]).nice(6);
  const paths = curves.map((curve) => {
    const dash = curve.dashed ? ' stroke-dasharray="5 4"' : '';
    const tone = curve.tone % TONES.length;
    return `<path class="curve" d="${pathOf(curve, xDomain, x, y)}" fill="none" stroke="var(--tone-${tone}, ${TONES[tone]})" stroke-width="1.8" stroke-linejoin="round"${dash}/>`;
  });
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" width="${width}" height="${height}" role="img" aria-label="${escapeText(description)}" font-family="system-ui, sans-serif" font-size="15">`,
    axes(x, y, width, height, xLabel, yLabel),
    ...ribbons.map((ribbon) => ribbonOf(ribbon, xDomain, x, y)),
    ...paths,
    legend(curves, width),
    '</svg>',
  ].join('\n');
}

type Scale = ReturnType<typeof scaleLinear<number, number>>;

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
  return [low >= 0 ? 0 : low - space, high + space];
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
  return `<path class="ribbon" d="${forth}${homeward}Z" fill="var(--tone-${tone % TONES.length}, ${TONES[tone % TONES.length]})" fill-opacity="${opacity}"/>`;
}

function axes(x: Scale, y: Scale, width: number, height: number, xLabel: string, yLabel: string): string {
  const ink = 'var(--figure-ink, #20262c)';
  const faint = 'var(--figure-grid, #d9dee3)';
  const bottom = height - MARGIN.bottom;
  const right = width - MARGIN.right;
  const number = format('~g');
  const xTicks = x.ticks(8).map((value) => {
    const at = x(value).toFixed(2);
    return `<line x1="${at}" x2="${at}" y1="${bottom}" y2="${bottom + 5}" stroke="${ink}"/><text x="${at}" y="${bottom + 21}" text-anchor="middle" fill="${ink}">${number(value)}</text>`;
  });
  const yTicks = y.ticks(5).map((value) => {
    const at = y(value).toFixed(2);
    return `<line x1="${MARGIN.left}" x2="${right}" y1="${at}" y2="${at}" stroke="${faint}"/><text x="${MARGIN.left - 8}" y="${at}" dy="0.35em" text-anchor="end" fill="${ink}">${number(value).replace('-', '−')}</text>`;
  });
  const middle = (MARGIN.top + bottom) / 2;
  return [
    ...yTicks,
    ...xTicks,
    `<path d="M${MARGIN.left},${MARGIN.top}V${bottom}H${right}" fill="none" stroke="${ink}"/>`,
    `<text x="${(MARGIN.left + right) / 2}" y="${height - 8}" text-anchor="middle" fill="${ink}">${escapeText(xLabel)}</text>`,
    `<text transform="translate(18 ${middle}) rotate(-90)" text-anchor="middle" fill="${ink}">${escapeText(yLabel)}</text>`,
  ].join('\n');
}

function legend(curves: readonly ChartCurve[], width: number): string {
  return curves
    .filter(({ name }) => name !== undefined)
    .map(({ name, tone, dashed }, row) => {
      const y = MARGIN.top + 10 + 18 * row;
      const line = `<line x1="${width - MARGIN.right - 26}" x2="${width - MARGIN.right}" y1="${y}" y2="${y}" stroke="var(--tone-${tone % TONES.length}, ${TONES[tone % TONES.length]})" stroke-width="2"${dashed ? ' stroke-dasharray="5 4"' : ''}/>`;
      return `${line}<text x="${width - MARGIN.right - 32}" y="${y}" dy="0.35em" text-anchor="end" fill="var(--figure-ink, #20262c)">${escapeText(name!)}</text>`;
    })
    .join('\n');
}
