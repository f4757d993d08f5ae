/**
 * Polarised amplitudes. Against the full angular-momentum expansion with dipole matrix elements by 3j symbols (DLMF 34.3.22); against
 * the mean over directions; and the far, fast limit of the K edge, 3 cos²θ (Heald & Stern, Phys. Rev. B 16, 5549 (1977); from memory).
 */
import { beforeAll, expect, test } from 'vitest';
import { siteSignal } from '../../packages/core/src/predict/site-signal.js';
import { RehrAlbers, type RehrAlbersTerms } from '../../packages/core/src/scattering/rehr-albers.js';
import type { ScatteringTable } from '../../packages/core/src/scattering/types.js';
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import { plainAmplitude } from '../reference/angular-momentum.js';
import { expectNear } from '../support/expect-near.js';
import { latticeSite } from '../support/lattice.js';
import { seededRandom } from '../support/random.js';

const BOHR = 0.529177210544;
const L_CUT: Readonly<Record<number, number>> = { 3: 9, 6: 11, 10: 15 };
const D = 2.5477;
const tables = new Map<'K' | 'L3', ScatteringTable>();

beforeAll(() => {
  const half = 3.603 / 2;
  const site = latticeSite(
    [
      [0, half, half],
      [half, 0, half],
      [half, half, 0],
    ],
    [{ element: 'Cu', at: [0, 0, 0] }],
    9.6,
  );
  for (const edge of ['K', 'L3'] as const) {
    const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
    const { table } = siteSignal(site, { edge, selfEnergy: 'mean', radius: 2.6, maxLegs: 2, kMax: 12 }, clock);
    const width = table.lMax + 1;
    const keep = (values: Float64Array) =>
      values.map((value, i) => (i % width <= (L_CUT[Math.round(table.k[Math.floor(i / width)]!)] ?? 15) ? value : 0));
    tables.set(edge, { ...table, spheres: table.spheres.map((s) => ({ element: s.element, tRe: keep(s.tRe), tIm: keep(s.tIm) })) });
  }
});

const tensor = (e: Vec3): Float64Array => Float64Array.from(e.flatMap((x) => e.map((y) => x * y)));
const unit = (v: Vec3): Vec3 => v.map((x) => x / Math.hypot(...v)) as unknown as Vec3;
const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];

function own(edge: 'K' | 'L3', positions: readonly Vec3[], terms: RehrAlbersTerms, light?: Float64Array) {
  const table = tables.get(edge)!;
  const re = new Float64Array(table.k.length);
  const im = new Float64Array(table.k.length);
  const spheres = positions.map((_, i) => (i === 0 ? 0 : 1));
  new RehrAlbers(table, terms).amplitude(positions, spheres, re, im, light);
  return (k: number) => {
    const i = table.k.findIndex((value) => Math.abs(value - k) < 1e-6);
    return { re: re[i]!, im: im[i]! };
  };
}

function plain(edge: 'K' | 'L3', positions: readonly Vec3[], k: number, polarisation?: Vec3) {
  const table = tables.get(edge)!;
  const i = table.k.findIndex((value) => Math.abs(value - k) < 1e-6);
  const t = Array.from({ length: L_CUT[k]! + 1 }, (_, l) => ({
    re: table.spheres[1]!.tRe[i * (table.lMax + 1) + l]!,
    im: table.spheres[1]!.tIm[i * (table.lMax + 1) + l]!,
  }));
  return plainAmplitude({
    positions: positions.map((v) => v.map((x) => x / BOHR)),
    t: positions.slice(1).map(() => t),
    p: { re: table.pRe[i]!, im: table.pIm[i]! },
    l0: table.channels[0]!.l0,
    absorber: { re: table.channels[0]!.re[i]!, im: table.channels[0]!.im[i]! },
    ...(polarisation ? { polarisation } : {}),
  });
}

const DIRECTIONS: readonly Vec3[] = [[0, 0, 1], unit([1, 0.4, -0.3]), unit([-0.2, 1, 0.8])];
const ROUTES: Readonly<Record<string, { positions: readonly Vec3[]; allowed: number }>> = {
  'two legs along an odd direction': {
    positions: [
      [0, 0, 0],
      [0.6 * D, 0.64 * D, 0.48 * D],
    ],
    allowed: 1e-8,
  },
  // Fifteen terms, as for the mean over directions (multiple-scattering.test.ts): below 0.6 % for these shapes.
  collinear: {
    positions: [
      [0, 0, 0],
      [D, 0, 0],
      [2 * D, 0, 0],
    ],
    allowed: 0.006,
  },
  triangle: {
    positions: [
      [0, 0, 0],
      [D, 0, 0],
      [D / 2, (D * Math.sqrt(3)) / 2, 0],
    ],
    allowed: 0.006,
  },
  'first and last leg at right angles': {
    positions: [
      [0, 0, 0],
      [0, 0, D],
      [D, 0, 0],
    ],
    allowed: 0.006,
  },
};

for (const edge of ['K', 'L3'] as const) {
  for (const [name, { positions, allowed }] of Object.entries(ROUTES)) {
    test(`${edge}, ${name}: each direction of the electric vector as in the full expansion`, () => {
      for (const k of [3, 6]) {
        // A direction that a route hardly answers to has a small amplitude of cancelling parts: errors count against the largest.
        const wanted = DIRECTIONS.map((e) => plain(edge, positions, k, e));
        const size = Math.max(...wanted.map(({ re, im }) => Math.hypot(re, im)));
        DIRECTIONS.forEach((e, i) => {
          const got = own(edge, positions, 19, tensor(e))(k);
          const error = Math.hypot(got.re - wanted[i]!.re, got.im - wanted[i]!.im) / size;
          expect(error, `k = ${k}, direction ${i}`).toBeLessThan(allowed);
        });
      }
    });
  }
}

test('the mean over three axes at right angles is the unpolarised amplitude, for every route, term number and frame', () => {
  const random = seededRandom(5);
  const at = (): Vec3 => [4 * random() - 2, 4 * random() - 2, 4 * random() - 2].map((x) => x + Math.sign(x)) as unknown as Vec3;
  for (const edge of ['K', 'L3'] as const) {
    for (let trial = 0; trial < 4; trial++) {
      const route: Vec3[] = [[0, 0, 0], at(), at(), ...(trial % 2 ? [at()] : [])];
      const e1 = unit(at());
      const helper = unit(at());
      const e2 = unit(helper.map((x, i) => x - dot(helper, e1) * e1[i]!) as unknown as Vec3);
      const e3: Vec3 = [e1[1] * e2[2] - e1[2] * e2[1], e1[2] * e2[0] - e1[0] * e2[2], e1[0] * e2[1] - e1[1] * e2[0]];
      const parts = [e1, e2, e3].map((e) => own(edge, route, 6, tensor(e)));
      const mean = own(edge, route, 6);
      const all = own(edge, route, 6, Float64Array.of(1 / 3, 0, 0, 0, 1 / 3, 0, 0, 0, 1 / 3));
      for (const k of [3, 6, 10]) {
        const size = Math.hypot(mean(k).re, mean(k).im);
        for (const part of ['re', 'im'] as const) {
          const sum = parts.reduce((total, amplitude) => total + amplitude(k)[part] / 3, 0);
          // The unpolarised matrices round their cosines to 1e-9.
          expectNear(sum, mean(k)[part], { abs: 1e-6 * size, label: `${edge}, route ${trial}, k = ${k}` });
          expectNear(all(k)[part], mean(k)[part], { abs: 1e-6 * size, label: `${edge}, a third of unity, k = ${k}` });
        }
      }
    }
  }
});

test('single scattering, far and fast: K edge 3 cos²θ, L3 edge (1 + 3 cos²θ)/2', () => {
  const far: Vec3[] = [
    [0, 0, 0],
    [0, 0, 40],
  ];
  for (const [edge, law] of [
    ['K', (c: number) => 3 * c * c],
    ['L3', (c: number) => 0.5 * (1 + 3 * c * c)],
  ] as const) {
    const mean = own(edge, far, 19)(10);
    for (const c of [1, 0.8, 0.3, 0]) {
      const got = own(edge, far, 19, tensor([Math.sqrt(1 - c * c), 0, c]))(10);
      // What is left falls as 1/(pR)².
      expectNear(Math.hypot(got.re, got.im) / Math.hypot(mean.re, mean.im), law(c), { abs: 0.01, label: `${edge}, cos θ = ${c}` });
    }
  }
});
