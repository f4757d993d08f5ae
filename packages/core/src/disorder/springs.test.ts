import fc from 'fast-check';
import { EigenvalueDecomposition } from 'ml-matrix';
import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { atomAt, crystals, MASS, molecules, routeTo, shellsOf } from '../../../../test/support/spring-bodies.js';
import type { Site, Structure, Vec3 } from '../structure/types.js';
import { bodyModes, forEachOverlap, massWeightedHessian, type Pull, rigidMotions } from './normal-modes.js';
import { occupation } from './oscillator.js';
import { recursion } from './recursion.js';
import { springBodyOf, springBodyOfCrystal, springBodyOfSite } from './spring-body.js';
import { orderedUff } from './spring-forms.js';
import { type SpringBody, springTerms } from './spring-terms.js';
import { springNetwork } from './springs.js';
import type { ThermalVertex } from './types.js';

/** A bent, branched molecule without symmetry: iron, ligands by O, N and S, carbons behind them. */
const branched: SpringBody = {
  atoms: [
    atomAt('Fe', [0, 0, 0]),
    atomAt('O', [1.95, 0.1, 0.2]),
    atomAt('C', [2.7, 1.1, 0.4]),
    atomAt('O', [2.2, 2.3, 0.5]),
    atomAt('C', [4.2, 0.9, 0.6]),
    atomAt('S', [-1.1, 1.9, 0.3]),
    atomAt('C', [-2.8, 1.6, 0.9]),
    atomAt('N', [-0.8, -1.1, 1.6]),
    atomAt('C', [-1.9, -1.9, 1.7]),
    atomAt('N', [-0.3, -0.9, -1.9]),
  ],
};
const route = (body: SpringBody, ...indices: number[]): ThermalVertex[] => indices.map((atom) => ({ atom, ...body.atoms[atom]! }));
const turned = (body: SpringBody, [w, x, y, z]: readonly number[], by: Vec3): SpringBody => {
  const R = [
    [1 - 2 * (y! * y! + z! * z!), 2 * (x! * y! - w! * z!), 2 * (x! * z! + w! * y!)],
    [2 * (x! * y! + w! * z!), 1 - 2 * (x! * x! + z! * z!), 2 * (y! * z! - w! * x!)],
    [2 * (x! * z! - w! * y!), 2 * (y! * z! + w! * x!), 1 - 2 * (x! * x! + y! * y!)],
  ];
  return {
    atoms: body.atoms.map((a) => ({
      ...a,
      position: R.map((r, i) => r[0]! * a.position[0] + r[1]! * a.position[1] + r[2]! * a.position[2] + by[i]!) as unknown as Vec3,
    })),
  };
};

test('every term is a derivative: the coordinate it stands for changes by B·u', () => {
  // Torsions and bends by finite differences of the angle itself, over all terms of the branched molecule.
  const terms = springTerms(branched, orderedUff);
  const value = (positions: readonly (readonly number[])[]): number => {
    const sub = (a: readonly number[], b: readonly number[]) => a.map((x, i) => x - b[i]!);
    const dot = (a: readonly number[], b: readonly number[]) => a.reduce((s, x, i) => s + x * b[i]!, 0);
    const cross = (a: readonly number[], b: readonly number[]) =>
      [0, 1, 2].map((i) => a[(i + 1) % 3]! * b[(i + 2) % 3]! - a[(i + 2) % 3]! * b[(i + 1) % 3]!);
    const length = (a: readonly number[]) => Math.sqrt(dot(a, a));
    const [p, q, r, s] = positions;
    if (positions.length === 2) return length(sub(q!, p!));
    if (positions.length === 3) return Math.acos(dot(sub(p!, q!), sub(r!, q!)) / length(sub(p!, q!)) / length(sub(r!, q!)));
    const [b1, b2, b3] = [sub(q!, p!), sub(r!, q!), sub(s!, r!)];
    return Math.atan2(length(b2) * dot(b1, cross(b2, b3)), dot(cross(b1, b2), cross(b2, b3)));
  };
  let kinds = 0;
  for (const { positions, b, atoms } of terms) {
    kinds |= 1 << atoms.length;
    const at = (index: number, h: number) =>
      value(atoms.map((_, a) => [0, 1, 2].map((c) => positions[3 * a + c]! + (3 * a + c === index ? h : 0))));
    const signs = Array.from(b, (x, i) => ({ x, slope: (at(i, 1e-5) - at(i, -1e-5)) / 2e-5 }));
    const sign = Math.sign(signs.reduce((s, { x, slope }) => s + x * slope, 0)); // the sign of a coordinate is free
    for (const { x, slope } of signs) expectNear(x * sign, slope, { abs: 2e-8, label: `${atoms.length}-atom term` });
  }
  expect(kinds).toBe(0b11100); // stretches or contacts, bends, torsions all met
});

test('rigid motions cost nothing: below 1e-6 of the largest before projection', () => {
  const terms = springTerms(branched, orderedUff);
  const eigenvalues = new EigenvalueDecomposition(massWeightedHessian(branched, terms)).realEigenvalues.sort((a, b) => a - b);
  for (let s = 0; s < 6; s++) expect(Math.abs(eigenvalues[s]!)).toBeLessThan(1e-6 * eigenvalues.at(-1)!);
  expect(eigenvalues[6]!).toBeGreaterThan(1e-6 * eigenvalues.at(-1)!);
  expect(rigidMotions(branched).length).toBe(6);
  expect(rigidMotions(molecules.carbonDioxide()).length).toBe(5);
});

test('a pair is one oscillator', () => {
  const body: SpringBody = { atoms: [atomAt('C', [0, 0, 0]), atomAt('O', [1.13, 0, 0])] };
  const k = orderedUff.stretch('C', 'O', 1.13, 1);
  const mu = (MASS['C']! * MASS['O']!) / (MASS['C']! + MASS['O']!);
  const model = springNetwork(body, { temperature: 0 });
  // ħ/(2μω) with ω² = k/μ; 1 mdyn/Å = 100 N/m.
  const omega = Math.sqrt((100 * k) / (mu * 1.66053907e-27));
  expectNear(model.sigma2(route(body, 0, 1)), (1.054571817e-34 / (2 * mu * 1.66053907e-27 * omega)) * 1e20, { rel: 1e-7 });
});

test('σ² is not negative, grows with temperature, and does not see rotation, shift or the order of atoms', () => {
  const routes = [
    [0, 1],
    [0, 4],
    [0, 1, 2],
    [0, 5, 0, 9],
    [0, 7, 8],
  ];
  fc.assert(
    fc.property(fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 4, maxLength: 4 }), fc.nat(400), (q, t) => {
      const length = Math.hypot(...q);
      fc.pre(length > 0.1);
      const other = turned(
        branched,
        q.map((x) => x / length),
        [3, -2, 7],
      );
      const shuffled: SpringBody = { atoms: [...other.atoms].reverse() };
      const [cold, hot] = [springNetwork(branched, { temperature: t }), springNetwork(branched, { temperature: t + 50 })];
      const moved = springNetwork(shuffled, { temperature: t });
      for (const indices of routes) {
        const value = cold.sigma2(route(branched, ...indices));
        expect(value).toBeGreaterThan(0);
        expect(hot.sigma2(route(branched, ...indices))).toBeGreaterThan(value);
        expect(cold.sigma2AtZero(route(branched, ...indices))).toBeLessThanOrEqual(value);
        expectNear(moved.sigma2(route(other, ...indices)), value, { rel: 1e-7, label: indices.join('-') });
      }
    }),
    { numRuns: 12 },
  );
});

test('the recursion finds what the normal modes find', () => {
  const random = seededRandom(3);
  // A lump of 120 iron and sulfur atoms, irregular.
  const atoms = Array.from({ length: 120 }, (_, n) => {
    const [i, j, k] = [n % 5, Math.floor(n / 5) % 5, Math.floor(n / 25)];
    return atomAt(
      (i + j + k) % 2 ? 'S' : 'Fe',
      [i, j, k].map((x) => 2.3 * x + 0.2 * random()),
    );
  });
  const body: SpringBody = { atoms };
  const model = springNetwork(body, { temperature: 200 });
  const spectrum = recursion(body, springTerms(body, orderedUff), rigidMotions(body));
  for (const [a, b] of [
    [62, 63],
    [62, 61],
    [62, 68],
    [0, 119],
  ] as const) {
    const d = atoms[a]!.position.map((x, c) => x - atoms[b]!.position[c]!);
    const r = Math.hypot(...d);
    const g = d.map((x) => (2 * x) / r) as unknown as Vec3;
    const pulls: Pull[] = [
      { atom: a, position: atoms[a]!.position, g },
      { atom: b, position: atoms[b]!.position, g: [-g[0], -g[1], -g[2]] },
    ];
    const { theta, squared } = spectrum(pulls);
    let sum = 0;
    for (const [s, t] of theta.entries()) sum += (0.125 * 48.50875 * squared[s]! * occupation(t, 200)) / t;
    // A Gauss quadrature stopped when 1/ω² stands still to 1e-4.
    expectNear(sum, model.sigma2(route(body, a, b)), { rel: 1e-4, label: `${a}–${b}` });
  }
});

test('the recursion goes on for as long as a floppy chain asks', () => {
  // A zigzag of 60 carbon atoms: its ends feel modes from 1 to 1500 cm⁻¹.
  const body: SpringBody = { atoms: Array.from({ length: 60 }, (_, n) => atomAt('C', [1.26 * n, n % 2 ? 0.88 : 0, 0.2 * Math.sin(n)])) };
  const g: Vec3 = [2, 0, 0];
  const pulls: Pull[] = [
    { atom: 0, position: body.atoms[0]!.position, g: [-2, 0, 0] },
    { atom: 30, position: body.atoms[30]!.position, g },
  ];
  const { theta, squared } = recursion(body, springTerms(body, orderedUff), rigidMotions(body))(pulls);
  const set = bodyModes(body, springTerms(body, orderedUff), rigidMotions(body));
  let wanted = 0;
  forEachOverlap(set, body, pulls, (t, overlap) => {
    wanted += overlap / (t * t);
  });
  const got = theta.reduce((sum, t, s) => sum + squared[s]! / (t * t), 0);
  expectNear(got, wanted, { rel: 1e-3, label: '⟨1/ω²⟩' });
});

test('the projected density adds up to one and lies where the bond vibrates', () => {
  const body = molecules.tetrahedral('Fe', 'S', 2.28);
  const { wavenumber, weight } = springNetwork(body, { temperature: 10 }).projectedDensity(route(body, 0, 1), 20);
  expectNear(
    weight.reduce((a, b) => a + b, 0),
    1,
    { abs: 1e-12 },
  );
  const mean = wavenumber.reduce((sum, w, i) => sum + w * weight[i]!, 0);
  expect(mean).toBeGreaterThan(280);
  expect(mean).toBeLessThan(420);
});

test('a finer mesh over the zone changes σ² of copper and ZnS by less than 2 %, first shells by 0.5 %', () => {
  for (const body of [crystals.fcc('Cu', 3.6149), crystals.zincblende('Zn', 'S', 5.4093)]) {
    const [coarse, fine] = [18, 32].map((meshLength) => springNetwork(body, { temperature: 300, meshLength }));
    for (const [n, s] of shellsOf(body, 5.5).entries()) {
      const r = routeTo(body, s.element, s.position);
      expectNear(coarse!.sigma2(r), fine!.sigma2(r), { rel: n === 0 ? 0.005 : 0.02, label: `${s.element} ${s.r.toFixed(2)}` });
    }
  }
});

test("an anion's valence is shared among its metals, a ligand's donor bond is not weakened", () => {
  const stiffness = (body: SpringBody, a: string, b: string) =>
    springTerms(body, orderedUff).flatMap(({ k, atoms }) => {
      const pair = atoms.map((i) => body.atoms[i]!.element);
      return pair.length === 2 && pair.includes(a) && pair.includes(b) ? [k] : [];
    })[0]!;
  // NaCl at 2.82 Å: Pauling order 10^((1.55 + 0.99 − 2.82)/0.6) = 0.3415, six bonds; √(1/2.049) of it, from a valence of 1.
  const order = 10 ** ((2.54 - 2.82) / 0.6);
  const wanted = orderedUff.stretch('Na', 'Cl', 2.82, order * Math.sqrt(1 / (6 * order)));
  expectNear(stiffness(crystals.rocksalt('Na', 'Cl', 5.64), 'Na', 'Cl'), wanted, { rel: 1e-9, label: 'NaCl' });
  // Water on a metal: O has given both bonds to its hydrogens, and a lone pair besides.
  const aqua: SpringBody = {
    atoms: [atomAt('Fe', [0, 0, 0]), atomAt('O', [2.1, 0, 0]), atomAt('H', [2.7, 0.75, 0]), atomAt('H', [2.7, -0.75, 0])],
  };
  expectNear(stiffness(aqua, 'Fe', 'O'), orderedUff.stretch('Fe', 'O', 2.1, 10 ** ((1.79 - 2.1) / 0.6)), { rel: 1e-9, label: 'Fe–OH₂' });
});

const operator = (...translation: number[]) => ({
  rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1],
  translation: translation as unknown as Vec3,
  text: '',
});
const sphalerite: Structure = {
  format: 'cif',
  title: '',
  moreFrames: [],
  diagnostics: [],
  cell: { a: 5.4093, b: 5.4093, c: 5.4093, alpha: 90, beta: 90, gamma: 90 },
  operators: [operator(0, 0, 0), operator(0, 0.5, 0.5), operator(0.5, 0, 0.5), operator(0.5, 0.5, 0)],
  atoms: [
    { name: 'Zn1', element: 'Zn', position: [0, 0, 0], occupancy: 1 },
    { name: 'S1', element: 'S', position: [5.4093 / 4, 5.4093 / 4, 5.4093 / 4], occupancy: 1 },
    { name: 'S1b', element: 'S', position: [5.4093 / 4, 5.4093 / 4, 5.4093 / 4 + 0.1], occupancy: 0.1, alternate: 'B' },
  ],
};
const massOf = (element: string) => MASS[element]!;

test('the cell of a crystal, expanded by its operators, vibrates as its primitive cell', () => {
  const whole = springBodyOfCrystal(sphalerite, massOf);
  expect(whole.atoms.length).toBe(8); // the minor alternate is not another atom
  const primitive = crystals.zincblende('Zn', 'S', 5.4093);
  const [a, b] = [springNetwork(whole, { temperature: 200 }), springNetwork(primitive, { temperature: 200 })];
  for (const s of shellsOf(primitive, 5)) {
    const r = routeTo(primitive, s.element, s.position);
    // Two meshes over the same zone, each within 2 %.
    expectNear(a.sigma2(r), b.sigma2(r), { rel: 0.03, label: `${s.element} ${s.r.toFixed(2)}` });
  }
});

/** A ball of sphalerite about a zinc atom. */
const ball = (radius: number): Site => {
  const h = 5.4093 / 4;
  const atoms: Site['atoms'][number][] = [];
  for (let i = -14; i <= 14; i++)
    for (let j = -14; j <= 14; j++)
      for (let k = -14; k <= 14; k++) {
        const even = i % 2 === 0 && j % 2 === 0 && k % 2 === 0 && (i + j + k) % 4 === 0;
        const odd = i % 2 !== 0 && j % 2 !== 0 && k % 2 !== 0 && (((i + j + k) % 4) + 4) % 4 === 3;
        const position: Vec3 = [i * h, j * h, k * h];
        const distance = Math.hypot(...position);
        if ((even || odd) && distance <= radius)
          atoms.push({ element: even ? 'Zn' : 'S', name: '', position, distance, occupancy: 1, source: 0, symmetry: '' });
      }
  atoms.sort((a, b) => a.distance - b.distance);
  return { label: 'Zn1', element: 'Zn', weight: 1, atoms, radius, periodic: true, diagnostics: [] };
};

test('a cluster held at its edge stands in for the crystal near its centre', () => {
  const crystal = crystals.zincblende('Zn', 'S', 5.4093);
  const infinite = springNetwork(crystal, { temperature: 200 });
  const cluster = springBodyOfSite(ball(9.5), massOf); // 167 atoms: by recursion
  expect(cluster.edge!.length).toBeGreaterThan(60);
  // Every outer atom is held as stiffly as the mean inner atom of its element, or more.
  const stiffness = new Float64Array(cluster.atoms.length);
  for (const { k, atoms, b } of springTerms(cluster, orderedUff))
    b.forEach((x, m) => {
      stiffness[atoms[Math.floor(m / 3)]!]! += k * x * x;
    });
  for (const i of cluster.edge!) {
    const inner = cluster.atoms.flatMap((a, j) =>
      a.element === cluster.atoms[i]!.element && !cluster.edge!.includes(j) ? [stiffness[j]!] : [],
    );
    expect(stiffness[i]!).toBeGreaterThan(0.999 * (inner.reduce((x, y) => x + y) / inner.length));
  }
  const cut = springNetwork(cluster, { temperature: 200 });
  const [first, second] = shellsOf(crystal, 4).map(
    (s) => (s.element === 'S' ? [-s.position[0], -s.position[1], -s.position[2]] : s.position) as Vec3,
  );
  const centre = { atom: 0, element: 'Zn', position: [0, 0, 0] as Vec3, mass: MASS['Zn']! };
  const to = (element: string, position: Vec3) => [centre, { atom: 1, element, position, mass: MASS[element]! }];
  const s1 = ball(9.5).atoms.find((a) => a.element === 'S')!.position;
  expect(Math.hypot(...first!)).toBeCloseTo(Math.hypot(...s1), 6);
  const want1 = infinite.sigma2(to('S', first!.map((x) => -x) as unknown as Vec3));
  expectNear(cut.sigma2(to('S', s1)), want1, { rel: 0.03, label: 'first shell' });
  // Long waves are cut off by the held edge, which costs the farther shells part of their σ².
  expectNear(cut.sigma2(to('Zn', second!)), infinite.sigma2(to('Zn', second!)), { rel: 0.15, label: 'second shell' });
});

test('a piece out of reach inside a cut cluster is held, in a free molecule refused', () => {
  const near = molecules.tetrahedral('Fe', 'S', 2.28).atoms;
  const far = molecules
    .tetrahedral('Zn', 'O', 1.95)
    .atoms.map((a) => ({ ...a, position: [a.position[0] + 12, a.position[1], a.position[2]] as Vec3 }));
  expect(() => springNetwork({ atoms: [...near, ...far] }, { temperature: 100 })).toThrow(/held together by no spring/);
  const held = springNetwork({ atoms: [...near, ...far], edge: [1, 2] }, { temperature: 100 });
  const tied = new Set(springTerms(held.body, orderedUff).flatMap(({ atoms }) => (atoms.length === 1 ? atoms : [])));
  expect([...tied].sort((a, b) => a - b)).toEqual([1, 2, 5, 6, 7, 8, 9]);
  const value = held.sigma2(route(held.body, 0, 6));
  expect(value).toBeGreaterThan(0.001);
  expect(value).toBeLessThan(0.1);
});

test('a small cell is taken whole, a large one and a molecule by the cluster', () => {
  expect(springBodyOf(sphalerite, ball(6), massOf).lattice).toBeDefined();
  const large: Structure = { ...sphalerite, atoms: sphalerite.atoms.flatMap((a) => Array.from({ length: 30 }, () => a)) };
  expect(springBodyOf(large, ball(6), massOf).edge!.length).toBeGreaterThan(0);
  const molecule = springBodyOf(sphalerite, { ...ball(6), periodic: false, radius: Infinity }, massOf);
  expect(molecule.lattice ?? molecule.edge).toBeUndefined();
});

test('bad input is refused in one line', () => {
  const pair = (x: number, element = 'O', mass = 16): SpringBody => ({
    atoms: [atomAt('Fe', [0, 0, 0]), { element, position: [x, 0, 0], mass }],
  });
  const make =
    (body: SpringBody, temperature = 10) =>
    () =>
      springNetwork(body, { temperature });
  expect(make(pair(2), -1)).toThrow(/temperature must be ≥ 0 K/);
  expect(make(pair(2, 'Xx'))).toThrow(/no force constants for element "Xx"/);
  expect(make(pair(2, 'O', 0))).toThrow(/atom 1 \(O\) needs a mass/);
  expect(make(pair(0.2))).toThrow(/0.20 Å apart/);
  expect(make(pair(Number.NaN))).toThrow(/no number/);
  expect(make(pair(9))).toThrow(/held together by no spring/);
  expect(make({ atoms: [atomAt('Fe', [0, 0, 0])] })).toThrow(/at least 2 atoms/);
  const far = { atom: 5, element: 'O', position: [0, 9, 0] as Vec3, mass: 16 };
  expect(() => springNetwork(pair(2), { temperature: 10 }).sigma2([...route(pair(2), 0), far])).toThrow(/no atom of the network/);
  const { cell: _, ...noCell } = sphalerite;
  expect(() => springBodyOfCrystal(noCell, massOf)).toThrow(/no cell/);
  expect(() => springBodyOfSite(ball(2.6), massOf)).toThrow(/no inside/);
});
