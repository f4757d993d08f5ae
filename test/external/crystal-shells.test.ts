// Neighbour shells of sixteen handbook crystals to 6 Å, computed independently (test/external/crystals/ORIGIN.md).
// Tolerance: 2e-5 Å is the agreement of the two independent computations; the table merges shells within 2e-4 Å.
import { readFileSync } from 'node:fs';
import { findSites, readStructure } from '@ringtrue/core';
import { expect, test } from 'vitest';
import { expectNear } from '../support/expect-near.js';

const folder = new URL('./crystals/', import.meta.url);
const text = (file: string): string => readFileSync(new URL(file, folder), 'utf8');
const rows = text('shells.csv')
  .trim()
  .split('\n')
  .slice(1)
  .map((line) => line.split(','))
  .map(([crystal, site, absorber, scatterer, count, distance]) => ({
    crystal: crystal!,
    site: site!,
    absorber: absorber!,
    scatterer: scatterer!,
    count: Number(count),
    distance: Number(distance),
  }));

test.each([...new Set(rows.map(({ crystal }) => crystal))])('%s: every shell to 6 Å', (crystal) => {
  const structure = readStructure(text(`${crystal}.cif`));
  const own = rows.filter((row) => row.crystal === crystal);
  for (const name of new Set(own.map(({ site }) => site))) {
    const wanted = own.filter(({ site }) => site === name);
    const [site, ...others] = findSites(structure, { absorber: name, radius: 6 });
    expect(others).toEqual([]);
    const left = new Set(site!.atoms.slice(1));
    for (const shell of wanted) {
      const members = [...left].filter((atom) => atom.element === shell.scatterer && Math.abs(atom.distance - shell.distance) < 3e-4);
      expect(members.length, `${name}–${shell.scatterer} at ${shell.distance}`).toBe(shell.count);
      const mean = members.reduce((sum, atom) => sum + atom.distance, 0) / members.length;
      expectNear(mean, shell.distance, { abs: 1e-4, label: `${name}–${shell.scatterer}` });
      for (const atom of members) left.delete(atom);
    }
    expect([...left].map(({ name, distance }) => `${name} ${distance}`)).toEqual([]);
  }
});
