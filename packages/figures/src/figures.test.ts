/** Every figure against its kept drawing: the same marks, numbers within 0.06 px. `UPDATE_FIGURES=1` draws them anew, to be looked at. */
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import * as figures from './index.js';
import { CANDIDATES, COMPARISON, DISORDER, DOSE, EVIDENCE, OVERLENGTH, PARAMETERS, PREDICTION, REDUCTION, SITE } from './invented.js';

const drawings: Record<string, () => string> = {
  'chi-k': () => figures.chiInK(PREDICTION),
  'chi-r': () => figures.chiInR(PREDICTION),
  'parts-by-shell': () => figures.contributionsByShell(PREDICTION),
  'parts-by-order': () => figures.contributionsByOrder(PREDICTION, 2),
  'comparison-k': () => figures.comparisonInK(COMPARISON, EVIDENCE),
  'comparison-r': () => figures.comparisonInR(COMPARISON, EVIDENCE),
  strain: () => figures.strainChart({ file: 'a.cif', parameters: PARAMETERS }),
  overlength: () => figures.overlengthChart('a.cif', OVERLENGTH),
  disorder: () => figures.disorderChart('a.cif', DISORDER),
  ranking: () => figures.rankingChart({ candidates: CANDIDATES }),
  absorption: () => figures.absorptionFigure(REDUCTION),
  'reduced-chi': () => figures.reducedChi(REDUCTION),
  dose: () => figures.doseFigure(DOSE),
  site: () => figures.siteDrawing(SITE),
};

const NUMBER = /-?\d+(?:\.\d+)?/g;

describe.each(Object.entries(drawings))('%s', (name, draw) => {
  const svg = draw();

  test('is drawn as it was kept', () => {
    const folder = fileURLToPath(new URL('drawings/', import.meta.url));
    const file = `${folder}${name}.svg`;
    if (process.env['UPDATE_FIGURES']) {
      mkdirSync(folder, { recursive: true });
      writeFileSync(file, `${svg}\n`);
    }
    expect(existsSync(file), `${file} is missing: draw it with UPDATE_FIGURES=1 and look at it`).toBe(true);
    const kept = readFileSync(file, 'utf8').trimEnd();
    expect(svg.replace(NUMBER, '#')).toBe(kept.replace(NUMBER, '#'));
    const [now, before] = [svg.match(NUMBER)!.map(Number), kept.match(NUMBER)!.map(Number)];
    const farthest = now.reduce((most, value, i) => Math.max(most, Math.abs(value - before[i]!)), 0);
    expect(farthest).toBeLessThan(0.06); // coordinates are rounded to 0.01 px
  });

  test('has no number that is none, a name for screen readers, and one set of tags', () => {
    expect(svg).not.toMatch(/NaN|Infinity|undefined/);
    expect(svg).toMatch(/role="img" aria-label="[^"]{10,}"/);
    expect(svg.match(/<g[ >]/g)?.length ?? 0).toBe(svg.match(/<\/g>/g)?.length ?? 0);
  });

  test('stays inside its frame', () => {
    const [, width, height] = /viewBox="0 0 (\S+) (\S+)"/.exec(svg)!.map(Number);
    for (const [, x, y, anchor, size, words] of svg.matchAll(
      /<text x="([-\d.]+)" y="([-\d.]+)" dy="0.35em" text-anchor="(\w+)"[^>]*?(?:font-size="(\d+)")?[^>]*>([^<]*)/g,
    )) {
      // 0.5 em a letter is what sans-serif faces take on the mean.
      const long = 0.5 * Number(size ?? 15) * words!.length;
      const left = Number(x) - { start: 0, middle: long / 2, end: long }[anchor as 'start']!;
      expect(left, words).toBeGreaterThanOrEqual(-1);
      expect(left + long, words).toBeLessThanOrEqual(width! + 1);
      expect(Number(y), words).toBeLessThanOrEqual(height!);
    }
  });

  test('standing alone it needs no custom property', () => {
    expect(figures.standalone(svg)).not.toContain('var(');
  });
});

/** WCAG 2.2, relative luminance and contrast ratio; non-text contrast wants 3 (success criterion 1.4.11). */
const luminance = (hex: string): number => {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const c = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r! + 0.7152 * g! + 0.0722 * b!;
};
const contrast = (a: string, b: string): number => {
  const [high, low] = [luminance(a), luminance(b)].sort((p, q) => q - p);
  return (high! + 0.05) / (low! + 0.05);
};

test.each('H C N O F S P Cl Br I Se Si Na Mg Mn Fe Zn Pt'.split(' '))('%s stands out on light and dark ground', (element) => {
  expect(contrast(figures.elementColour(element), '#ffffff')).toBeGreaterThanOrEqual(3);
  expect(contrast(figures.elementColour(element), '#14181c')).toBeGreaterThanOrEqual(3);
});

/**
 * Deuteranopia and protanopia after Viénot, Brettel & Mollon, Color Res. Appl. 24, 243 (1999), linear RGB. The three tones that meet in one plot
 * (measured, model, expected) keep apart in lightness or in what is left of their hue.
 */
const MATRICES = {
  protanopia: [0.11238, 0.88762, 0, 0.11238, 0.88762, 0, 0.00401, -0.00401, 1],
  deuteranopia: [0.29275, 0.70725, 0, 0.29275, 0.70725, 0, -0.02234, 0.02234, 1],
} as const;
test.each(Object.entries(MATRICES))('the tones of one plot keep apart in %s', (_name, m) => {
  const svg = figures.comparisonInK(COMPARISON, EVIDENCE);
  const tones = [...new Set(svg.match(/var\(--tone-\d, (#\w{6})\)/g)!.map((t) => t.slice(-8, -1)))];
  expect(tones.length).toBe(3);
  const seen = tones.map((hex) => {
    const rgb = [1, 3, 5].map((at) => (Number.parseInt(hex.slice(at, at + 2), 16) / 255) ** 2.2);
    return [0, 1, 2].map(
      (row) =>
        Math.max(
          0,
          rgb.reduce((sum, v, c) => sum + m[3 * row + c]! * v, 0),
        ) **
        (1 / 2.2),
    );
  });
  for (let i = 0; i < 3; i++)
    for (let j = 0; j < i; j++) expect(Math.hypot(...seen[i]!.map((v, a) => v - seen[j]![a]!))).toBeGreaterThan(0.15);
});
