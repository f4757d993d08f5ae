import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { latticeSite } from '../../../../test/support/lattice.js';
import type { Site, Vec3 } from '../structure/types.js';
import { enumeratePaths } from './enumerate.js';
import { pathLabel } from './label.js';

const fcc = (radius: number): Site =>
  latticeSite(
    [
      [0, 1.8, 1.8],
      [1.8, 0, 1.8],
      [1.8, 1.8, 0],
    ],
    [{ element: 'Cu', at: [0, 0, 0] }],
    radius,
  );
const bcc = (radius: number): Site =>
  latticeSite(
    [
      [-1.43, 1.43, 1.43],
      [1.43, -1.43, 1.43],
      [1.43, 1.43, -1.43],
    ],
    [{ element: 'Fe', at: [0, 0, 0] }],
    radius,
  );
/** The absorber is kind 0, all else kind 1. */
const kinds = (site: Site) => Int32Array.from(site.atoms, (_, i) => (i === 0 ? 0 : 1));

/** Every closed route by nested loops: the slow, plain count, by number of legs. */
function count(site: Site, radius: number): number[] {
  const apart = (a: number, b: number): number => {
    const [p, q] = [site.atoms[a]!.position, site.atoms[b]!.position];
    return Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
  };
  const counts = [0, 0, 0, 0, 0];
  const n = site.atoms.length;
  for (let i = 1; i < n; i++) {
    if (apart(0, i) <= radius) counts[2]!++;
    for (let j = 0; j < n; j++) {
      if (j === i) continue;
      if (j !== 0 && apart(0, i) + apart(i, j) + apart(j, 0) <= 2 * radius) counts[3]!++;
      for (let k = 1; k < n; k++) {
        if (k !== j && apart(0, i) + apart(i, j) + apart(j, k) + apart(k, 0) <= 2 * radius) counts[4]!++;
      }
    }
  }
  return counts;
}

for (const [name, make, radius] of [
  ['fcc', fcc, 5.11],
  ['bcc', bcc, 4.71],
] as const) {
  test(`${name}: no route is lost or counted twice`, () => {
    const site = make(radius);
    const paths = enumeratePaths({ site, kindOfAtom: kinds(site), radius, maxLegs: 4 });
    const wanted = count(site, radius);
    for (const legs of [2, 3, 4]) {
      const total = paths.filter((path) => path.legs === legs).reduce((sum, { degeneracy }) => sum + degeneracy, 0);
      expectNear(total, wanted[legs]!, { abs: 1e-9, label: `${legs} legs` });
    }
  });
}

test('single scattering has the shells of the handbook: fcc 12, 6, 24, 12; bcc 8, 6, 12, 24', () => {
  const shells = (site: Site, radius: number) =>
    enumeratePaths({ site, kindOfAtom: kinds(site), radius, maxLegs: 2 }).map(({ degeneracy }) => degeneracy);
  expect(shells(fcc(5.2), 5.2)).toEqual([12, 6, 24, 12]);
  expect(shells(bcc(4.8), 4.8)).toEqual([8, 6, 12, 24]);
});

test('members of a group have equal length, and one direction of each stands there', () => {
  const site = fcc(4);
  for (const { members, halfLength, degeneracy, legs } of enumeratePaths({ site, kindOfAtom: kinds(site), radius: 4, maxLegs: 3 })) {
    expect(legs === 2 ? members.length : 2 * members.length).toBe(degeneracy);
    for (const route of members) {
      let length = 0;
      route.forEach((vertex, i) => {
        const [p, q] = [site.atoms[vertex]!.position, site.atoms[route[(i + 1) % route.length]!]!.position];
        length += Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
      });
      expectNear(length / 2, halfLength, { abs: 1e-9, label: 'half length' });
    }
  }
});

test('partly occupied atoms count in part, along a route as a product', () => {
  const whole = fcc(4);
  const site = { ...whole, atoms: whole.atoms.map((atom, i) => (i === 0 ? atom : { ...atom, occupancy: 0.5 })) };
  const [a, b] = [whole, site].map((s) => enumeratePaths({ site: s, kindOfAtom: kinds(s), radius: 4, maxLegs: 3 }));
  a!.forEach(
    ({ degeneracy, legs }, i) => void expectNear(b![i]!.degeneracy, degeneracy * 0.5 ** (legs - 1), { abs: 1e-9, label: `${legs} legs` }),
  );
});

test('a stop asked for is obeyed', () => {
  const site = fcc(6);
  expect(() => enumeratePaths({ site, kindOfAtom: kinds(site), radius: 6, maxLegs: 4 }, { signal: { aborted: true } })).toThrow(
    'cancelled',
  );
});

test('labels name the angle, and whether the wave is focused', () => {
  const at = (element: string, position: Vec3) => ({
    element,
    name: element,
    position,
    distance: Math.hypot(...position),
    occupancy: 1,
    source: 0,
    symmetry: 'x,y,z',
  });
  const site = { atoms: [at('Fe', [0, 0, 0]), at('C', [1.9, 0, 0]), at('N', [3.05, 0.1, 0])] } as unknown as Site;
  expect(pathLabel(site, [0, 1])).toBe('Fe–C–Fe');
  expect(pathLabel(site, [0, 1, 2])).toBe('Fe–C–N–Fe, focusing (175° at C)');
});
