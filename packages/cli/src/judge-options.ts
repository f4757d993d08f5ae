/** What `judge` and `sweep` share: their options, and how flags become evidence. */
import { existsSync } from 'node:fs';
import { basename } from 'node:path';
import { type Evidence, type JudgeOptions, reduce } from '@ringtrue/core';
import { type Command, Option } from 'commander';
import { aboutFile, UsageError } from './command.js';
import { addEvidenceOptions, type EvidenceFlags, number, range, readScans, reduceOptionsOf } from './evidence-options.js';

export interface JudgeFlags extends EvidenceFlags, JudgeOptions {
  readonly data: readonly string[];
  readonly absorber: readonly string[];
  readonly temperature?: readonly number[];
  readonly kRange?: readonly (readonly [number, number])[];
  readonly rRange?: readonly (readonly [number, number])[];
  readonly kWeight?: readonly number[];
}

/** An option that may be given once a spectrum. */
export function each<T>(parse: (text: string) => T): (text: string, before?: readonly T[]) => readonly T[] {
  return (text, before = []) => [...before, parse(text)];
}

/** Options that say how evidence is compared and what is assumed; `judge` and `sweep` share them. */
export function addJudgeOptions(command: Command): Command {
  return addEvidenceOptions(command)
    .option('--temperature <K>', 'temperature of the sample, K (default 300)', each(number))
    .option('--k-range <from,to>', 'window in k, Å⁻¹ (default 3 to where the oscillations drown)', each(range))
    .option('--r-range <from,to>', 'window in R, Å (default 1 to 1 Å below the radius, at most 4)', each(range))
    .option('--k-weight <n>', 'power of k (default 3)', each(number))
    .option('--rivals', 'judge rival structures made from each candidate too')
    .addOption(
      new Option('--thermal <model>', 'thermal disorder (default: what suits the structure)').choices([
        'debye',
        'einstein',
        'springs',
        'none',
      ]),
    )
    .option('--debye-temperature <K>', 'Debye temperature, K (default: one is assumed, with a warning)', number)
    .addOption(new Option('--self-energy <kind>', 'self-energy of the photoelectron').choices(['mean', 'hedin-lundqvist', 'dirac-hara']))
    .option('--radius <angstrom>', 'longest half path length, Å (default 5)', number)
    .option('--max-legs <n>', 'most legs of a path, 2 to 5 (default 4)', number)
    .option('--coordinate-sd <angstrom>', 'standard uncertainty of every distance, Å (default: what the structure states)', number)
    .option(
      '--sample-spread <factor>',
      'how much wider the sample may be than the coordinates: factor of the additional static disorder (default 1)',
      number,
    )
    .option('--model-error <part>', 'part of the rms signal that even the right structure is missed by (default as calibrated)', number)
    .addOption(
      new Option('--sampling <when>', 'draw from the posterior instead of the Gaussian about its best point').choices([
        'auto',
        'always',
        'never',
      ]),
    );
}

/** One data set for each --data, with its own or the common options. */
export function evidenceOf(flags: JudgeFlags): Evidence[] {
  const sets = flags.data.length;
  const pick = <T>(name: string, values: readonly T[] | undefined, s: number): T | undefined => {
    if (values === undefined) return undefined;
    if (values.length !== 1 && values.length !== sets)
      throw new UsageError(`--${name}: give it once, or once for each of the ${sets} --data; got ${values.length}`);
    return values.length === 1 ? values[0] : values[s];
  };
  return flags.data.map((data, s) => {
    const files = scansOf(data);
    const absorber = pick('absorber', flags.absorber, s)!;
    const reduction = aboutFile(data, () => reduce(readScans(files, flags), { ...elementOf(absorber), ...reduceOptionsOf(flags) }));
    const temperature = pick('temperature', flags.temperature, s);
    const kRange = pick('k-range', flags.kRange, s);
    const rRange = pick('r-range', flags.rRange, s);
    const kWeight = pick('k-weight', flags.kWeight, s);
    return {
      file: files.map((file) => basename(file)).join(', '),
      reduction,
      absorber,
      ...(flags.edge === undefined ? {} : { edge: flags.edge }),
      ...(temperature === undefined ? {} : { temperature }),
      ...(kRange === undefined ? {} : { kRange }),
      ...(rRange === undefined ? {} : { rRange }),
      ...(kWeight === undefined ? {} : { kWeight }),
    };
  });
}

/** A file whose own name has a comma is one file. */
export const scansOf = (data: string): string[] => (existsSync(data) ? [data] : data.split(',').filter((file) => file !== ''));

/** Raw absorption wants its element: it is the absorber's, where that is named by element. */
const elementOf = (absorber: string): { element?: string } => (/^[A-Z][a-z]?$/.test(absorber) ? { element: absorber } : {});

export function judgeOptionsOf(flags: JudgeFlags): JudgeOptions {
  const { thermal, debyeTemperature, selfEnergy, radius, maxLegs, rivals, coordinateSd, sampleSpread, modelError, sampling } = flags;
  return {
    ...(thermal === undefined ? {} : { thermal }),
    ...(debyeTemperature === undefined ? {} : { debyeTemperature }),
    ...(selfEnergy === undefined ? {} : { selfEnergy }),
    ...(radius === undefined ? {} : { radius }),
    ...(maxLegs === undefined ? {} : { maxLegs }),
    ...(rivals === undefined ? {} : { rivals }),
    ...(coordinateSd === undefined ? {} : { coordinateSd }),
    ...(sampleSpread === undefined ? {} : { sampleSpread }),
    ...(modelError === undefined ? {} : { modelError }),
    ...(sampling === undefined ? {} : { sampling }),
  };
}
