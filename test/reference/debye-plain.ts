/**
 * Correlated Debye σ² the slow plain way: the frequency integral by the composite midpoint rule, the double sum over the
 * vertices as it is written in the papers. Masses in u, lengths in Å, temperatures in K.
 */
const HBAR = 1.054571817e-34;
const KB = 1.380649e-23;
const U = 1.66053906892e-27;

export interface PlainVertex {
  readonly position: readonly number[];
  readonly mass: number;
}

export function plainDebyeSigma2(route: readonly PlainVertex[], theta: number, density: number, temperature: number): number {
  const kD = (6 * Math.PI ** 2 * density) ** (1 / 3);
  const wD = (KB * theta) / HBAR;
  const n = route.length;
  const leg = (a: number) => {
    const [from, to] = [route[a]!.position, route[(a + 1) % n]!.position];
    const d = [0, 1, 2].map((i) => to[i]! - from[i]!);
    const length = Math.hypot(...d);
    return d.map((x) => x / length);
  };
  const correlation = (i: number, j: number) => {
    const R = Math.hypot(...[0, 1, 2].map((c) => route[i]!.position[c]! - route[j]!.position[c]!));
    const steps = 20000;
    let sum = 0;
    for (let s = 0; s < steps; s++) {
      const w = (s + 0.5) / steps;
      const x = w * kD * R;
      const coth = temperature === 0 ? 1 : 1 / Math.tanh((HBAR * wD * w) / (2 * KB * temperature));
      sum += (3 * w * coth * (x === 0 ? 1 : Math.sin(x) / x)) / steps;
    }
    return (HBAR / (2 * Math.sqrt(route[i]!.mass * route[j]!.mass) * U * wD)) * 1e20 * sum;
  };
  let sigma2 = 0;
  for (let a = 0; a < n; a++) {
    for (let b = 0; b < n; b++) {
      const [ea, fa, eb, fb] = [leg((a + n - 1) % n), leg(a), leg((b + n - 1) % n), leg(b)];
      let dot = 0;
      for (let c = 0; c < 3; c++) dot += (ea[c]! - fa[c]!) * (eb[c]! - fb[c]!);
      sigma2 += 0.25 * dot * correlation(a, b);
    }
  }
  return sigma2;
}
