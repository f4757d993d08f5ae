/**
 * How long a judgement takes, and how it grows with paths and unknowns: node --import tsx --conditions=source test/bench/judgement.ts
 *
 * The invented oxidase against its three scans. One JSON line a case: paths, unknowns, seconds of prediction, of the judgement alone
 * (best point, power, refits; bands apart), of all rivals, and their number. Least of three runs.
 */
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { judge, readScan, readStructure, reduce } from '../../packages/core/src/index.js';
import { dataVector } from '../../packages/core/src/judgement/data-vector.js';
import { prepareTrial } from '../../packages/core/src/judgement/trial.js';
import { ENERGY_ORIGIN } from '../../packages/core/src/predict/unknowns.js';

const text = (name: string): string => readFileSync(fileURLToPath(new URL(`../../demo-structures/${name}`, import.meta.url)), 'utf8');
const now = (): number => performance.now() / 1000;
const oxidase = reduce(
  [1, 2, 3].map((n) => readScan(text(`oxidase-scan-${n}.xdi`))),
  { element: 'Mn' },
);
const redoxin = reduce(
  [1, 2, 3].map((n) => readScan(text(`redoxin-scan-${n}.dat`))),
  { element: 'Fe' },
);
const CASES = [
  { file: 'redoxin.pdb', absorber: 'Fe', reduction: redoxin, radius: 5, maxLegs: 4 },
  { file: 'oxidase-model-one.xyz', absorber: 'Mn1', reduction: oxidase, radius: 4, maxLegs: 3 },
  { file: 'oxidase-model-one.xyz', absorber: 'Mn1', reduction: oxidase, radius: 4.5, maxLegs: 4 },
  { file: 'oxidase-model-one.xyz', absorber: 'Mn', reduction: oxidase, radius: 5, maxLegs: 4 },
];

for (const { file, absorber, reduction, radius, maxLegs } of CASES) {
  const structure = readStructure(text(file));
  const evidence = { file: 'data', reduction, absorber, temperature: 15, rRange: [1, 3.5] as const };
  const kRange = [3, 13] as const;
  const options = { radius, maxLegs };
  const least = { prediction: Infinity, judgement: Infinity, rivals: Infinity, withBands: Infinity };
  let made = 0;
  let unknowns = 0;
  for (let run = 0; run < 3; run++) {
    const candidates = [{ file, structure }];
    const bare = judge(candidates, [{ ...evidence, kRange }], { ...options, rivals: true, bands: false }, { version: '', now });
    const full = judge(candidates, [{ ...evidence, kRange }], { ...options, bands: true }, { version: '', now });
    least.prediction = Math.min(least.prediction, bare.timing.prediction);
    least.judgement = Math.min(least.judgement, bare.timing.judgement);
    least.rivals = Math.min(least.rivals, bare.timing.rivals);
    least.withBands = Math.min(least.withBands, full.timing.judgement);
    made = bare.candidates[0]!.rivals.length;
    unknowns = bare.candidates[0]!.parameters.length;
  }
  const vector = dataVector(reduction, { kRange, rRange: [1, 3.5], kWeight: 3 }, 0.1, 'data');
  const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  const request = { vector, absorber, edge: 'K', temperature: 15, file: 'data', energyOrigin: ENERGY_ORIGIN } as const;
  const { spectra } = prepareTrial(structure, [request], options, clock);
  const paths = spectra[0]!.sites.reduce((sum, { signal }) => sum + signal.paths.length, 0);
  process.stdout.write(`${JSON.stringify({ file, absorber, radius, maxLegs, paths, unknowns, rivals: made, seconds: least })}\n`);
}
