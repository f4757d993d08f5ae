/** The scattering kernels against their slow plain references, and the stages of a prediction. `npx vitest bench --run test/bench/scattering` */
import { bench, describe } from 'vitest';
import { solveAtom } from '../../packages/core/src/atom/index.js';
import { siteSignal } from '../../packages/core/src/predict/site-signal.js';
import { SphereSolver } from '../../packages/core/src/scattering/phase-shifts.js';
import { RehrAlbers } from '../../packages/core/src/scattering/rehr-albers.js';
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import { plainAmplitude } from '../reference/angular-momentum.js';
import { plainT } from '../reference/radial-plain.js';
import { latticeSite } from '../support/lattice.js';

const half = 3.603 / 2;
const copper = (radius: number) =>
  latticeSite(
    [
      [0, half, half],
      [half, 0, half],
      [half, half, 0],
    ],
    [{ element: 'Cu', at: [0, 0, 0] }],
    radius + 7,
  );
const clock = () => ({ now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 });
const signal = (radius: number, maxLegs: number) =>
  siteSignal(copper(radius), { edge: 'K', selfEnergy: 'mean', radius, maxLegs, kMax: 15 }, clock());

describe('free atoms, self-consistent', () => {
  for (const Z of [8, 26, 79]) bench(`Z = ${Z}`, () => void solveAtom({ Z }));
});

describe('one phase shift, l = 2 (plain: 12 000 steps with objects)', () => {
  const V = (r: number) => ({ re: (-29 * Math.exp(-2.5 * r)) / r - 0.4, im: -0.1 * Math.exp(-r) });
  const n = Math.ceil(Math.log(2.4 / 1e-6) / 0.0125) + 1;
  const r = Float64Array.from({ length: n }, (_, i) => 2.4 * Math.exp(0.0125 * (i - n + 1)));
  const wave = {
    energy: 6,
    rVRe: r.map((x) => x * V(x).re),
    rVIm: r.map((x) => x * V(x).im),
    eRe: 6.4,
    eIm: 0.12,
    pRe: 3.5713,
    pIm: 0.0337,
  };
  const solver = new SphereSolver(r, 29, 20, 137.036);
  const t = [new Float64Array(21), new Float64Array(21)] as const;
  bench('twenty-one orders', () => solver.solve(wave, 20, t[0], t[1]));
  bench(
    'plain reference, one order',
    () =>
      void plainT(
        2,
        { potential: V, Z: 29, radius: 2.4, c: 137.036, energy: 6, e: { re: 6.4, im: 0.12 }, p: { re: 3.5713, im: 0.0337 } },
        12_000,
      ),
  );
});

describe('one triangle of copper', () => {
  const { table } = signal(2.6, 2);
  const triangle: readonly Vec3[] = [
    [0, 0, 0],
    [2.548, 0, 0],
    [1.274, 2.2066, 0],
  ];
  const out = [new Float64Array(table.k.length), new Float64Array(table.k.length)] as const;
  for (const terms of [6, 10, 15] as const) {
    bench(`${terms} terms, all k, matrices built`, () => new RehrAlbers(table, terms).amplitude(triangle, [0, 1, 1], out[0], out[1]));
  }
  const kept = new RehrAlbers(table);
  bench('6 terms, all k, matrices kept', () => kept.amplitude(triangle, [0, 1, 1], out[0], out[1]));
  const i = table.k.findIndex((k) => k > 5.9);
  const t = Array.from({ length: 10 }, (_, l) => ({
    re: table.spheres[1]!.tRe[i * (table.lMax + 1) + l]!,
    im: table.spheres[1]!.tIm[i * (table.lMax + 1) + l]!,
  }));
  bench('plain reference, l ≤ 9, one k', () => {
    plainAmplitude({
      positions: triangle.map((v) => v.map((x) => x / 0.529177)),
      t: [t, t],
      p: { re: table.pRe[i]!, im: table.pIm[i]! },
      l0: 1,
      absorber: { re: 1, im: 0 },
    });
  });
});

describe('copper, everything but the atoms', () => {
  for (const [radius, legs] of [
    [5, 2],
    [5, 4],
    [6, 4],
    [7, 4],
  ] as const)
    bench(`R = ${radius} Å, ${legs} legs`, () => void signal(radius, legs), { iterations: 3, time: 0, warmupIterations: 1 });
});
