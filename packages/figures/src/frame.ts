/**
 * What every figure shares: the drawing's frame, its tones, its text. Sizes are CSS pixels; a figure is 480 wide with text of 15,
 * so that at 8 cm width the text is 7 points high. Colours are custom properties with a fallback, so a page can set its own for
 * light and dark; `standalone` writes the fallbacks in for programs that do not know them.
 */
import { format } from 'd3-format';
import { escapeText } from './escape.js';

export const WIDTH = 480;
export const FONT_SIZE = 15;
export const INK = 'var(--figure-ink, #20262c)';
export const FAINT = 'var(--figure-grid, #d9dee3)';
export const QUIET = 'var(--figure-quiet, #5a646e)';
export const GROUND = 'var(--figure-ground, #ffffff)';

/** Six tones told apart with any colour vision and on light and dark ground; our own values. */
const TONES = ['#1f5fa8', '#c4571a', '#2f8f6b', '#8a5bb0', '#a08a1c', '#6b7480'];

/** @param tone position in the palette, taken round */
export function toneOf(tone: number): string {
  const at = tone % TONES.length;
  return `var(--tone-${at}, ${TONES[at]})`;
}

/** The figure with its colours written in, on white ground: a file of its own. */
export function standalone(svg: string): string {
  const plain = svg.replace(/var\(--[\w-]+,\s*([^)]+)\)/g, '$1');
  return plain.replace(/(<svg [^>]*>)/, '$1\n<rect width="100%" height="100%" fill="#ffffff"/>');
}

export interface FrameOptions {
  /** Stable word for the figure: its class is figure-NAME. */
  readonly name: string;
  /** For screen readers: what the figure shows. */
  readonly description: string;
  readonly width: number;
  readonly height: number;
}

export function frame({ name, description, width, height }: FrameOptions, parts: readonly string[]): string {
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" class="figure figure-${name}" viewBox="0 0 ${width} ${fixed(height)}" width="${width}" height="${fixed(height)}" role="img" aria-label="${escapeText(description)}" font-family="sans-serif" font-size="${FONT_SIZE}">`,
    ...parts.filter((part) => part !== ''),
    '</svg>',
  ].join('\n');
}

/** A coordinate with two digits, the same text everywhere. */
export const fixed = (value: number): string => String(Number(value.toFixed(2)));

const general = format('~g');
/** A number on an axis, with a true minus sign. */
export const tickText = (value: number): string => general(Number(value.toPrecision(12))).replace('-', '−');

/** A number with so many decimals and a true minus sign. */
export const decimals = (value: number, places: number): string => {
  const text = value.toFixed(places);
  return Number(text) === 0 ? text.replace('-', '') : text.replace('-', '−');
};

interface TextOptions {
  readonly anchor?: 'start' | 'middle' | 'end';
  readonly fill?: string;
  readonly size?: number;
  readonly bold?: boolean;
  readonly className?: string;
}

/** Text whose middle height is at y. */
export function text(x: number, y: number, words: string, options: TextOptions = {}): string {
  const { anchor = 'start', fill = INK, size, bold, className } = options;
  const extra = `${className ? ` class="${className}"` : ''}${size ? ` font-size="${size}"` : ''}${bold ? ' font-weight="bold"' : ''}`;
  return `<text x="${fixed(x)}" y="${fixed(y)}" dy="0.35em" text-anchor="${anchor}" fill="${fill}"${extra}>${escapeText(words)}</text>`;
}

/** Width of a text, px, estimated from a mean letter of 0.56 em; without a DOM nobody knows it exactly. */
export const widthOf = (words: string, size = FONT_SIZE): number => 0.56 * size * [...words].length;

/** A text cut to a width; what was cut is said with an ellipsis. */
export function cut(words: string, width: number, size = FONT_SIZE): string {
  const letters = [...words];
  const room = Math.floor(width / (0.51 * size));
  return letters.length <= room ? words : `${letters.slice(0, Math.max(1, room - 1)).join('')}…`;
}

export interface LegendEntry {
  readonly name: string;
  readonly tone: number;
  readonly look: 'line' | 'dashed' | 'area' | 'bar';
  readonly opacity?: number;
}

/** Names in rows over a plot; gives its drawing and its height. */
export function legend(entries: readonly LegendEntry[], left: number, right: number): { readonly drawn: string; readonly height: number } {
  let x = left;
  let row = 0;
  const drawn = entries.map(({ name, tone, look, opacity = 1 }) => {
    const width = 34 + widthOf(name);
    if (x + width > right && x > left) {
      x = left;
      row++;
    }
    const y = 12 + 20 * row;
    const sample =
      look === 'area' || look === 'bar'
        ? `<rect x="${fixed(x)}" y="${y - 6}" width="22" height="12" fill="${toneOf(tone)}" fill-opacity="${opacity}"/>`
        : `<line x1="${fixed(x)}" x2="${fixed(x + 22)}" y1="${y}" y2="${y}" stroke="${toneOf(tone)}" stroke-width="2.2"${look === 'dashed' ? ' stroke-dasharray="5 4"' : ''}/>`;
    const words = text(x + 28, y, name);
    x += width + 12;
    return sample + words;
  });
  return { drawn: `<g class="legend">${drawn.join('')}</g>`, height: entries.length > 0 ? 20 * (row + 1) + 4 : 0 };
}
