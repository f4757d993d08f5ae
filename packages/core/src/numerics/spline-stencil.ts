/**
 * Many splines on the same knots at the same points: where each point lies and the weights of knots there are found once. With
 * a = 1 − b the part of the interval h still ahead,
 *   s = a y_i + b y_i+1 + [(a³ − a) m_i + (b³ − b) m_i+1] h²/6     (spline.ts)
 */
import type { CubicSpline } from './spline.js';

export class SplineStencil {
  readonly interval: Int32Array;
  /** Weights of y_i, y_i+1, m_i, m_i+1 for the value and for the slope, row-major (n, 4). */
  readonly value: Float64Array;
  readonly slope: Float64Array;

  /** @param x  knots, rising @param t  points (n); outside the knots the end cubic is continued */
  constructor(x: Float64Array, t: Float64Array) {
    const n = t.length;
    this.interval = new Int32Array(n);
    this.value = new Float64Array(4 * n);
    this.slope = new Float64Array(4 * n);
    for (let j = 0; j < n; j++) {
      let low = 0;
      let high = x.length - 1;
      while (high - low > 1) {
        const middle = (low + high) >> 1;
        if (x[middle]! <= t[j]!) low = middle;
        else high = middle;
      }
      const h = x[low + 1]! - x[low]!;
      const b = (t[j]! - x[low]!) / h;
      const a = 1 - b;
      this.interval[j] = low;
      const { value, slope } = this;
      value[4 * j] = a;
      value[4 * j + 1] = b;
      value[4 * j + 2] = ((a * a * a - a) * h * h) / 6;
      value[4 * j + 3] = ((b * b * b - b) * h * h) / 6;
      slope[4 * j] = -1 / h;
      slope[4 * j + 1] = 1 / h;
      slope[4 * j + 2] = ((1 - 3 * a * a) * h) / 6;
      slope[4 * j + 3] = ((3 * b * b - 1) * h) / 6;
    }
  }

  /** Values and slopes of a spline at all points, into value and slope (n). */
  evaluate({ y, m }: CubicSpline, value: Float64Array, slope: Float64Array): void {
    const { interval, value: v, slope: s } = this;
    for (let j = 0; j < interval.length; j++) {
      const i = interval[j]!;
      const y0 = y[i]!;
      const y1 = y[i + 1]!;
      const m0 = m[i]!;
      const m1 = m[i + 1]!;
      value[j] = v[4 * j]! * y0 + v[4 * j + 1]! * y1 + v[4 * j + 2]! * m0 + v[4 * j + 3]! * m1;
      slope[j] = s[4 * j]! * y0 + s[4 * j + 1]! * y1 + s[4 * j + 2]! * m0 + s[4 * j + 3]! * m1;
    }
  }
}
