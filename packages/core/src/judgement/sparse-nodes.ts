/**
 * Smooth functions on a grid from a few of its points: every sixth is a node, the others follow by the cubic through the four nearest
 * nodes (Lagrange). For a factor exp(a(x)) the error is 0.023 (Δa)⁴ of its size, Δa the change of a from node to node: 3e-5 for the
 * disorder factors of site-terms.ts, whose exponents change by 0.2 over 0.3 Å⁻¹ at most.
 */

const SPACING = 6;

export class SparseNodes {
  /** Grid indices of the nodes, rising, the first and the last point among them (M). */
  readonly at: Int32Array;
  /** For every grid point its first node, and the weights of four nodes from there, row-major (n, 4). */
  readonly first: Int32Array;
  readonly weights: Float64Array;

  /** @param n  points of the grid, at least 4 */
  constructor(n: number) {
    const intervals = Math.max(3, Math.ceil((n - 1) / SPACING));
    this.at = Int32Array.from({ length: intervals + 1 }, (_, m) => Math.round((m * (n - 1)) / intervals));
    this.first = new Int32Array(n);
    this.weights = new Float64Array(4 * n);
    let interval = 0;
    for (let i = 0; i < n; i++) {
      while (interval < intervals - 1 && this.at[interval + 1]! <= i) interval++;
      const start = Math.min(Math.max(0, interval - 1), intervals - 3);
      this.first[i] = start;
      for (let a = 0; a < 4; a++) {
        let weight = 1;
        for (let b = 0; b < 4; b++) {
          if (a !== b) weight *= (i - this.at[start + b]!) / (this.at[start + a]! - this.at[start + b]!);
        }
        this.weights[4 * i + a] = weight;
      }
    }
  }
}
