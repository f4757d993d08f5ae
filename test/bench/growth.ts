/**
 * How paths grow: time, memory and number of paths against radius, legs, atoms and terms. `npx tsx --conditions=source --expose-gc
 * test/bench/growth.ts` prints a table; the machine's own speed drops out in the last column, a ratio to the first row.
 */
import { freeAtom } from '../../packages/core/src/atom/index.js';
import { enumeratePaths } from '../../packages/core/src/paths/index.js';
import { siteScattering } from '../../packages/core/src/predict/site-signal.js';
import { PathAmplitudes, selectPaths } from '../../packages/core/src/scattering/index.js';
import type { Site, Vec3 } from '../../packages/core/src/structure/types.js';
import { latticeSite } from '../support/lattice.js';
import { seededRandom } from '../support/random.js';

const half = 3.603 / 2;
const copper = (radius: number): Site =>
  latticeSite(
    [
      [0, half, half],
      [half, 0, half],
      [half, half, 0],
    ],
    [{ element: 'Cu', at: [0, 0, 0] }],
    radius,
  );

/** Atoms thrown at random around an iron, none nearer than 1.4 Å to another, as dense as protein (0.05 heavy atoms per Å³). Invented. */
function cluster(count: number): Site {
  const random = seededRandom(11);
  const reach = Math.cbrt((3 * count) / (4 * Math.PI * 0.05));
  const positions: Vec3[] = [[0, 0, 0]];
  while (positions.length < count) {
    const p: Vec3 = [reach * (2 * random() - 1), reach * (2 * random() - 1), reach * (2 * random() - 1)];
    if (Math.hypot(...p) > reach) continue;
    if (positions.some((q, i) => Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]) < (i === 0 ? 2 : 1.4))) continue;
    positions.push(p);
  }
  const elements = ['C', 'C', 'C', 'N', 'O', 'S'];
  const atoms = positions.map((position, source) => ({
    element: source === 0 ? 'Fe' : elements[source % (source % 40 === 5 ? 6 : 5)]!,
    name: 'X',
    position,
    distance: Math.hypot(...position),
    occupancy: 1,
    source,
    symmetry: 'x,y,z',
  }));
  atoms.sort((a, b) => a.distance - b.distance);
  return { label: 'Fe', element: 'Fe', weight: 1, atoms, radius: Number.POSITIVE_INFINITY, periodic: false, diagnostics: [] };
}

const collect = (globalThis as { gc?: () => void }).gc ?? (() => {});
let first = 0;

function row(name: string, site: Site, radius: number, maxLegs: number, terms: 6 | 10 | 15): void {
  const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  const { table, kindOfAtom } = siteScattering(site, { edge: 'K', selfEnergy: 'mean', radius, maxLegs, kMax: 15 }, clock);
  collect();
  const before = process.memoryUsage().rss;
  const t0 = performance.now();
  const all = enumeratePaths({ site, kindOfAtom, radius, maxLegs });
  const t1 = performance.now();
  const { kept, neglected } = selectPaths(table, site, kindOfAtom, all, 0.003, { terms });
  const t2 = performance.now();
  const amplitudes = new PathAmplitudes(table, site, kindOfAtom, { terms });
  const out = [new Float64Array(table.k.length), new Float64Array(table.k.length)] as const;
  for (const path of kept) amplitudes.of(path, out[0], out[1]);
  const t3 = performance.now();
  const grown = (process.memoryUsage().rss - before) / 2 ** 20;
  const routes = all.reduce((sum, { members }) => sum + members.length, 0);
  first ||= t3 - t0;
  const seconds = (from: number, to: number): string => ((to - from) / 1000).toFixed(2).padStart(6);
  console.log(
    `${name.padEnd(34)} ${String(routes).padStart(8)} routes ${String(all.length).padStart(7)} groups ${String(kept.length).padStart(5)} kept, out ≤ ${(100 * neglected).toFixed(1).padStart(4)} %; find ${seconds(t0, t1)} weigh ${seconds(t1, t2)} compute ${seconds(t2, t3)} s, ${String(Math.round(kept.length / ((t3 - t2) / 1000))).padStart(5)} paths/s, +${grown.toFixed(0).padStart(4)} MiB, × ${((t3 - t0) / first).toFixed(1)}`,
  );
}

for (const Z of [6, 7, 8, 16, 26, 29]) freeAtom(Z);
for (const radius of [5, 6, 7, 8]) row(`copper, ${radius} Å, 4 legs, 6 terms`, copper(radius + 7), radius, 4, 6);
for (const legs of [2, 3, 4, 5]) row(`copper, 6 Å, ${legs} legs, 6 terms`, copper(13), 6, legs, 6);
for (const terms of [6, 10, 15] as const) row(`copper, 7 Å, 4 legs, ${terms} terms`, copper(14), 7, 4, terms);
for (const count of [20, 200, 2000]) row(`random cluster of ${count}, 5 Å, 4 legs`, cluster(count), 5, 4, 6);
row('random cluster of 2000, 6 Å, 4 legs', cluster(2000), 6, 4, 6);
