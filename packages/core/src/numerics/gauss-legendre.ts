/**
 * Gauss–Legendre nodes and weights on (0, 1): zeros of P_n by Newton's method from Tricomi's estimate
 * cos(π(i − ¼)/(n + ½)) (DLMF 18.16.14); w = 2/((1 − x²) P′_n(x)²) (DLMF 3.5.(v)), mapped to (0, 1).
 */
export function gaussLegendreUnit(n: number): { readonly x: Float64Array; readonly w: Float64Array } {
  const x = new Float64Array(n);
  const w = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    let z = Math.cos((Math.PI * (i + 0.75)) / (n + 0.5));
    let slope = 1;
    for (let step = 0; step < 100; step++) {
      let p0 = 1;
      let p1 = z;
      for (let l = 2; l <= n; l++) [p0, p1] = [p1, ((2 * l - 1) * z * p1 - (l - 1) * p0) / l];
      slope = (n * (z * p1 - p0)) / (z * z - 1);
      const dz = p1 / slope;
      z -= dz;
      if (Math.abs(dz) < 1e-15) break;
    }
    x[i] = 0.5 * (1 - z);
    w[i] = 1 / ((1 - z * z) * slope * slope);
  }
  return { x, w };
}
