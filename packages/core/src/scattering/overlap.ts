/**
 * Spherical average, about one centre, of a function that is spherical about another (Mattheiss, Phys. Rev. 133,
 * A1399 (1964)):
 *
 *   f̄(r) = 1/(2 R r) ∫_{|R−r|}^{R+r} s f(s) ds ,      R the distance of the centres.
 *
 * The antiderivative of s f(s) is tabulated once per function; each average is then two look-ups. Hartree atomic units.
 */

/** Antiderivative G(s) = ∫_0^s s' f(s') ds' on a logarithmic mesh, evaluated by cubic Hermite interpolation. */
export class Antiderivative {
  private readonly x0: number;
  private readonly dx: number;
  private readonly n: number;
  /** G and dG/dx = s² f at the mesh points. */
  private readonly G: Float64Array;
  private readonly g: Float64Array;

  /**
   * @param x0, dx  mesh s_i = exp(x0 + i dx), bohr
   * @param s2f     s² f(s) at the mesh points (n); f is taken as zero beyond the last point
   *
   * Each step is integrated with the four-point rule (−1, 13, 13, −1)/24, error O(dx⁵ g⁗).
   */
  constructor(x0: number, dx: number, s2f: Float64Array) {
    const n = s2f.length;
    this.x0 = x0;
    this.dx = dx;
    this.n = n;
    this.g = s2f;
    this.G = new Float64Array(n);
    // Below the first point s f(s) is close to a constant (Coulomb) or to s (density): either way below 1e-12 of the whole.
    for (let i = 1; i < n; i++) {
      const before = i >= 2 ? s2f[i - 2]! : s2f[i - 1]!;
      const after = i + 1 < n ? s2f[i + 1]! : s2f[i]!;
      this.G[i] = this.G[i - 1]! + (dx / 24) * (13 * (s2f[i - 1]! + s2f[i]!) - before - after);
    }
  }

  /** G(s), s in bohr, ≥ 0. */
  at(s: number): number {
    const { n, dx, G, g } = this;
    const position = (Math.log(s) - this.x0) / dx;
    if (!(position > 0)) return 0;
    if (position >= n - 1) return G[n - 1]!;
    const i = Math.floor(position);
    const t = position - i;
    const G0 = G[i]!;
    const G1 = G[i + 1]!;
    const d0 = g[i]! * dx;
    const d1 = g[i + 1]! * dx;
    const c = 3 * (G1 - G0) - 2 * d0 - d1;
    const d = 2 * (G0 - G1) + d0 + d1;
    return G0 + t * (d0 + t * (c + t * d));
  }
}

/**
 * Add `count` times the average of one function about centres at distance R to `out`.
 *
 * @param R    distance of the centres, bohr
 * @param r    radii about the own centre, bohr (n), ascending
 * @param out  (n), added to in place
 *
 * For r ≪ R the difference of antiderivatives cancels; below r = R/1000 the average differs from its value there
 * by (r/R)² of the function's curvature, and that value is used.
 */
export function addOverlap(G: Antiderivative, R: number, count: number, r: Float64Array, out: Float64Array): void {
  const rSmall = R / 1000;
  const small = (G.at(R + rSmall) - G.at(R - rSmall)) / (2 * R * rSmall);
  for (let i = 0; i < r.length; i++) {
    const ri = r[i]!;
    const average = ri < rSmall ? small : (G.at(R + ri) - G.at(Math.abs(R - ri))) / (2 * R * ri);
    out[i]! += count * average;
  }
}
