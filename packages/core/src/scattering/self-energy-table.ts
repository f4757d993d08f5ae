/**
 * Re Σ_HL = Σ_x + Re Σ_c of the plasmon-pole electron gas by interpolation. The exact quadrature (electron-gas.ts) takes 13 µs; a potential
 * needs it at 10⁵ points. Built once at first use, in about 0.1 s.
 *
 * Re Σ has a cusp where plasmon emission opens (x = p/k_F = x_c): the table has a patch of Re Σ/k_F on either side of it and never
 * interpolates across. Coordinates: ln rs; below, (x − 1)/(x_c − 1) = 1 − v³; above, 1 − x_c/x = v³ — cubes, because Σ
 * approaches the cusp like a power near ½. The sum is
 * tabulated and not Σ_c, since only in the sum do the (x − 1) ln|x − 1| terms at the Fermi momentum cancel. Local cubic
 * (four-point) interpolation in both directions.
 */
import { correlationReal, diracHara, KF_RS, plasmonThreshold } from './electron-gas.js';

const LN_RS_MIN = Math.log(0.008);
const LN_RS_MAX = Math.log(20);
const RS_POINTS = 56;
const LOWER_POINTS = 28;
const UPPER_POINTS = 48;
/** v of the last point above the cusp: x = x_c/(1 − v³), 100 x_c. Farther out Σ falls as 1/x. */
const V_MAX = Math.cbrt(0.99);

interface Table {
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

let table: Table | undefined;

/** Re Σ_HL in units of k_F. */
const whole = (rs: number, x: number): number => diracHara(x) + (rs / KF_RS) * correlationReal(rs, (x * KF_RS) / rs);

function build(): Table {
  const lower = new Float64Array(RS_POINTS * LOWER_POINTS);
  const upper = new Float64Array(RS_POINTS * UPPER_POINTS);
  for (let i = 0; i < RS_POINTS; i++) {
    const rs = Math.exp(LN_RS_MIN + ((LN_RS_MAX - LN_RS_MIN) * i) / (RS_POINTS - 1));
    const threshold = plasmonThreshold(rs);
    for (let j = 0; j < LOWER_POINTS; j++) {
      const v = j / (LOWER_POINTS - 1);
      lower[i * LOWER_POINTS + j] = whole(rs, 1 + (threshold - 1) * (1 - v * v * v));
    }
    for (let j = 0; j < UPPER_POINTS; j++) {
      const v = (V_MAX * j) / (UPPER_POINTS - 1);
      upper[i * UPPER_POINTS + j] = whole(rs, threshold / (1 - v * v * v));
    }
  }
  return { lower, upper };
}

/**
 * Re Σ_HL(p) and its value at k_F, hartree, as [at p, at k_F] into out.
 *
 * Measured against the quadrature: see test/external/electron-gas.test.ts.
 *
 * @param rs  bohr; clamped to 0.008 … 20: denser, Σ is negligible beside the potential; thinner, there is hardly any density
 * @param x   p/k_F ≥ 1
 */
export function tabulatedSelfEnergy(rs: number, x: number, threshold: number, out: Float64Array): void {
  table ??= build();
  const lnRs = Math.log(rs);
  const clamped = lnRs < LN_RS_MIN ? LN_RS_MIN : Math.min(lnRs, LN_RS_MAX);
  const rowPosition = ((clamped - LN_RS_MIN) / (LN_RS_MAX - LN_RS_MIN)) * (RS_POINTS - 1);
  const kF = KF_RS / rs;
  out[1] = kF * interpolate(table.lower, LOWER_POINTS, rowPosition, LOWER_POINTS - 1);
  if (x < threshold) {
    const v = Math.cbrt(Math.max(0, 1 - (x - 1) / (threshold - 1)));
    out[0] = kF * interpolate(table.lower, LOWER_POINTS, rowPosition, v * (LOWER_POINTS - 1));
  } else {
    const v = Math.cbrt(1 - threshold / x);
    const inside = Math.min(v, V_MAX);
    const beyond = v > V_MAX ? threshold / (1 - V_MAX ** 3) / x : 1;
    out[0] = kF * beyond * interpolate(table.upper, UPPER_POINTS, rowPosition, (inside / V_MAX) * (UPPER_POINTS - 1));
  }
}

/** Four-point Lagrange interpolation in row and column of a row-major table. */
function interpolate(values: Float64Array, columns: number, row: number, column: number): number {
  const i = Math.min(Math.max(Math.floor(row) - 1, 0), RS_POINTS - 4);
  const j = Math.min(Math.max(Math.floor(column) - 1, 0), columns - 4);
  const a = row - i;
  const b = column - j;
  const a1 = a - 1;
  const a2 = a - 2;
  const a3 = a - 3;
  const b1 = b - 1;
  const b2 = b - 2;
  const b3 = b - 3;
  const w0 = (-b1 * b2 * b3) / 6;
  const w1 = (b * b2 * b3) / 2;
  const w2 = (-b * b1 * b3) / 2;
  const w3 = (b * b1 * b2) / 6;
  let at = i * columns + j;
  const r0 = w0 * values[at]! + w1 * values[at + 1]! + w2 * values[at + 2]! + w3 * values[at + 3]!;
  at += columns;
  const r1 = w0 * values[at]! + w1 * values[at + 1]! + w2 * values[at + 2]! + w3 * values[at + 3]!;
  at += columns;
  const r2 = w0 * values[at]! + w1 * values[at + 1]! + w2 * values[at + 2]! + w3 * values[at + 3]!;
  at += columns;
  const r3 = w0 * values[at]! + w1 * values[at + 1]! + w2 * values[at + 2]! + w3 * values[at + 3]!;
  return ((-a1 * a2 * a3) / 6) * r0 + ((a * a2 * a3) / 2) * r1 - ((a * a1 * a3) / 2) * r2 + ((a * a1 * a2) / 6) * r3;
}
