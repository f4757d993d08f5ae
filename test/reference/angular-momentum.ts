/**
 * Multiple scattering the long way: every propagator as a full matrix over (l, m) in one global frame.
 *
 *   h_{L'}(r − R) = Σ_L j_L(r) g_{LL'}(R),   g_{LL'}(R) = 4π Σ_{L''} i^{l−l'−l''} h_{l''}(pR) Y*_{L''}(R̂) ∫Y*_L Y_{L''} Y_{L'}
 *   A = i e^{2iδ_{l0}} 1/(2l0 + 1) Σ_m [g^{0,N−1} (i t) … (i t) g^{1,0}]_{l0 m, l0 m}
 *
 * from the expansion of e^{ik·r} (DLMF 10.60.7) and the Gaunt integral by 3j symbols (DLMF 34.3.22). Slow and plain.
 */
import { besselOrders, sphericalBesselHankel } from '../../packages/core/src/numerics/complex-bessel.js';

export interface Complex {
  readonly re: number;
  readonly im: number;
}
export const times = (a: Complex, b: Complex): Complex => ({ re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re });
export const plus = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im });
const POWERS_OF_I: readonly Complex[] = [
  { re: 1, im: 0 },
  { re: 0, im: 1 },
  { re: -1, im: 0 },
  { re: 0, im: -1 },
];
const powerOfI = (n: number): Complex => POWERS_OF_I[((n % 4) + 4) % 4]!;

const factorials = [1];
for (let i = 1; i <= 170; i++) factorials.push(factorials[i - 1]! * i);

/** Wigner 3j symbol of whole numbers, by Racah's sum. */
export function threeJ(a: number, b: number, c: number, x: number, y: number, z: number): number {
  if (x + y + z !== 0 || c < Math.abs(a - b) || c > a + b || Math.abs(x) > a || Math.abs(y) > b || Math.abs(z) > c) return 0;
  const f = (n: number): number => factorials[n]!;
  let sum = 0;
  for (let t = Math.max(0, b - c - x, a - c + y); t <= Math.min(a + b - c, a - x, b + y); t++) {
    sum += (t % 2 ? -1 : 1) / (f(t) * f(c - b + t + x) * f(c - a + t - y) * f(a + b - c - t) * f(a - t - x) * f(b - t + y));
  }
  const triangle = (f(a + b - c) * f(a - b + c) * f(b + c - a)) / f(a + b + c + 1);
  const sign = (((a - b - z) % 2) + 2) % 2 ? -1 : 1;
  return sign * Math.sqrt(triangle * f(a + x) * f(a - x) * f(b + y) * f(b - y) * f(c + z) * f(c - z)) * sum;
}

/** Y_lm(u), Condon–Shortley, for all l ≤ lMax as a function of (l, m). */
export function harmonics(u: readonly number[], lMax: number): (l: number, m: number) => Complex {
  const x = u[2]!;
  const sine = Math.sqrt(Math.max(0, 1 - x * x));
  const phi = Math.atan2(u[1]!, u[0]!);
  const legendre: number[][] = [];
  for (let l = 0; l <= lMax; l++) {
    legendre.push([]);
    for (let m = 0; m <= l; m++) {
      if (m === l) legendre[l]!.push(l === 0 ? 1 : -(2 * l - 1) * sine * legendre[l - 1]![l - 1]!);
      else if (m === l - 1) legendre[l]!.push(x * (2 * m + 1) * legendre[m]![m]!);
      else legendre[l]!.push((x * (2 * l - 1) * legendre[l - 1]![m]! - (l + m - 1) * legendre[l - 2]![m]!) / (l - m));
    }
  }
  return (l, m) => {
    const n = Math.abs(m);
    const value =
      Math.sqrt((((2 * l + 1) / (4 * Math.PI)) * factorials[l - n]!) / factorials[l + n]!) * legendre[l]![n]! * (m < 0 && n % 2 ? -1 : 1);
    return { re: value * Math.cos(m * phi), im: value * Math.sin(m * phi) };
  };
}

const index = (l: number, m: number): number => l * l + l + m;

/** g between sets of orders: rows l of `rows`, columns l' of `columns`; R in the units of 1/p. */
export function propagator(
  R: readonly number[],
  p: Complex,
  rows: readonly number[],
  columns: readonly number[],
): Map<number, Map<number, Complex>> {
  const length = Math.hypot(...R);
  const highest = Math.max(...rows) + Math.max(...columns);
  const orders = besselOrders(Math.max(1, highest));
  sphericalBesselHankel(p.re * length, p.im * length, orders);
  const Y = harmonics(
    R.map((x) => x / length),
    highest,
  );
  const zero = new Map<string, number>();
  const threeJ0 = (a: number, b: number, c: number): number => {
    const key = `${a} ${b} ${c}`;
    if (!zero.has(key)) zero.set(key, threeJ(a, b, c, 0, 0, 0));
    return zero.get(key)!;
  };
  const g = new Map<number, Map<number, Complex>>();
  for (const l of rows) {
    for (let m = -l; m <= l; m++) {
      const row = new Map<number, Complex>();
      for (const l1 of columns) {
        for (let m1 = -l1; m1 <= l1; m1++) {
          let sum: Complex = { re: 0, im: 0 };
          for (let l2 = Math.abs(l - l1); l2 <= l + l1; l2 += 2) {
            const m2 = m - m1;
            if (Math.abs(m2) > l2) continue;
            const gaunt =
              (m % 2 ? -1 : 1) *
              Math.sqrt(((2 * l + 1) * (2 * l1 + 1) * (2 * l2 + 1)) / (4 * Math.PI)) *
              threeJ0(l, l2, l1) *
              threeJ(l, l2, l1, -m, m2, m1);
            const y = Y(l2, m2);
            const h = { re: orders.hRe[l2]!, im: orders.hIm[l2]! };
            const term = times(times(powerOfI(l - l1 - l2), h), { re: y.re, im: -y.im });
            sum = plus(sum, { re: 4 * Math.PI * gaunt * term.re, im: 4 * Math.PI * gaunt * term.im });
          }
          row.set(index(l1, m1), sum);
        }
      }
      g.set(index(l, m), row);
    }
  }
  return g;
}

export interface PlainRoute {
  /** Vertices, absorber first, in the units of 1/p. */
  readonly positions: readonly (readonly number[])[];
  /** t_l of the scatterers, positions[1] first. */
  readonly t: readonly (readonly Complex[])[];
  readonly p: Complex;
  readonly l0: number;
  /** e^{2iδ} of the absorber. */
  readonly absorber: Complex;
  /** Unit vector of the electric field; absent: the mean over directions. */
  readonly polarisation?: readonly number[];
}

/**
 * Final states that a dipole transition reaches from each state (l0 − 1, m') of the core level: ⟨l0 m|ε·r̂|l0 − 1, m'⟩ with
 * ε·r̂ = √(4π/3) Σ_q ε_q* Y_1q, scaled so that Σ_{mm'} |·|² = 2 l0 + 1. Without a direction: each |l0 m⟩ once.
 */
function finalStates(l0: number, polarisation?: readonly number[]): Complex[][] {
  if (!polarisation)
    return Array.from({ length: 2 * l0 + 1 }, (_, m) => Array.from({ length: 2 * l0 + 1 }, (__, n) => ({ re: m === n ? 1 : 0, im: 0 })));
  const [x, y, z] = polarisation as [number, number, number];
  const s = Math.SQRT1_2;
  const conjugate: readonly Complex[] = [
    { re: s * x, im: s * y },
    { re: z, im: 0 },
    { re: -s * x, im: s * y },
  ];
  const li = l0 - 1;
  const states = Array.from({ length: 2 * li + 1 }, (_, i) =>
    Array.from({ length: 2 * l0 + 1 }, (__, n): Complex => {
      const [m, mi] = [n - l0, i - li];
      const q = m - mi;
      if (Math.abs(q) > 1) return { re: 0, im: 0 };
      const factor = (m % 2 ? -1 : 1) * threeJ(l0, 1, li, -m, q, mi);
      const e = conjugate[q + 1]!;
      return { re: factor * e.re, im: factor * e.im };
    }),
  );
  let norm = 0;
  for (const state of states) for (const { re, im } of state) norm += re * re + im * im;
  const scale = Math.sqrt((2 * l0 + 1) / norm);
  return states.map((state) => state.map(({ re, im }) => ({ re: scale * re, im: scale * im })));
}

/** A of a closed route. */
export function plainAmplitude({ positions, t, p, l0, absorber, polarisation }: PlainRoute): Complex {
  const N = positions.length;
  const ordersOf = (i: number): number[] => (i % N === 0 ? [l0] : t[i - 1]!.map((_, l) => l));
  const apart = (to: number, from: number): number[] => positions[from]!.map((x, c) => x - positions[to]![c]!);
  let total: Complex = { re: 0, im: 0 };
  // wave holds the coefficients at the site reached, starting from one final state of the transition
  const legs = Array.from({ length: N }, (_, i) => propagator(apart((i + 1) % N, i), p, ordersOf(i + 1), ordersOf(i)));
  for (const state of finalStates(l0, polarisation)) {
    let wave = new Map<number, Complex>(state.map((value, n) => [index(l0, n - l0), value]));
    for (let i = 0; i < N; i++) {
      const arrived = new Map<number, Complex>();
      for (const [row, columns] of legs[i]!) {
        let sum: Complex = { re: 0, im: 0 };
        for (const [column, value] of wave) sum = plus(sum, times(columns.get(column)!, value));
        const l = Math.floor(Math.sqrt(row));
        arrived.set(row, i === N - 1 ? sum : times(times({ re: 0, im: 1 }, t[i]![l]!), sum));
      }
      wave = arrived;
    }
    state.forEach(({ re, im }, n) => {
      total = plus(total, times({ re, im: -im }, wave.get(index(l0, n - l0))!));
    });
  }
  const mean = times(times({ re: 0, im: 1 }, absorber), total);
  return { re: mean.re / (2 * l0 + 1), im: mean.im / (2 * l0 + 1) };
}
