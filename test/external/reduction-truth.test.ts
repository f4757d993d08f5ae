// Reduction against a known truth: absorption of real atoms (data/atomic-absorption.csv names its source) times an invented chi.
import { describe, expect, test } from 'vitest';
import { backgroundProjector, type ReduceOptions, readScan, reduce } from '../../packages/core/src/evidence/index.js';
import { backTransform, compareInR, fourierTransform } from '../../packages/core/src/spectrum/index.js';
import { expectNear } from '../support/expect-near.js';
import { ATOMS, type AtomName, asColumns, type SyntheticSettings, syntheticScan, truthOnGrid } from '../support/synthetic-scan.js';

const SHELLS = [
  { n: 6, R: 2.0, sigma2: 0.005 },
  { n: 2, R: 2.7, sigma2: 0.004 },
  { n: 6, R: 3.4, sigma2: 0.007 },
];

function reduced(atom: AtomName, settings: Partial<SyntheticSettings> = {}, options: ReduceOptions = {}) {
  const text = asColumns(syntheticScan(atom, { shells: SHELLS, ...settings }));
  const result = reduce([readScan(text, { element: atom, edge: ATOMS[atom].edge })], options);
  const { k, background } = result;
  const project = backgroundProjector(k, background);
  const truth = project.apply(truthOnGrid(k.at(-1)!, settings.shells ?? SHELLS));
  return { ...result, projected: project.apply(result.chi), truth };
}

const rms = (x: Float64Array) => Math.sqrt(x.reduce((sum, v) => sum + v * v, 0) / x.length);

/** Shift in distance of the first shell: half the slope of the phase difference of the back-transformed peaks, k 4 to 1.5 before the window ends. */
function distanceBias(k: Float64Array, chi: Float64Array, truth: Float64Array): number {
  const settings = { kWeight: 2, kMin: 3, kMax: Math.min(14, k.at(-1)!) };
  const phase = (x: Float64Array) =>
    backTransform(fourierTransform({ k, chi: x, ...settings }), { window: 'hann', kMin: 0.9, kMax: 2.1, sill: 0.2 }, settings.kMax - 1.5);
  const [a, b] = [phase(chi), phase(truth)];
  let [sw, sx, sy, sxx, sxy] = [0, 0, 0, 0, 0];
  for (let i = 80; i < a.k.length; i++) {
    const re = a.imaginary[i]! * b.imaginary[i]! + a.real[i]! * b.real[i]!;
    const im = a.real[i]! * b.imaginary[i]! - a.imaginary[i]! * b.real[i]!;
    const w = Math.hypot(re, im);
    const y = Math.atan2(im, re);
    const x = a.k[i]!;
    sw += w;
    sx += w * x;
    sy += w * y;
    sxx += w * x * x;
    sxy += w * x * y;
  }
  return (sw * sxy - sx * sy) / (sw * sxx - sx * sx) / 2;
}

describe.each(['Fe', 'Zn', 'Pt'] as const)('%s', (atom) => {
  test('edge energy and step', () => {
    const { e0, edgeStep } = reduced(atom);
    expectNear(e0, ATOMS[atom].e0, { abs: 0.3, label: 'E0, eV' }); // the scan's step at the edge is 0.5 eV
    expectNear(edgeStep, 1, { rel: 0.01, label: 'edge step' }); // wanted: within 1 %
  });

  test('chi without noise', () => {
    const { k, projected, truth } = reduced(atom);
    const { rFactor } = compareInR({ k, data: truth, model: projected, kWeight: 2, kMin: 3, kMax: 14, rMin: 1, rMax: 4 });
    expect(rFactor).toBeLessThan(1e-3); // 3 % in amplitude: the step's 1 % and the difference between a(E) and this atom's own fall
    expectNear(distanceBias(k, projected, truth), 0, { abs: 0.003, label: 'distance bias, Å' });
  });

  test.each([0.0005, 0.002, 0.005])('chi at a noise of %d', (noise) => {
    const { k, projected, truth, sigmaChi } = reduced(atom, { noise, seed: 7 });
    const from = 50; // k = 2.5
    const to = k.length - 20; // the last 1 Å⁻¹ is where the background's window fades
    const difference = rms(projected.map((x, i) => x - truth[i]!).slice(from, to));
    const expected = rms(sigmaChi.slice(from, to));
    const systematic = 0.03 * rms(truth.slice(from, to)); // measured without noise, above
    expect(difference).toBeLessThan(1.15 * Math.hypot(expected, systematic)); // 15 %: wanted accuracy of the noise estimate
  });
});

test.each([
  ['R_low 0.7', {}, { backgroundBelow: 0.7 }],
  ['R_low 1.1', {}, { backgroundBelow: 1.1 }],
  ['pre-edge −120 … −40', {}, { pre: [-120, -40] }],
  ['Victoreen pre-edge', {}, { preForm: 'victoreen' }],
  ['post-edge 150 … 700', {}, { post: [150, 700] }],
  ['cubic post-edge', {}, { postDegree: 3 }],
  ['fine sampling', { dk: 0.025 }, {}],
  ['coarse sampling', { dk: 0.07 }, {}],
  ['short data', { kMax: 11 }, {}],
  ['noise 0.1 %', { noise: 0.001 }, {}],
] as [string, Partial<SyntheticSettings>, ReduceOptions][])('first-shell distance, %s', (_, settings, options) => {
  const { k, projected, truth, edgeStep } = reduced('Fe', settings, options);
  expectNear(distanceBias(k, projected, truth), 0, { abs: 0.003, label: 'distance bias, Å' });
  expectNear(edgeStep, 1, { rel: 0.015, label: 'edge step' });
});

test('the constant step lowers chi at high k, as it should', () => {
  const atomic = reduced('Fe').chi;
  const constant = reduced('Fe', {}, { normalisation: 'constant' }).chi;
  const ratio = (at: number) => rms(constant.slice(at - 10, at + 10)) / rms(atomic.slice(at - 10, at + 10));
  expectNear(ratio(100), (1 + 95.25 / 7112) ** -2.7, { rel: 0.02, label: 'at k = 5' });
  expectNear(ratio(240), (1 + 548.6 / 7112) ** -2.7, { rel: 0.02, label: 'at k = 12' });
});

test('noise is recovered within 15 %', () => {
  for (const noise of [0.001, 0.004]) {
    for (const dk of [0.05, 0.025]) {
      let ratio = 0;
      const seeds = [11, 12, 13, 14, 15, 16];
      const quiet = reduced('Fe', { dk });
      for (const seed of seeds) {
        const noisy = reduced('Fe', { noise, seed, dk }, { e0: quiet.e0, backgroundBelow: quiet.background.rLow });
        const settings = { kWeight: 2, kMin: 3, kMax: quiet.k.at(-1)! };
        const { R, real, imaginary } = fourierTransform({ k: quiet.k, chi: noisy.chi.map((x, i) => x - quiet.chi[i]!), ...settings });
        let power = 0;
        let count = 0;
        R.forEach((r, m) => {
          if (r < 1.2 || r > 5) return;
          power += real[m]! ** 2 + imaginary[m]! ** 2;
          count += 2;
        });
        ratio += noisy.noise.epsilonR / Math.sqrt(power / count) / seeds.length;
      }
      expectNear(ratio, 1, { abs: 0.15, label: `estimated over true noise, ${noise}, dk ${dk}` });
    }
  }
});

test('sigmaChi is the scatter that noise makes, at low and at high k', () => {
  const quiet = reduced('Fe');
  const noise = 0.002;
  const seeds = Array.from({ length: 10 }, (_, s) => 30 + s);
  const noisy = seeds.map((seed) => reduced('Fe', { noise, seed }, { e0: quiet.e0, backgroundBelow: quiet.background.rLow }));
  for (const [from, to] of [
    [60, 140],
    [200, 270],
  ] as const) {
    const scatter = rms(Float64Array.from(noisy.map(({ chi }) => rms(chi.map((x, i) => x - quiet.chi[i]!).slice(from, to)))));
    const said = rms(Float64Array.from(noisy.map(({ sigmaChi }) => rms(sigmaChi.slice(from, to)))));
    expectNear(said / scatter, 1, { abs: 0.2, label: `said over found, k ${from * 0.05} to ${to * 0.05}` }); // 15 % wanted of the level, 10 % for its course
  }
});

test('the largest useful k is where the shell sinks into the noise', () => {
  // One shell; between 1 and 5 Å lies 4/31.4 of the noise power, 2 · 0.127 ε² against amplitude²: they meet where A(k) = 0.5 ε, for
  // ε = 0.03 at A = 0.015, k = 14.6; five times that noise meets A = 0.076 at k = 9.2. ±15 %: some 20 independent values a mean, four seeds
  const useful = (noise: number) => {
    const found = [1, 2, 3, 4].map(
      (seed) => reduced('Fe', { noise, seed, shells: SHELLS.slice(0, 1) }, { backgroundBelow: 0.8 }).noise.kMaxUseful,
    );
    return found.reduce((sum, k) => sum + k, 0) / found.length;
  };
  expectNear(useful(0.03), 14.6, { rel: 0.15, label: 'at 3 % noise' });
  expectNear(useful(0.15), 9.2, { rel: 0.15, label: 'at 15 % noise' });
  expect(useful(0.001)).toBeGreaterThan(15);
});

test('moving a range by one point changes chi by less than the noise', () => {
  const noise = 0.001;
  const base = reduced('Fe', { noise });
  const from = 50;
  const sigma = rms(base.sigmaChi.slice(from));
  const moves: [string, ReduceOptions, ReduceOptions][] = [
    ['pre-edge begins', { pre: [-150, -30] }, { pre: [-145, -30] }],
    ['pre-edge ends', { pre: [-150, -30] }, { pre: [-150, -35] }],
    ['post-edge begins', { post: [100, 800] }, { post: [102, 800] }],
    ['post-edge ends', { post: [100, 800] }, { post: [100, 794] }],
    ['R_low', { backgroundBelow: 0.85 }, { backgroundBelow: 0.88 }],
    ['k_max', { kMax: 14 }, { kMax: 13.95 }],
  ];
  for (const [what, before, after] of moves) {
    const [a, b] = [reduced('Fe', { noise }, before).chi, reduced('Fe', { noise }, after).chi];
    const to = Math.min(a.length, b.length) - 20;
    expect(rms(a.slice(from, to).map((x, i) => x - b[from + i]!)), what).toBeLessThan(sigma);
  }
});

test('repeated scans: shifts found, noise from their scatter', () => {
  const wanted = [0, 0.3, -0.2, 0.1];
  const scans = wanted.map((shift, s) => {
    const text = asColumns(syntheticScan('Fe', { shells: SHELLS, noise: 0.001, seed: 20 + s, shift }));
    return readScan(text, { element: 'Fe', edge: 'K' });
  });
  const merged = reduce(scans);
  merged.scans.forEach(({ shiftEv }, s) => {
    expectNear(shiftEv.value, wanted[s]!, { abs: 0.02, label: `shift of scan ${s + 1}` }); // four standard errors at this noise
  });
  const single = reduce(scans.slice(0, 1));
  // Four scans halve the noise; 25 %: two estimates of 10 % each
  expectNear(merged.noise.epsilonR / single.noise.epsilonR, 0.5, { rel: 0.25, label: 'noise of four scans over one' });
  expectNear(merged.noise.epsilonRRepeats! / merged.noise.epsilonRHigh, 1, { rel: 0.25, label: 'the two estimates' });
});
