/**
 * Cubic spline through points, with "not-a-knot" ends: the third derivative is continuous across the second and the last
 * but one point, so a cubic is reproduced exactly and the error is O(h⁴) up to the ends (de Boor, A Practical Guide to
 * Splines, Springer 1978, chapter IV).
 */
export class CubicSpline {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Second derivatives at the knots (n). */
  readonly m: Float64Array;
  /** 1/step where the knots are evenly spaced (to 1e-9), else 0: the interval is then found by division. */
  private readonly perStep: number;

  /**
   * @param x ascending knots (n ≥ 4), kept by reference
   * @param y values (n), kept by reference
   * @throws {RangeError} fewer than 4 knots, lengths that differ, knots that do not ascend
   */
  constructor(x: Float64Array, y: Float64Array) {
    const n = x.length;
    if (n < 4 || y.length !== n) throw new RangeError(`CubicSpline: needs at least 4 points and as many values, got ${n} and ${y.length}`);
    this.x = x;
    this.y = y;
    this.m = secondDerivatives(x, y);
    const step = (x[n - 1]! - x[0]!) / (n - 1);
    let even = true;
    for (let i = 1; i < n && even; i++) even = Math.abs(x[i]! - x[0]! - i * step) < 1e-9 * step * n;
    this.perStep = even ? 1 / step : 0;
  }

  /** Value at t; outside the knots the end cubic is continued. */
  at(t: number): number {
    const { x, y, m } = this;
    const i = this.interval(t);
    const h = x[i + 1]! - x[i]!;
    const b = (t - x[i]!) / h;
    const a = 1 - b;
    return a * y[i]! + b * y[i + 1]! + ((a * a * a - a) * m[i]! + (b * b * b - b) * m[i + 1]!) * ((h * h) / 6);
  }

  /** First derivative at t. */
  slopeAt(t: number): number {
    const { x, y, m } = this;
    const i = this.interval(t);
    const h = x[i + 1]! - x[i]!;
    const b = (t - x[i]!) / h;
    const a = 1 - b;
    return (y[i + 1]! - y[i]!) / h + ((1 - 3 * a * a) * m[i]! + (3 * b * b - 1) * m[i + 1]!) * (h / 6);
  }

  private interval(t: number): number {
    const { x, perStep } = this;
    const last = x.length - 2;
    if (perStep > 0) {
      const i = Math.floor((t - x[0]!) * perStep);
      return i < 0 ? 0 : Math.min(i, last);
    }
    let low = 0;
    let high = last + 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (x[middle]! <= t) low = middle;
      else high = middle;
    }
    return low;
  }
}

/** Second derivatives at the knots of the not-a-knot spline: one elimination of the nearly tridiagonal system. */
function secondDerivatives(x: Float64Array, y: Float64Array): Float64Array {
  const n = x.length;
  const m = new Float64Array(n);
  const diagonal = new Float64Array(n);
  const upper = new Float64Array(n);
  const h = (i: number): number => {
    const step = x[i + 1]! - x[i]!;
    if (!(step > 0)) throw new RangeError(`CubicSpline: knots must ascend, but x[${i + 1}] = ${x[i + 1]} follows ${x[i]}`);
    return step;
  };
  // Interior equations h0 m0 + 2(h0 + h1) m1 + h1 m2 = 6(Δ1 − Δ0); the ends are eliminated with m0 = m1 + (h0/h1)(m1 − m2).
  for (let i = 1; i < n - 1; i++) {
    const h0 = h(i - 1);
    const h1 = h(i);
    let lower = h0;
    diagonal[i] = 2 * (h0 + h1);
    upper[i] = h1;
    m[i] = 6 * ((y[i + 1]! - y[i]!) / h1 - (y[i]! - y[i - 1]!) / h0);
    if (i === 1) {
      diagonal[i]! += h0 * (1 + h0 / h1);
      upper[i]! -= (h0 * h0) / h1;
      lower = 0;
    }
    if (i === n - 2) {
      diagonal[i]! += h1 * (1 + h1 / h0);
      lower -= (h1 * h1) / h0;
      upper[i] = 0;
    }
    if (i > 1) {
      const factor = lower / diagonal[i - 1]!;
      diagonal[i]! -= factor * upper[i - 1]!;
      m[i]! -= factor * m[i - 1]!;
    }
  }
  for (let i = n - 2; i >= 1; i--) m[i] = (m[i]! - upper[i]! * m[i + 1]!) / diagonal[i]!;
  const first = (x[1]! - x[0]!) / (x[2]! - x[1]!);
  m[0] = m[1]! + first * (m[1]! - m[2]!);
  const last = (x[n - 1]! - x[n - 2]!) / (x[n - 2]! - x[n - 3]!);
  m[n - 1] = m[n - 2]! + last * (m[n - 2]! - m[n - 3]!);
  return m;
}
