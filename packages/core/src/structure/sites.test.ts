// All structures here are invented.
import { describe, expect, test } from 'vitest';
import { InputError } from '../errors.js';
import { coordinationShell, describeSites, findSites, frameOf, readStructure } from './index.js';

const pdbLine = (
  serial: number,
  name: string,
  alternate: string,
  residue: string,
  chain: string,
  number: number,
  x: number,
  y: number,
  z: number,
  occupancy: number,
  element: string,
) =>
  `HETATM${String(serial).padStart(5)} ${(element.length === 1 ? ` ${name}` : name).padEnd(4)}${alternate}${residue.padStart(3)} ${chain}${String(number).padStart(4)}    ` +
  `${[x, y, z].map((v) => v.toFixed(3).padStart(8)).join('')}${occupancy.toFixed(2).padStart(6)} 20.00          ${element.toUpperCase().padStart(2)}`;

const codes = (site: { diagnostics: readonly { code: string }[] }) => site.diagnostics.map(({ code }) => code);

const cubic = (rows: string, operators = "'x,y,z'") => `data_t
_cell_length_a 4.2
_cell_length_b 4.2
_cell_length_c 4.2
_cell_angle_alpha 90
_cell_angle_beta 90
_cell_angle_gamma 90
loop_
_space_group_symop_operation_xyz
${operators}
loop_
_atom_site_label
_atom_site_type_symbol
_atom_site_fract_x
_atom_site_fract_y
_atom_site_fract_z
_atom_site_occupancy
${rows}
`;

describe('alternate conformations', () => {
  const text = [
    pdbLine(1, 'ZN', ' ', 'ZN', 'A', 1, 0, 0, 0, 1, 'Zn'),
    pdbLine(2, 'SG', 'A', 'CYS', 'A', 2, 2.3, 0, 0, 0.7, 'S'),
    pdbLine(3, 'SG', 'B', 'CYS', 'A', 2, 0, 2.5, 0, 0.3, 'S'),
    pdbLine(4, 'O', 'A', 'HOH', 'A', 3, 0, 0, 2.1, 0.6, 'O'),
    pdbLine(5, 'O', 'B', 'HOH', 'A', 3, 0, 0, 5.2, 0.4, 'O'),
    pdbLine(6, 'N', 'A', 'HIS', 'A', 4, 0, 0, -2.0, 0.5, 'N'),
    pdbLine(7, 'N', 'C', 'HIS', 'A', 4, 0, -5.5, -2.0, 0.5, 'N'),
  ].join('\n');

  test('residues in contact with the same labels go together, others combine freely', () => {
    const sites = findSites(readStructure(text), { absorber: 'Zn', radius: 6 });
    // CYS and HOH (labels A, B, in contact) are one choice, HIS (A, C) another: four combinations.
    expect(sites.map(({ variant, weight }) => [variant, weight.toFixed(4)])).toEqual([
      ['A+A', '0.3250'],
      ['A+C', '0.3250'],
      ['B+A', '0.1750'],
      ['B+C', '0.1750'],
    ]);
    expect(sites.reduce((sum, { weight }) => sum + weight, 0)).toBeCloseTo(1, 12);
    expect(sites[0]!.atoms.map(({ name, occupancy }) => [name, occupancy])).toEqual([
      ['ZN', 1],
      ['N', 1],
      ['O', 1],
      ['SG', 1],
    ]);
  });

  test('beyond the limit the least likely are dropped, the rest rescaled, and it is said', () => {
    const sites = findSites(readStructure(text), { absorber: 'Zn', radius: 6, maxVariants: 2 });
    expect(sites.map(({ weight }) => weight)).toEqual([0.5, 0.5]);
    expect(codes(sites[0]!)).toContain('variants-dropped');
  });

  test('an alternate absorber sees its own alternates only', () => {
    const split = [
      pdbLine(1, 'FE', 'A', 'FE', 'A', 1, 0, 0, 0, 0.6, 'Fe'),
      pdbLine(2, 'FE', 'B', 'FE', 'A', 1, 0.7, 0, 0, 0.4, 'Fe'),
      pdbLine(3, 'O', 'A', 'HOH', 'A', 2, 2.0, 0, 0, 0.6, 'O'),
      pdbLine(4, 'O', 'B', 'HOH', 'A', 2, 2.9, 0, 0, 0.4, 'O'),
    ].join('\n');
    const sites = findSites(readStructure(split), { absorber: 'Fe', radius: 5 });
    expect(sites.map(({ label, weight, atoms }) => [label, weight, atoms.length, atoms[1]!.distance.toFixed(3)])).toEqual([
      ['FE FE A1 (A)', 0.6, 2, '2.000'],
      ['FE FE A1 (B)', 0.4, 2, '2.200'],
    ]);
  });

  test('a site shared by two elements: the average over variants has the occupancies of the file', () => {
    const mixed = readStructure(
      cubic('Fe1 Fe 0 0 0 0.7\nMg1 Mg 0 0 0 0.3\nO1 O 0.5 0.5 0.5 1', "'x,y,z'\n'x,y+1/2,z+1/2'\n'x+1/2,y,z+1/2'\n'x+1/2,y+1/2,z'"),
    );
    const sites = findSites(mixed, { absorber: 'Fe', radius: 3.2 });
    const count = (element: string) =>
      sites.reduce((sum, { weight, atoms }) => sum + weight * atoms.slice(1).filter((atom) => atom.element === element).length, 0);
    expect(sites.length).toBe(2);
    expect(count('O')).toBeCloseTo(6, 12);
    expect(count('Fe')).toBeCloseTo(12 * 0.7, 12);
    expect(count('Mg')).toBeCloseTo(12 * 0.3, 12);
  });
});

describe('crystals', () => {
  test('a metal on a twofold axis written with occupancy 0.5 in a PDB file is whole, its mate outside the cell found', () => {
    const text = [
      'CRYST1   20.000   20.000   20.000  90.00  90.00  90.00 P 1 2 1',
      pdbLine(1, 'ZN', ' ', 'ZN', 'A', 1, 0, 5, 0, 0.5, 'Zn'),
      pdbLine(2, 'O', ' ', 'HOH', 'A', 2, 1.5, 5, 1.4, 1, 'O'),
    ].join('\n');
    const [site, ...others] = findSites(readStructure(text), { absorber: 'Zn', radius: 4 });
    expect(others).toEqual([]);
    expect(site!.atoms.map(({ name, symmetry, occupancy }) => [name, symmetry, occupancy])).toEqual([
      ['ZN', 'x,y,z', 1],
      ['O', '-x,y,-z', 1],
      ['O', 'x,y,z', 1],
    ]);
  });

  test('packing neighbours across a crystal contact are in the cluster with their operation', () => {
    const text = [
      'CRYST1   10.000   20.000   20.000  90.00  90.00  90.00 P 1',
      pdbLine(1, 'ZN', ' ', 'ZN', 'A', 1, 0.5, 5, 5, 1, 'Zn'),
      pdbLine(2, 'OD', ' ', 'ASP', 'A', 2, 8.5, 5, 5, 1, 'O'),
    ].join('\n');
    const [site] = findSites(readStructure(text), { absorber: 'Zn', radius: 4 });
    expect(site!.atoms[1]).toMatchObject({ name: 'OD', distance: 2, symmetry: 'x-1,y,z' });
  });

  test('a fully occupied atom a little off a mirror is put on it, and said; a half occupied one stays split', () => {
    const operators = "'x,y,z'\n'-x,y,z'";
    const [near] = findSites(readStructure(cubic('Fe1 Fe 0.03 0.2 0.2 1\nO1 O 0.5 0.2 0.2 1', operators)), { absorber: 'Fe', radius: 3 });
    expect(near!.atoms[0]!.position[0]).toBeCloseTo(0, 12);
    expect(codes(near!)).toContain('near-special-position');
    // The oxygens left and right choose apart; nearer left and farther right is the mirror image of the other way round.
    const half = findSites(readStructure(cubic('O1 O 0.03 0.2 0.2 0.5\nFe1 Fe 0.5 0.2 0.2 1', operators)), { absorber: 'Fe', radius: 2.3 });
    const seen = half.map(
      ({ weight, atoms }) => `${weight} ${atoms.slice(1).map(({ distance, occupancy }) => `${distance.toFixed(3)} ${occupancy}`)}`,
    );
    expect(seen.sort()).toEqual(['0.25 1.974 1,1.974 1', '0.25 2.226 1,2.226 1', '0.5 1.974 1,2.226 1']);
  });

  test('sites are weighted by how often the cell holds them and by occupancy', () => {
    const sites = findSites(readStructure(cubic('Fe1 Fe 0 0 0 1\nFe2 Fe 0.3 0.4 0.5 0.8', "'x,y,z'\n'-x,-y,-z'")), {
      absorber: 'Fe',
      radius: 2,
    });
    expect(sites.map(({ label, weight }) => [label, weight.toFixed(6)])).toEqual([
      ['Fe1', (1 / 2.6).toFixed(6)],
      ['Fe2', (1.6 / 2.6).toFixed(6)],
    ]);
  });

  test('a slab repeats along two axes only', () => {
    const text = `1\nLattice="3 0 0 0 3 0 0 0 3" pbc="T T F"\nCu 0 0 0\n`;
    const [slab] = findSites(readStructure(text), { absorber: 'Cu', radius: 3.1 });
    expect(slab!.atoms.length).toBe(5);
    expect(slab!.atomDensity).toBeUndefined();
    expect(findSites(readStructure(text.replace('T T F', 'T T T')), { absorber: 'Cu', radius: 3.1 })[0]!.atoms.length).toBe(7);
    expect(findSites(readStructure(text.replace('T T F', 'F F F')), { absorber: 'Cu', radius: 3.1 })[0]!.atoms.length).toBe(1);
  });
});

test('an absorber too near its own symmetry copy is warned of', () => {
  const [site] = findSites(readStructure(cubic('Fe1 Fe 0.2 0.2 0.2 1\nO1 O 0.5 0.7 0.7 1', "'x,y,z'\n'-x,y,z'")), {
    absorber: 'Fe',
    radius: 3,
  });
  expect(codes(site!)).toContain('symmetry-copy-close');
  expect(site!.atoms[1]!.distance).toBeCloseTo(0.4 * 4.2, 12);
});

/** A simple cubic block of n³ iron atoms. */
function lattice(n: number) {
  const rows = Array.from(
    { length: n ** 3 },
    (_, i) => `Fe ${2.5 * (i % n)} ${2.5 * (Math.floor(i / n) % n)} ${2.5 * Math.floor(i / n / n)}`,
  );
  return readStructure(`${n ** 3}\n\n${rows.join('\n')}\n`);
}

describe('what is refused, in one line', () => {
  const two = (d: number) => readStructure(`2\n\nFe 0 0 0\nO ${d} 0 0\n`);
  test.each([
    [
      () => findSites(two(2), { absorber: 'Cu', radius: 5 }),
      'there is no Cu in the structure: neither an element nor an atom label; it holds Fe, O',
    ],
    [
      () => findSites(two(2), { absorber: 'Fe7', radius: 5 }),
      'there is no Fe7 in the structure: neither an element nor an atom label; it holds Fe, O',
    ],
    [
      () => findSites(two(0.4), { absorber: 'Fe', radius: 5 }),
      /Fe1 \(line 3\) and O1 \(line 4\) are 0.400 Å apart, closer than atoms can be/,
    ],
    [() => findSites(two(2), { absorber: 'Fe', radius: 0 }), /radius is 0 Å/],
    [() => findSites(readStructure('1\n\nO 0 0 0'), { radius: 5 }), /no element here has an edge/],
    [
      () => findSites(readStructure(cubic('Fe1 Fe 0 0 0 1').replaceAll('4.2', '0.42')), { radius: 5 }),
      /denser than any crystal; its lengths should be in Å/,
    ],
    [
      () => findSites(readStructure(cubic('Fe1 Fe 0 0 0 1').replace('4.2', '0.0001').replace('4.2', '1e6')), { radius: 5 }),
      /no volume|denser/,
    ],
    [() => findSites(lattice(22), { absorber: 'Fe', radius: 14 }), /^10648 absorbing Fe atoms .* choose one by its label, like "Fe\d+"/],
    [() => frameOf(two(2), 1), /no frame 2; the file has 1/],
  ])('case %#', (act, message) => {
    expect(act).toThrow(InputError);
    expect(act).toThrow(message);
  });
});

test('a molecule wholly inside has an infinite radius; cut, the given one', () => {
  const structure = readStructure('3\n\nFe 0 0 0\nO 2 0 0\nO 0 0 6\n');
  expect(findSites(structure, { absorber: 'Fe', radius: 7 })[0]!.radius).toBe(Infinity);
  expect(findSites(structure, { absorber: 'Fe', radius: 5 })[0]!.radius).toBe(5);
});

test('warnings: partial, truncated, two metals, crowded, without hydrogens', () => {
  const text = [
    pdbLine(1, 'FE', ' ', 'FE', 'A', 1, 0, 0, 0, 1, 'Fe'),
    pdbLine(2, 'FE', ' ', 'FE', 'A', 2, 2.7, 0, 0, 1, 'Fe'),
    pdbLine(3, 'S', ' ', 'CYS', 'A', 3, 1.35, 1.8, 0, 0.8, 'S'),
    pdbLine(4, 'C', ' ', 'CYS', 'A', 3, 1.35, 2.7, 0, 1, 'C'),
  ].join('\n');
  const [site] = findSites(readStructure(text), { absorber: 'FE FE A1', radius: 6 });
  expect(codes(site!)).toEqual(
    expect.arrayContaining(['occupancy-below-one', 'truncated-coordination', 'two-metals', 'close-neighbours', 'no-hydrogens']),
  );
  const whole = readStructure('7\n\nFe 0 0 0\nO 2 0 0\nO -2 0 0\nO 0 2 0\nO 0 -2 0\nO 0 0 2\nO 0 0 -2\n');
  expect(codes(findSites(whole, { absorber: 'Fe', radius: 6 })[0]!)).toEqual(['small-molecule']);
});

test('bonding: the ligands, not the metal behind the bridge, nor the carbon beyond', () => {
  const text = '6\n\nFe 0 0 0\nO 1.8 0 0\nFe 2.7 0.9 0\nN 0 2.2 0\nC 0 2.9 1.1\nH 0.5 0 1.9\n';
  const [site] = findSites(readStructure(text), { absorber: 'Fe1', radius: 6 });
  expect(coordinationShell(site!).map(({ element }) => element)).toEqual(['O', 'N']);
});

test('describeSites: metals first, valence of an octahedral iron, precision with its origin', () => {
  const { sites, structure, warnings } = describeSites(
    readStructure('7\ninvented\nFe 0 0 0\nO 2.015 0 0\nO -2.015 0 0\nO 0 2.015 0\nS 0 -2.4 0\nO 0 0 2.015\nO 0 0 -2.015\n'),
    { file: 'a.xyz' },
  );
  expect(structure).toMatchObject({ file: 'a.xyz', format: 'xyz', atoms: 7, frames: 1, cell: null, spaceGroup: null, title: 'invented' });
  expect(structure.precision.origin).toMatch(/assumed/);
  expect(sites.map(({ element }) => element)).toEqual(['Fe', 'S']);
  expect(sites[0]!.coordination).toBe(6);
  // Five exp((1.759 − 2.015)/0.37) = 0.50063 and one exp((2.149 − 2.4)/0.37) = 0.50744.
  const ferric = sites[0]!.valence.find(({ oxidationState }) => oxidationState === 3)!;
  expect(ferric.sum).toBeCloseTo(5 * 0.50063 + 0.50744, 3);
  // Errors of 0.015 Å an axis in both atoms: 0.0212 Å a bond, six bonds of half a unit.
  expect(ferric.sd).toBeCloseTo((Math.sqrt(6) * 0.5 * 0.015 * Math.SQRT2) / 0.37, 2);
  expect(warnings.map(({ code }) => code)).toContain('small-molecule');
});

describe('disorder about a symmetry element (CIF groups below 0)', () => {
  const disordered = (rows: string, operators: string) =>
    readStructure(
      cubic(rows, operators)
        .replaceAll('4.2', '10')
        .replace('_atom_site_occupancy', '_atom_site_occupancy\n_atom_site_disorder_assembly\n_atom_site_disorder_group'),
    );
  const list = (structure: ReturnType<typeof readStructure>, absorber: string) =>
    findSites(structure, { absorber, radius: 4 }).map(({ weight, atoms }) => [
      weight,
      atoms.map(({ name, distance, occupancy }) => `${name} ${distance.toFixed(3)} ${occupancy}`).join(', '),
    ]);

  test('a ligand beside its mirror image is one ligand; ways that are mirror images are one', () => {
    const structure = disordered(
      'Fe1 Fe 0 0 0 1 . .\nO1 O 0.2 0 0.05 0.5 . -1\nC1 C 0.3 0.03 0.12 0.5 . -1\nN1 N -0.2 0 0 1 . .',
      "'x,y,z'\n'x,y,-z'",
    );
    // |O1| = 10 √(0.2² + 0.05²), |C1| = 10 √(0.3² + 0.03² + 0.12²)
    expect(list(structure, 'Fe')).toEqual([[1, 'Fe1 0.000 1, N1 2.000 1, O1 2.062 1, C1 3.245 1']]);
  });

  test('an absorber off the mirror sees the near and the far half of a ligand, each half of the time', () => {
    const structure = disordered('Fe1 Fe 0 0 0.15 1 . .\nO1 O 0.2 0 0.05 0.5 . -1\nC1 C 0.3 0 0.1 0.5 . -1', "'x,y,z'\n'x,y,-z'");
    // 10 √(0.2² + 0.1²) and 10 √(0.2² + 0.2²); the carbon goes with its oxygen: 10 √(0.3² + 0.05²) or 10 √(0.3² + 0.25²)
    expect(list(structure, 'Fe')).toEqual([
      [0.5, 'Fe1 0.000 1, O1 2.828 1, Fe1 3.000 1, C1 3.905 1'],
      [0.5, 'Fe1 0.000 1, O1 2.236 1, Fe1 3.000 1, C1 3.041 1'],
    ]);
  });

  test('two ligands at two mirrors choose apart; an absorber never meets its own image', () => {
    const two = disordered('Fe1 Fe 0 0 0.25 1 . .\nO1 O 0 0 0.05 0.5 . -1\nS1 S 0 0 0.45 0.5 . -1', "'x,y,z'\n'x,y,-z'");
    expect(list(two, 'Fe').map(([weight]) => weight)).toEqual([0.25, 0.25, 0.25, 0.25]);
    const split = disordered('Cu1 Cu 0.02 0 0 0.5 . -1\nO1 O 0.2 0 0 0.5 . -1\nN1 N 0 0.2 0 1 . .', "'x,y,z'\n'-x,-y,-z'");
    expect(list(split, 'Cu')).toEqual([[1, 'Cu1 0.000 1, O1 1.800 1, N1 2.010 1, N1 2.010 1']]);
  });

  test('an atom half there beside its own image, without a word of disorder, is in one place at a time', () => {
    const structure = disordered('Fe1 Fe 0 0 0.25 1 . .\nO1 O 0 0.2 0.03 0.5 . .\nS1 S 0.25 0 0.25 1 . .', "'x,y,z'\n'x,y,-z'");
    // 10 √(0.2² + 0.22²) or 10 √(0.2² + 0.28²)
    expect(list(structure, 'Fe')).toEqual([
      [0.5, 'Fe1 0.000 1, S1 2.500 1, O1 3.441 1'],
      [0.5, 'Fe1 0.000 1, S1 2.500 1, O1 2.973 1'],
    ]);
  });
});
