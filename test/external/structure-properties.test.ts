// Identities over random input: what is written is read back; sites do not know how the file was turned, moved or ordered.
import { type Atom, findSites, readStructure, type Structure, XyzFrames } from '@ringtrue/core';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { cellGeometry, parseOperator, type SymmetryOperator } from '../../packages/core/src/structure/index.js';
import { neighbourDistances } from '../reference/neighbours.js';
import { expectNear } from '../support/expect-near.js';
import { seededRandom } from '../support/random.js';
import { writeCif, writeMmcif, writePdb, writeXyz } from '../support/write-structures.js';

const SETTINGS = { numRuns: 60, seed: 20261201 };
const element = fc.constantFrom('Fe', 'Cu', 'C', 'N', 'O', 'S', 'H', 'Ca', 'Cd', 'Hg');
const milli = fc.integer({ min: -999_999, max: 999_999 }).map((n) => n / 1000);
const atomsArbitrary = fc
  .array(fc.record({ element, position: fc.tuple(milli, milli, milli), centi: fc.integer({ min: 1, max: 100 }) }), {
    minLength: 1,
    maxLength: 30,
  })
  .map((list) =>
    list.map(
      ({ element, position, centi }, i): Atom => ({
        name: `${element}${i % 100}`.toUpperCase(),
        element,
        position,
        occupancy: centi / 100,
        residue: { name: 'LIG', number: 1 + (i % 9999), insertion: '', chain: 'AB'.charAt(i % 2) },
      }),
    ),
  );

test('XYZ, PDB and mmCIF give back element, position and occupancy exactly', () => {
  fc.assert(
    fc.property(atomsArbitrary, (atoms) => {
      const pick = (list: readonly Atom[]) =>
        list.map(({ element, position, occupancy, residue }) => ({ element, position: position.map((v) => v + 0), occupancy, residue }));
      expect(pick(readStructure(writePdb(atoms)).atoms)).toEqual(pick(atoms));
      expect(pick(readStructure(writeMmcif(atoms)).atoms)).toEqual(pick(atoms));
      expect(
        readStructure(writeXyz(atoms)).atoms.map(({ element, position }) => ({ element, position: position.map((v) => v + 0) })),
      ).toEqual(pick(atoms).map(({ element, position }) => ({ element, position })));
    }),
    SETTINGS,
  );
});

test('a trajectory cut anywhere gives the same frames', () => {
  const atoms: Atom[] = [
    { name: 'Fe1', element: 'Fe', position: [0, 0, 0.125], occupancy: 1 },
    { name: 'O1', element: 'O', position: [-1.5, 2e-3, 7], occupancy: 1 },
  ];
  const text = `\uFEFF${[0, 1, 2]
    .map((n) => writeXyz(atoms, `frame ${n}`))
    .join('\n')
    .replaceAll('\n', '\r\n')}`;
  const whole = readStructure(text);
  fc.assert(
    fc.property(fc.array(fc.integer({ min: 1, max: text.length - 1 }), { maxLength: 8 }), (cuts) => {
      const reader = new XyzFrames();
      const edges = [0, ...cuts.sort((a, b) => a - b), text.length];
      const frames = edges.slice(1).flatMap((edge, i) => reader.push(text.slice(edges[i], edge)));
      frames.push(...reader.end());
      expect(frames.map(({ atoms }) => atoms)).toEqual([whole.atoms, ...whole.moreFrames]);
      expect(frames.map(({ comment }) => comment)).toEqual(['frame 0', 'frame 1', 'frame 2']);
    }),
    SETTINGS,
  );
});

/** A random proper rotation, row-major (9), from a unit quaternion. */
function rotation(random: () => number): number[] {
  const q = [0, 1, 2, 3].map(() => random() - 0.5);
  const norm = Math.hypot(...q);
  const [w, x, y, z] = q.map((v) => v / norm) as [number, number, number, number];
  return [
    1 - 2 * (y * y + z * z),
    2 * (x * y - w * z),
    2 * (x * z + w * y),
    2 * (x * y + w * z),
    1 - 2 * (x * x + z * z),
    2 * (y * z - w * x),
    2 * (x * z - w * y),
    2 * (y * z + w * x),
    1 - 2 * (x * x + y * y),
  ];
}

const turned = (m: readonly number[], shift: readonly number[], p: readonly number[]) =>
  [0, 1, 2].map((i) => m[3 * i]! * p[0]! + m[3 * i + 1]! * p[1]! + m[3 * i + 2]! * p[2]! + shift[i]!) as [number, number, number];

/** Atoms at least 1.2 Å apart in a ball. */
function looseMolecule(random: () => number, count: number): Atom[] {
  const atoms: Atom[] = [{ name: 'Fe1', element: 'Fe', position: [0, 0, 0], occupancy: 1 }];
  while (atoms.length < count) {
    const position: [number, number, number] = [8 * (random() - 0.5), 8 * (random() - 0.5), 8 * (random() - 0.5)];
    if (atoms.every((atom) => Math.hypot(...atom.position.map((v, i) => v - position[i]!)) > 1.2)) {
      const kind = ['O', 'N', 'S', 'Cu'][atoms.length % 4]!;
      atoms.push({ name: `${kind}${atoms.length}`, element: kind, position, occupancy: 1 });
    }
  }
  return atoms;
}

test('the sites of a molecule do not depend on its place, its turning or the order of its atoms', () => {
  const random = seededRandom(7);
  for (let run = 0; run < 20; run++) {
    const atoms = looseMolecule(random, 25);
    const m = rotation(random);
    const shift = [0, 1, 2].map(() => 40 * (random() - 0.5));
    const moved = atoms.map((atom) => ({ ...atom, position: turned(m, shift, atom.position) }));
    const [first, ...rest] = moved;
    const shuffled = [...rest.sort(() => random() - 0.5), first!];
    const base: Structure = { format: 'xyz', title: '', atoms, moreFrames: [], operators: [parseOperator('x,y,z')], diagnostics: [] };
    const [a] = findSites(base, { absorber: 'Fe', radius: 4.5 });
    const [b] = findSites({ ...base, atoms: shuffled }, { absorber: 'Fe', radius: 4.5 });
    expect(b!.atoms.map(({ name }) => name)).toEqual(a!.atoms.map(({ name }) => name));
    // Coordinates up to 30 Å carry rounding of 4e-15; a few operations on them.
    a!.atoms.forEach((atom, i) => {
      expectNear(b!.atoms[i]!.distance, atom.distance, { abs: 1e-13, label: atom.name });
    });
    expect(b!.diagnostics.map(({ code }) => code)).toEqual(a!.diagnostics.map(({ code }) => code));
  }
});

const GROUPS = [
  ['x,y,z'],
  ['x,y,z', '-x,-y,-z'],
  ['x,y,z', '-x,y+1/2,-z+1/2', '-x,-y,-z', 'x,-y+1/2,z+1/2'],
  ['x,y,z', '-y,x-y,z+1/3', '-x+y,-x,z+2/3'],
];

test('crystals: the grid search finds what plain loops find, for skewed cells, and CIF gives the atoms back', () => {
  const random = seededRandom(11);
  for (let run = 0; run < 24; run++) {
    const texts = GROUPS[run % 4]!;
    const operators: SymmetryOperator[] = texts.map((text) => parseOperator(text));
    const a = 4 + 3 * random();
    const cell =
      run % 4 === 3
        ? { a, b: a, c: 5 + random(), alpha: 90, beta: 90, gamma: 120 }
        : {
            a,
            b: 4 + 5 * random(),
            c: 3 + 6 * random(),
            alpha: run % 4 === 2 ? 90 : 65 + 50 * random(),
            beta: 70 + 45 * random(),
            gamma: run % 4 === 2 ? 90 : 65 + 40 * random(),
          };
    const { toCartesian } = cellGeometry(cell);
    const fractional = Array.from({ length: 6 }, () => 3 * random() - 1);
    const atoms = [0, 1].map(
      (i): Atom => ({
        name: `${['Fe', 'O'][i]}1`,
        element: ['Fe', 'O'][i]!,
        position: turned([...toCartesian], [0, 0, 0], fractional.slice(3 * i, 3 * i + 3)),
        occupancy: 1,
      }),
    );
    const structure = readStructure(writeCif({ cell, operators, atoms }, fractional));
    structure.atoms.forEach((atom, i) => {
      atom.position.forEach((v, axis) => {
        expectNear(v, atoms[i]!.position[axis]!, { abs: 1e-12, label: atom.name });
      });
    });
    const wanted = neighbourDistances(structure, structure.atoms[0]!.position, 6);
    if (wanted[1]! < 0.6 || hasOverlap(structure)) continue;
    const [site] = findSites(structure, { absorber: 'Fe', radius: 6 });
    expect(site!.atoms.length).toBe(wanted.length);
    site!.atoms.forEach((atom, i) => {
      expectNear(atom.distance, wanted[i]!, { abs: 1e-10, label: `distance ${i}` });
    });
  }
});

/** Random places can fall on top of each other, which findSites rightly refuses. */
function hasOverlap(structure: Structure): boolean {
  return structure.atoms.some((atom) => (neighbourDistances(structure, atom.position, 0.6)[1] ?? 1) < 0.6);
}

test('the same crystal with its origin moved by a lattice vector, or listed whole in P 1, has the same site', () => {
  const operators = GROUPS[2]!.map((text) => parseOperator(text));
  const cell = { a: 6.1, b: 7.3, c: 8.2, alpha: 90, beta: 101, gamma: 90 };
  const atoms = ['Fe', 'O', 'S'].map((element): Atom => ({ name: `${element}1`, element, position: [0, 0, 0], occupancy: 1 }));
  const f = [0.11, 0.2, 0.05, 0.3, 0.35, 0.1, 0.15, 0.8, 0.4];
  const original = findSites(readStructure(writeCif({ cell, operators, atoms }, f)), { absorber: 'Fe', radius: 7 });
  const shifted = findSites(
    readStructure(
      writeCif(
        { cell, operators, atoms },
        f.map((v, i) => v + [1, -2, 3][i % 3]!),
      ),
    ),
    { absorber: 'Fe', radius: 7 },
  );
  const images = operators.flatMap(({ rotation, translation }) =>
    [0, 1, 2].flatMap((i) => turned(rotation, translation, f.slice(3 * i, 3 * i + 3))),
  );
  const p1Atoms = operators.flatMap((_, o) => atoms.map((atom) => ({ ...atom, name: `${atom.name}${'abcd'.charAt(o)}` })));
  const whole = findSites(readStructure(writeCif({ cell, operators: operators.slice(0, 1), atoms: p1Atoms }, images)), {
    absorber: 'Fe',
    radius: 7,
  });
  expect(whole.length).toBe(1);
  for (const other of [shifted, whole]) {
    expect(other[0]!.weight).toBeCloseTo(1, 12);
    expectNear(other[0]!.atomDensity!, original[0]!.atomDensity!, { rel: 1e-12, label: 'density' });
    expect(other[0]!.atoms.length).toBe(original[0]!.atoms.length);
    other[0]!.atoms.forEach((atom, i) => {
      expectNear(atom.distance, original[0]!.atoms[i]!.distance, { abs: 1e-11, label: `distance ${i}` });
    });
  }
});
