/** Gauss–Legendre nodes and weights on [0, 1], by Newton's method on P_n (DLMF 3.5(v)); accurate to rounding for n ≤ 400. */
export function gaussLegendre(n: number): { readonly nodes: Float64Array; readonly weights: Float64Array } {
  const nodes = new Float64Array(n);
  const weights = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (n + 0.5));
    let slope = 1;
    for (let iteration = 0; iteration < 100; iteration++) {
      let p0 = 1;
      let p1 = x;
      for (let l = 2; l <= n; l++) [p0, p1] = [p1, ((2 * l - 1) * x * p1 - (l - 1) * p0) / l];
      slope = (n * (x * p1 - p0)) / (x * x - 1);
      const step = p1 / slope;
      x -= step;
      if (Math.abs(step) < 1e-15) break;
    }
    nodes[n - 1 - i] = 0.5 * (1 + x);
    weights[n - 1 - i] = 1 / ((1 - x * x) * slope * slope);
  }
  return { nodes, weights };
}
