/**
 * t_l of a sphere the slow way: the scalar-relativistic pair in t = ln r with complex numbers as objects, classical Runge–Kutta
 * in equal, very small steps, the potential evaluated where it is needed. Hartree units.
 */
import { besselOrders, sphericalBesselHankel } from '../../packages/core/src/numerics/complex-bessel.js';
import { type Complex, plus, times } from './angular-momentum.js';

const scale = (a: Complex, s: number): Complex => ({ re: a.re * s, im: a.im * s });
const over = (a: Complex, b: Complex): Complex => scale(times(a, { re: b.re, im: -b.im }), 1 / (b.re * b.re + b.im * b.im));

export interface PlainSphere {
  readonly potential: (r: number) => Complex;
  readonly Z: number;
  readonly radius: number;
  readonly c: number;
  /** Energy on the scale of the potential, interstitial kinetic energy and momentum. */
  readonly energy: number;
  readonly e: Complex;
  readonly p: Complex;
}

export function plainT(l: number, { potential, Z, radius, c, energy, e, p }: PlainSphere, steps = 40_000): Complex {
  const start = Math.max(1e-6, radius * 10 ** (-40 / (l + 1)));
  const h = Math.log(radius / start) / steps;
  const slopes = (t: number, [P, Q]: readonly [Complex, Complex]): [Complex, Complex] => {
    const r = Math.exp(t);
    const kinetic = plus({ re: energy, im: 0 }, scale(potential(r), -1));
    const M = plus({ re: 1, im: 0 }, scale(kinetic, 1 / (2 * c * c)));
    const centrifugal = over({ re: (l * (l + 1)) / (2 * r), im: 0 }, M);
    return [plus(P, scale(times(M, Q), 2 * r)), plus(scale(Q, -1), times(plus(centrifugal, scale(kinetic, -r)), P))];
  };
  const g = Math.sqrt(l * (l + 1) + 1 - (Z / c) ** 2);
  const mass = 1 + (energy - potential(start).re) / (2 * c * c);
  const ratio = mass > 2 ? ((g - 1) * c * c) / Z : (l / start - (l === 0 ? Z : 0)) / (2 * mass);
  let y: readonly [Complex, Complex] = [
    { re: 1e-20, im: 0 },
    { re: 1e-20 * ratio, im: 0 },
  ];
  const step = (from: readonly [Complex, Complex], by: readonly [Complex, Complex], s: number): [Complex, Complex] => [
    plus(from[0], scale(by[0], s)),
    plus(from[1], scale(by[1], s)),
  ];
  for (let i = 0; i < steps; i++) {
    const t = Math.log(start) + i * h;
    const k1 = slopes(t, y);
    const k2 = slopes(t + h / 2, step(y, k1, h / 2));
    const k3 = slopes(t + h / 2, step(y, k2, h / 2));
    const k4 = slopes(t + h, step(y, k3, h));
    y = step(step(step(step(y, k1, h / 6), k2, h / 3), k3, h / 3), k4, h / 6);
  }
  const D = scale(times(plus({ re: 1, im: 0 }, scale(e, 1 / (2 * c * c))), over(y[1], y[0])), 2);
  const orders = besselOrders(l + 1);
  sphericalBesselHankel(p.re * radius, p.im * radius, orders);
  const matched = (re: Float64Array, im: Float64Array): Complex => {
    const f = { re: re[l]!, im: im[l]! };
    const next = { re: re[l + 1]!, im: im[l + 1]! };
    return plus(plus(scale(f, l / radius), scale(times(p, next), -1)), scale(times(D, f), -1));
  };
  return times({ re: 0, im: 1 }, over(matched(orders.jRe, orders.jIm), matched(orders.hRe, orders.hIm)));
}
