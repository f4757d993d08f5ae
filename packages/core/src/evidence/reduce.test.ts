import { expect, test } from 'vitest';
import { asColumns, syntheticScan } from '../../../../test/support/synthetic-scan.js';
import { readScan } from './read-scan.js';
import { reduce } from './reduce.js';

const base = syntheticScan('Fe', { shells: [{ n: 6, R: 2.0, sigma2: 0.005 }], noise: 0.001 });

/** The scan with points left out and values changed; e from the edge, eV. */
function changed(keep: (e: number, i: number) => boolean, value: (y: number, e: number) => number = (y) => y) {
  const kept = Array.from(base.energyEv.keys()).filter((i) => keep(base.energyEv[i]! - 7112, i));
  const energyEv = Float64Array.from(kept, (i) => base.energyEv[i]!);
  return readScan(asColumns({ energyEv, mu: energyEv.map((e, j) => value(base.mu[kept[j]!]!, e - 7112)) }), { element: 'Fe', edge: 'K' });
}
const all = () => true;

test.each([
  ['begins too late', changed((e) => e > -25), /begins 2\d eV before the edge at 711\d\.\d eV; 50 eV are needed/],
  ['begins above the edge', changed((e) => e > 10), /Fe K edge lies at 7112 eV, the scan runs from 7123/],
  ['ends too early', changed((e) => e < 80), /reaches k = 4\.\d Å⁻¹.*5 Å⁻¹ are needed/],
  ['has a gap at the edge', changed((e) => e < -20 || e > 30), /falls into a gap of the scan, 70\d\d\.\d to 71\d\d\.\d eV \(line \d+\)/],
  ['is constant', changed(all, () => 1), /does not rise/],
  ['falls', changed(all, (y) => -y), /does not rise/],
  [
    'rises more elsewhere',
    changed(all, (y, e) => y + (e > 400 ? 20 : 0)),
    /strongest rise is at 75\d\d\.\d eV, but the Fe K edge lies at 7112 eV/,
  ],
])('a scan that %s is refused in plain words', (_, scan, message) => {
  expect(() => reduce([scan])).toThrow(message);
});

test('units, offsets, slopes and direction of the scan change nothing', () => {
  const { chi } = reduce([changed(all)]);
  const same = [changed(all, (y) => 1e9 * y), changed(all, (y) => y - 5), changed(all, (y, e) => y + 0.003 * e)];
  for (const scan of same) {
    const other = reduce([scan]).chi;
    // 1e-4: E0 moves with the slope by some 1e-3 eV
    for (let i = 50; i < chi.length; i++) expect(Math.abs(other[i]! - chi[i]!)).toBeLessThan(1e-4);
  }
});

test('a sparse or short scan says so', () => {
  const codes = (scan: ReturnType<typeof changed>) => reduce([scan]).warnings.map(({ code }) => code);
  expect(codes(changed(all))).toEqual([]);
  expect(codes(changed((e) => e < 300 || e > 400))).toEqual(['sparse-points']);
  expect(codes(changed((e) => e < 160))).toContain('short-post-edge');
});

test('ready chi on the grid passes untouched; weights are taken off; kinds do not mix', () => {
  const text = (weight: number) =>
    `# k chi\n${Array.from({ length: 241 }, (_, i) => 2 + 0.05 * i)
      .map((k) => `${k} ${k ** weight * Math.sin(4 * k) * Math.exp(-0.01 * k * k)}`)
      .join('\n')}`;
  const ready = reduce([readScan(text(0))]);
  expect(ready.k[0]).toBeCloseTo(2, 9);
  for (let i = 0; i < ready.k.length; i++)
    expect(ready.chi[i]).toBeCloseTo(Math.sin(4 * ready.k[i]!) * Math.exp(-0.01 * ready.k[i]! ** 2), 10);
  const weighted = reduce([readScan(text(3), { chiWeight: 3 })]);
  for (let i = 0; i < ready.k.length; i++) expect(weighted.chi[i]).toBeCloseTo(ready.chi[i]!, 10);
  expect(ready.warnings.map(({ code }) => code)).toContain('ready-chi');
  expect(() => reduce([readScan(text(0)), changed(all)])).toThrow(/cannot be merged/);
  expect(() => reduce([])).toThrow(/a scan is needed/);
});

test('points that stick out are kept and listed, or left out when asked for, and listed', () => {
  const spoilt = (e: number) => (Math.abs(e - 300) < 4 ? 0.3 : 0);
  const clean = changed(all);
  const hit = Array.from(base.energyEv.keys()).filter((i) => spoilt(base.energyEv[i]! - 7112) !== 0);
  expect(hit.length).toBe(2); // neighbours, of which one pass finds the larger only
  const scan = changed(all, (y, e) => y + (base.energyEv[hit[0]!]! - 7112 === e ? 0.5 : spoilt(e)));
  const kept = reduce([scan]);
  expect(kept.flagged.length).toBeGreaterThan(0);
  expect(kept.flagged.every(({ leftOut, message }) => !leftOut && message.endsWith('it was kept'))).toBe(true);
  expect(kept.energyEv).toHaveLength(base.energyEv.length);
  const without = reduce([scan], { leaveOutFlagged: true });
  expect(without.flagged.map(({ energyEv }) => energyEv)).toEqual(hit.map((i) => base.energyEv[i]!));
  expect(without.flagged.every(({ leftOut, message, line }) => leftOut && message.endsWith('it was left out') && line! > 1)).toBe(true);
  expect(without.energyEv).toHaveLength(base.energyEv.length - hit.length);
  expect(without.choices.at(-1)).toEqual({ what: 'points that stick out', value: `${hit.length} left out, 0 kept`, why: 'given' });
  const truth = reduce([clean]);
  const off = ({ chi }: typeof kept) => Math.max(...chi.map((y, i) => (i < 50 ? 0 : Math.abs(y - truth.chi[i]!))));
  // Noise is 0.001 a point; what fills the gap is good to a few of it
  expect(off(without)).toBeLessThan(0.01);
  expect(off(kept)).toBeGreaterThan(0.1);
  // A first point that is off makes a good one stick out, which is kept
  const start = reduce([changed(all, (y, e) => y + (e === base.energyEv[0]! - 7112 ? 0.3 : 0))], { leaveOutFlagged: true });
  expect(start.flagged.map(({ energyEv, leftOut }) => [energyEv, leftOut])).toEqual([[base.energyEv[2]!, false]]);
  // Nothing sticks out, nothing is left out
  expect(reduce([clean], { leaveOutFlagged: true }).chi).toEqual(truth.chi);
});

test('every choice says whether it was given or why it is the default', () => {
  const reasons = (options: Parameters<typeof reduce>[1]) =>
    new Map(reduce([changed(all)], options).choices.map(({ what, why }) => [what, why]));
  for (const [, why] of reasons({})) expect(why).toMatch(/^default: .{15}|^steepest rise near the tabulated|^as the file/);
  const given = reasons({
    edge: 'K',
    e0: 7112,
    pre: [-140, -35],
    preForm: 'victoreen',
    post: [110, 700],
    postDegree: 2,
    normalisation: 'atomic',
    kMax: 12,
    backgroundBelow: 1,
    backgroundWeight: 2,
    leaveOutFlagged: false,
  });
  expect([...given.keys()]).toEqual([...reasons({}).keys()]);
  for (const [, why] of given) expect(why).toBe('given');
});
