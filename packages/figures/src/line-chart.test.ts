import { expect, test } from 'vitest';
import { expectNear } from '../../../test/support/expect-near.js';
import { lineChart } from './line-chart.js';

const chart = (y: number[], name?: string) =>
  lineChart({
    curves: [{ x: [0, 5, 10], y, tone: 0, ...(name === undefined ? {} : { name }) }],
    xDomain: [0, 10],
    xLabel: 'k (Å⁻¹)',
    yLabel: 'y',
    description: 'test',
  });
const points = (svg: string) =>
  [...svg.match(/class="curve" d="([^"]*)"/)![1]!.matchAll(/[ML]([-\d.]+),([-\d.]+)/g)].map((m) => [Number(m[1]), Number(m[2])] as const);

test('curve points follow the data linearly', () => {
  const [a, b, c] = points(chart([0, 1, 4]));
  expectNear(b![0] - a![0], c![0] - b![0], { abs: 0.011, label: 'x steps' });
  expectNear((a![1] - c![1]) / (a![1] - b![1]), 4, { abs: 0.02, label: 'y ratio' });
});

test('a value that is no number breaks the line and is not drawn', () => {
  const svg = chart([0, Number.NaN, 4]);
  expect(points(svg)).toHaveLength(2);
  expect(svg).not.toContain('NaN');
});

test('text is escaped', () => {
  expect(chart([0, 1, 2], '<script>alert("x")</script>')).not.toContain('<script>');
});

test('x and y must pair', () => {
  expect(() => lineChart({ curves: [{ x: [1], y: [], tone: 0 }], xDomain: [0, 1], xLabel: '', yLabel: '', description: '' })).toThrow(
    RangeError,
  );
});
