/** Every demo file as text, from the builders and the kept truths: the same bytes whenever it is asked. */
import { readFileSync } from 'node:fs';
import { normalDeviates } from '../../packages/core/src/numerics/random.js';
import { readStructure } from '../../packages/core/src/structure/index.js';
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import { crystallise } from './crystal.js';
import { mononuclear, OPTIMISED_DISTANCES, oxidase, REDUCED_DISTANCES, TRUE_DISTANCES } from './oxidase.js';
import { redoxin } from './redoxin.js';
import { asChi, asColumns, asXdi, type ScanSettings, scan, type TrueSpectrum } from './scans.js';
import type { TruthName } from './truth.js';
import { mmcif, pdb, xyz } from './write.js';

const INVENTED = 'Invented organism, protein, coordinates and statistics.';
const INVENTED_DATA = 'Invented spectrum: computed, with noise added (demo-structures/README.md). No measurement stands behind it.';

/** File name → text. */
export function demoFiles(): Map<string, string> {
  return new Map([...structureFiles(), ...spectrumFiles()]);
}

export function structureFiles(): [string, string][] {
  const room = crystallise(
    oxidase(REDUCED_DISTANCES),
    {
      title: 'lanternweed oxidase at room temperature (invented)',
      cell: [23.6, 25.2, 27.4],
      temperature: 293,
      resolution: 1.45,
      rWork: 0.151,
      rFree: 0.182,
      completeness: 96.4,
      metalU: 0.14,
      anisotropic: true,
      holdShell: true,
    },
    normalDeviates(21),
  );
  const low = crystallise(
    oxidase(TRUE_DISTANCES),
    {
      title: 'lanternweed oxidase, low dose (invented)',
      cell: [23.4, 25.0, 27.1],
      temperature: 100,
      resolution: 1.2,
      rWork: 0.129,
      rFree: 0.149,
      completeness: 98.7,
      metalU: 0.07,
      anisotropic: false,
      holdShell: false,
    },
    normalDeviates(22),
  );
  const carrier = crystallise(
    redoxin(),
    {
      title: 'lanternweed redoxin (invented)',
      cell: [17.2, 18.4, 19.6],
      temperature: 100,
      resolution: 1.15,
      rWork: 0.118,
      rFree: 0.137,
      completeness: 99.1,
      metalU: 0.06,
      anisotropic: false,
      holdShell: false,
    },
    normalDeviates(23),
  );
  const bare = (model: ReturnType<typeof oxidase>) =>
    model.atoms.filter(({ name, residue }) => !(isAmino(residue.name) && /^(N|C|O)$/.test(name)));
  return [
    ['oxidase-room-temperature.pdb', pdb(room.atoms, room.crystal, [INVENTED])],
    ['oxidase-low-dose.cif', mmcif(low.atoms, low.crystal, [INVENTED])],
    ['oxidase-model-one.xyz', xyz('lanternweed oxidase, optimised model one (invented), heavy atoms', bare(oxidase(OPTIMISED_DISTANCES)))],
    [
      'oxidase-model-two.xyz',
      xyz('lanternweed oxidase, optimised model two (invented), heavy atoms', bare(oxidase(TRUE_DISTANCES, 'exchanged'))),
    ],
    ['oxidase-model-three.xyz', xyz('lanternweed oxidase, optimised model three (invented), heavy atoms', bare(mononuclear()))],
    ['redoxin.pdb', pdb(carrier.atoms, carrier.crystal, [INVENTED])],
    ['redoxin.cif', mmcif(carrier.atoms, carrier.crystal, [INVENTED])],
    ['tideglass.xyz', tideglassXyz()],
  ];
}

const isAmino = (name: string): boolean => /^(ASP|GLU|HIS|CYS)$/.test(name);

/** One cell of tideglass as extended XYZ. */
function tideglassXyz(): string {
  const { cell, atoms } = readStructure(readFileSync(new URL('../tideglass.cif', import.meta.url), 'utf8'));
  const { a, c } = cell!;
  const u = atoms.find(({ element }) => element === 'O')!.position[0] / a;
  const places: [string, Vec3][] = [
    ['Mn', [0, 0, 0]],
    ['Mn', [0.5, 0.5, 0.5]],
    ['O', [u, u, 0]],
    ['O', [1 - u, 1 - u, 0]],
    ['O', [0.5 + u, 0.5 - u, 0.5]],
    ['O', [0.5 - u, 0.5 + u, 0.5]],
  ];
  return xyz(
    `Lattice="${a} 0 0 0 ${a} 0 0 0 ${c}" Properties=species:S:1:pos:R:3 pbc="T T T" comment="tideglass (invented)"`,
    places.map(([element, f]) => ({ element, position: [a * f[0], a * f[1], c * f[2]] as const })),
  );
}

/** S0² and energies of the truths. */
const SPECTRA: Readonly<Record<TruthName, Omit<TrueSpectrum, 'chi'>>> = {
  oxidase: { element: 'Mn', edgeEv: 6550.6, offsetEv: 1.5, s02: 0.85 },
  'oxidase-reduced': { element: 'Mn', edgeEv: 6547.4, offsetEv: 1.5, s02: 0.85 },
  redoxin: { element: 'Fe', edgeEv: 7119.2, offsetEv: 2, s02: 0.85 },
  tideglass: { element: 'Mn', edgeEv: 6552.2, offsetEv: 1, s02: 0.85 },
};

export const truthFile = (name: TruthName): URL => new URL(`truth/${name}.csv`, import.meta.url);

/** Columns of a kept truth: k, χ, χ of the first frames. */
export function readTruth(name: TruthName): readonly Float64Array[] {
  const rows = readFileSync(truthFile(name), 'utf8')
    .split('\n')
    .filter((line) => /^\d/.test(line))
    .map((line) => line.split(',').map(Number));
  return [0, 1, 2].map((column) => Float64Array.from(rows, (row) => row[column]!));
}

const spectrumOf = (name: TruthName): TrueSpectrum => ({ ...SPECTRA[name], chi: readTruth(name)[1]! });

/** Part of the sample reduced before scan n of the dose series, n from 0. */
export const reducedPart = (n: number): number => 1 - Math.exp(-n / 12);

export function spectrumFiles(): [string, string][] {
  const files: [string, string][] = [];
  const normal = normalDeviates(31);
  const truth = spectrumOf('oxidase');
  const reduced = spectrumOf('oxidase-reduced');
  const fluorescence: ScanSettings = { detection: 'fluorescence', kMax: 13.8, noise: 0.0011 };
  const transmission: ScanSettings = { detection: 'transmission', kMax: 13.8, noise: 0.0004 };
  for (let n = 1; n <= 3; n++) {
    const words = [INVENTED_DATA, `lanternweed oxidase, frozen solution, 15 K, scan ${n} of 3, each on a fresh spot`];
    files.push([`oxidase-scan-${n}.xdi`, asXdi(scan(truth, fluorescence, normal), 'fluorescence', 'Mn', words)]);
  }
  for (let n = 1; n <= 8; n++) {
    const settings = { ...fluorescence, kMax: 11, noise: 0.0013, mixture: { other: reduced, part: reducedPart(n - 1) } };
    const words = [INVENTED_DATA, `lanternweed oxidase, frozen solution, 15 K, one spot, scan ${n} of 8`];
    files.push([`oxidase-dose-${n}.dat`, asColumns(scan(truth, settings, normal), 'fluorescence', words)]);
  }
  const iron = spectrumOf('redoxin');
  for (let n = 1; n <= 3; n++) {
    const words = [INVENTED_DATA, `lanternweed redoxin, frozen solution, 15 K, scan ${n} of 3`];
    files.push([`redoxin-scan-${n}.dat`, asColumns(scan(iron, fluorescence, normal), 'fluorescence', words)]);
  }
  const glass = spectrumOf('tideglass');
  for (let n = 1; n <= 3; n++) {
    const words = [INVENTED_DATA, `tideglass, pressed powder, 15 K, scan ${n} of 3`];
    files.push([`tideglass-scan-${n}.xdi`, asXdi(scan(glass, transmission, normal), 'transmission', 'Mn', words)]);
  }
  for (const [name, spectrum, noise] of [
    ['oxidase', truth, 0.0006],
    ['redoxin', iron, 0.0006],
    ['tideglass', glass, 0.0003],
  ] as const)
    files.push([`${name}-chi.dat`, asChi(spectrum, 13.5, noise, normal, [INVENTED_DATA, `chi(k) of ${name}, not weighted, 15 K`])]);
  return files;
}
