import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { freeAtom } from '../atom/index.js';
import { elementBySymbol } from '../elements/index.js';
import type { Site, Vec3 } from '../structure/types.js';
import { scattererKinds } from './kinds.js';
import { buildMuffinTin } from './muffin-tin.js';

const atomOf = (element: string) => freeAtom(elementBySymbol(element).Z);
const siteOf = (list: readonly (readonly [element: string, position: Vec3, occupancy?: number])[]): Site => ({
  label: list[0]![0],
  element: list[0]![0],
  weight: 1,
  atoms: list.map(([element, position, occupancy = 1], source) => ({
    element,
    name: element,
    position,
    distance: Math.hypot(...position),
    occupancy,
    source,
    symmetry: 'x,y,z',
  })),
  radius: Number.POSITIVE_INFINITY,
  periodic: false,
  diagnostics: [],
});

/** Two manganese bridged by an oxo, a water on the first, a carboxylate oxygen with its carbon. Invented. */
const bridged = siteOf([
  ['Mn', [0, 0, 0]],
  ['O', [1.4, 1.2, 0]],
  ['O', [1.4, -1.2, 0]],
  ['O', [0, 0, 2.1]],
  ['O', [-2.2, 0, 0]],
  ['Mn', [2.75, 0, 0]],
  ['C', [0.6, 0, 3.1]],
  ['O', [5.5, 0, 0]],
]);

test('an element is one kind unless surroundings are asked for', () => {
  expect([...scattererKinds(bridged, 5).kindOfAtom]).toEqual([0, 1, 1, 1, 1, 2, 3, -1]);
});

test('an oxo and a water oxygen part by more than 1 eV; two alike bridges share a sphere; a far atom joins, founds nothing', () => {
  const { kindOfAtom, representatives } = scattererKinds(bridged, 6, atomOf);
  expect(kindOfAtom[1]).toBe(kindOfAtom[2]);
  expect(kindOfAtom[4]).not.toBe(kindOfAtom[1]);
  expect(kindOfAtom[7]).toBe(kindOfAtom[4]);
  expect(representatives[kindOfAtom[4]!]).toBe(4);
  const { spheres } = buildMuffinTin({
    site: bridged,
    kindOfAtom,
    representatives,
    atoms: representatives.map((index) => atomOf(bridged.atoms[index]!.element)),
    atomOfElement: atomOf,
  });
  // Fewer neighbours bring less charge: the water oxygen needs a wider sphere to be neutral.
  expect(spheres[kindOfAtom[4]!]!.normanRadius).toBeGreaterThan(spheres[kindOfAtom[1]!]!.normanRadius + 0.05);
});

test('a partly occupied atom weighs in part in the interstitial averages', () => {
  const density = (occupancy: number): number => {
    const site = siteOf([
      ['Fe', [0, 0, 0]],
      ['O', [2, 0, 0]],
      ['O', [-2, 0, 0]],
      ['O', [0, 2, 0]],
      ['O', [0, -2, 0]],
      ['S', [0, 0, 2.4], occupancy],
    ]);
    const { kindOfAtom, representatives } = scattererKinds(site, 3);
    const atoms = representatives.map((index) => atomOf(site.atoms[index]!.element));
    return buildMuffinTin({ site, kindOfAtom, representatives, atoms, atomOfElement: atomOf }).interstitialDensity;
  };
  // As it vanishes, the interstitial goes to that of the site without it.
  const without = siteOf([
    ['Fe', [0, 0, 0]],
    ['O', [2, 0, 0]],
    ['O', [-2, 0, 0]],
    ['O', [0, 2, 0]],
    ['O', [0, -2, 0]],
  ]);
  const { kindOfAtom, representatives } = scattererKinds(without, 3);
  const bare = buildMuffinTin({
    site: without,
    kindOfAtom,
    representatives,
    atoms: representatives.map((index) => atomOf(without.atoms[index]!.element)),
    atomOfElement: atomOf,
  }).interstitialDensity;
  expect(Math.abs(density(1) / bare - 1)).toBeGreaterThan(0.01);
  // The touching radii still know of it, so not exactly.
  expectNear(density(1e-6), bare, { rel: 0.02, label: 'interstitial density' });
});
