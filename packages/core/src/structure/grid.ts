/**
 * Neighbour search in cells: points are sorted into bins once (counting sort), a query walks only the bins its sphere touches.
 * One code for molecules, slabs and crystals: along a repeating axis the bins go round and carry the lattice translation with them,
 * so a sphere larger than the cell is as good as a small one. Building is linear in the points, a query in the points it finds.
 */
import { type CellGeometry, transform } from './cell.js';
import type { Vec3 } from './types.js';

export type Visit = (index: number, shift: Vec3, x: number, y: number, z: number, distanceSquared: number) => void;

/** Points a bin holds on average: fewer cost empty bins, more cost distances computed in vain. */
const POINTS_PER_BIN = 4;

export class NeighbourGrid {
  private readonly bins: [number, number, number];
  private readonly lows: [number, number, number];
  private readonly spans: [number, number, number];
  private readonly starts: Int32Array;
  private readonly order: Int32Array;
  private readonly positions: Float64Array;
  private readonly geometry: CellGeometry;
  private readonly repeats: readonly [boolean, boolean, boolean];

  /**
   * @param fractional  (3n) coordinates; within [0, 1] along repeating axes, anywhere along others
   */
  constructor(fractional: Float64Array, geometry: CellGeometry, repeats: readonly [boolean, boolean, boolean]) {
    this.geometry = geometry;
    this.repeats = repeats;
    const n = fractional.length / 3;
    this.lows = [0, 0, 0];
    this.spans = [1, 1, 1];
    for (let axis = 0; axis < 3; axis++) {
      if (repeats[axis]) continue;
      let low = Infinity;
      let high = -Infinity;
      for (let i = axis; i < fractional.length; i += 3) {
        low = Math.min(low, fractional[i]!);
        high = Math.max(high, fractional[i]!);
      }
      this.lows[axis] = n ? low : 0;
      this.spans[axis] = n ? Math.max(high - low, 1e-6) : 1;
    }
    const thickness = this.spans.map((span, axis) => span / geometry.reciprocal[axis]!); // Å between opposite faces
    const width = Math.max(0.5, Math.cbrt((POINTS_PER_BIN * thickness[0]! * thickness[1]! * thickness[2]!) / Math.max(n, 1)));
    // No axis gets more bins than there are points: an atom a metre away must not cost a million empty bins.
    this.bins = thickness.map((t) => Math.min(Math.max(1, Math.floor(t / width)), Math.max(n, 1))) as [number, number, number];
    while (this.bins[0] * this.bins[1] * this.bins[2] > 2 * n + 8) {
      const longest = this.bins.indexOf(Math.max(...this.bins));
      this.bins[longest] = Math.max(1, this.bins[longest]! >> 1);
    }

    const binOf = new Int32Array(n);
    this.starts = new Int32Array(this.bins[0] * this.bins[1] * this.bins[2] + 1);
    this.positions = new Float64Array(3 * n);
    const A = geometry.toCartesian;
    for (let i = 0; i < n; i++) {
      const [u, v, w] = [fractional[3 * i]!, fractional[3 * i + 1]!, fractional[3 * i + 2]!];
      for (let row = 0; row < 3; row++) this.positions[3 * i + row] = A[3 * row]! * u + A[3 * row + 1]! * v + A[3 * row + 2]! * w;
      const bin = (this.binAlong(0, u) * this.bins[1] + this.binAlong(1, v)) * this.bins[2] + this.binAlong(2, w);
      binOf[i] = bin;
      this.starts[bin + 1]!++;
    }
    for (let bin = 1; bin < this.starts.length; bin++) this.starts[bin]! += this.starts[bin - 1]!;
    this.order = new Int32Array(n);
    const next = this.starts.slice();
    for (let i = 0; i < n; i++) this.order[next[binOf[i]!]!++] = i;
  }

  private binAlong(axis: 0 | 1 | 2, f: number): number {
    const bin = Math.floor(((f - this.lows[axis]) / this.spans[axis]) * this.bins[axis]);
    return Math.max(0, Math.min(this.bins[axis] - 1, bin));
  }

  /** Calls `visit` for every point and lattice copy within `radius` (Å) of `centre` (Cartesian, Å), the centre's own point included. */
  visit(centre: Vec3, radius: number, visit: Visit): void {
    const { bins, lows, spans, repeats, starts, order, positions, geometry } = this;
    const A = geometry.toCartesian;
    const f = transform(geometry.toFractional, centre);
    const first = [0, 0, 0];
    const last = [0, 0, 0];
    for (let axis = 0; axis < 3; axis++) {
      const reach = radius * geometry.reciprocal[axis]! + 1e-9; // points on a bin's wall are found from both sides
      const scale = bins[axis]! / spans[axis]!;
      first[axis] = Math.floor((f[axis]! - reach - lows[axis]!) * scale);
      last[axis] = Math.floor((f[axis]! + reach - lows[axis]!) * scale);
      if (repeats[axis]) continue;
      first[axis] = Math.max(0, Math.min(bins[axis]! - 1, first[axis]!));
      last[axis] = Math.max(0, Math.min(bins[axis]! - 1, last[axis]!));
    }
    const limit = radius * radius;
    for (let i = first[0]!; i <= last[0]!; i++) {
      const si = Math.floor(i / bins[0]);
      for (let j = first[1]!; j <= last[1]!; j++) {
        const sj = Math.floor(j / bins[1]);
        for (let k = first[2]!; k <= last[2]!; k++) {
          const sk = Math.floor(k / bins[2]);
          const bin = ((i - si * bins[0]) * bins[1] + (j - sj * bins[1])) * bins[2] + (k - sk * bins[2]);
          const from = starts[bin]!;
          const to = starts[bin + 1]!;
          if (from === to) continue;
          const tx = A[0]! * si + A[1]! * sj + A[2]! * sk;
          const ty = A[3]! * si + A[4]! * sj + A[5]! * sk;
          const tz = A[6]! * si + A[7]! * sj + A[8]! * sk;
          for (let at = from; at < to; at++) {
            const index = order[at]!;
            const x = positions[3 * index]! + tx;
            const y = positions[3 * index + 1]! + ty;
            const z = positions[3 * index + 2]! + tz;
            const d2 = (x - centre[0]) ** 2 + (y - centre[1]) ** 2 + (z - centre[2]) ** 2;
            if (d2 <= limit) visit(index, [si, sj, sk], x, y, z, d2);
          }
        }
      }
    }
  }
}
