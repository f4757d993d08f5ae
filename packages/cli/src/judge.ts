/** `ringtrue judge`: structures on trial against measured spectra. */
import { existsSync } from 'node:fs';
import { basename } from 'node:path';
import {
  type CandidateJudgement,
  type Evidence,
  type Judgement,
  type JudgeOptions,
  judge,
  readStructure,
  reduce,
  VERSION,
} from '@ringtrue/core';
import { judgementFiles } from '@ringtrue/report';
import { type Command, Option } from 'commander';
import { aboutFile, runCommand, UsageError } from './command.js';
import { addEvidenceOptions, type EvidenceFlags, notesOf, number, range, readScans, reduceOptionsOf } from './evidence-options.js';
import { readText } from './files.js';
import { toJson } from './json.js';
import { dpi } from './png.js';
import { showProgress } from './progress.js';
import { candidateExtras, runRecord, writeResult } from './result-folder.js';
import { plain, textTable } from './terminal.js';

interface Flags extends EvidenceFlags, JudgeOptions {
  readonly data: readonly string[];
  readonly absorber: readonly string[];
  readonly temperature?: readonly number[];
  readonly kRange?: readonly (readonly [number, number])[];
  readonly rRange?: readonly (readonly [number, number])[];
  readonly kWeight?: readonly number[];
  readonly png?: number;
}

const EXAMPLES = `
Examples:
  ringtrue judge crystal.pdb model.xyz --data scan1.xdi,scan2.xdi,scan3.xdi --absorber Mn --temperature 10
  ringtrue judge crystal.cif --data sample.chi --absorber Mn --k-range 3,12 --r-range 1,4 --rivals --json
  ringtrue judge site.pdb --data mn.xdi --data fe.xdi --absorber Mn --absorber Fe --temperature 10 --out finding

Repeated scans of one spectrum are joined by commas; each further --data is another spectrum of the same sample, judged
together with the first. Options that belong to a spectrum are given once for all of them, or once for each in the same order.
A finding says consistent or not under what was assumed; it is never a proof.`;

/** An option that may be given once a spectrum. */
function each<T>(parse: (text: string) => T): (text: string, before?: readonly T[]) => readonly T[] {
  return (text, before = []) => [...before, parse(text)];
}

export function addJudge(program: Command): void {
  addEvidenceOptions(
    program
      .command('judge')
      .summary('is a structure consistent with measured data?')
      .description('Judge structures against measured EXAFS: consistent or not, what moved, distances too long, what else is not excluded.')
      .argument('<structure...>', 'coordinate files, the candidates')
      .requiredOption(
        '--data <scans>',
        'a measured spectrum: files joined by commas are repeated scans of it; repeat for more spectra',
        each(String),
      )
      .requiredOption('--absorber <element>', 'absorbing element, or the label of one atom', each(String)),
  )
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
    )
    .option('--out <folder>', 'write report (HTML, Markdown), figures, tables, references and result.json into a folder')
    .option('--png <dpi>', 'with --out: each figure as PNG too, 8 cm wide at so many dots per inch', dpi)
    .addHelpText('after', EXAMPLES)
    .action((files: string[], flags: Flags) => runCommand(() => run(files, flags)));
}

async function run(files: readonly string[], flags: Flags): Promise<void> {
  if (flags.png !== undefined && flags.out === undefined) throw new UsageError('--png goes with --out');
  const evidence = evidenceOf(flags);
  const candidates = files.map((file) => {
    const text = readText(file);
    return { file: basename(file), structure: aboutFile(file, () => readStructure(text, { fileName: file })) };
  });
  const progress = showProgress();
  const judgement = judge(candidates, evidence, judgeOptionsOf(flags), {
    version: VERSION,
    now: () => performance.now() / 1000,
    ...(progress ? { running: progress.running } : {}),
  });
  progress?.clear();
  const notes = notesOf([...judgement.warnings, ...judgement.candidates.flatMap(({ warnings }) => warnings)]);
  if (flags.out !== undefined) {
    const options = judgeOptionsOf(flags);
    const report = judgementFiles(judgement, {
      record: runRecord([...files, ...flags.data.flatMap(scansOf)]),
      reductions: evidence.map(({ reduction }) => reduction),
      candidates: candidateExtras(candidates, evidence, options),
      options: { ...options, ...reduceOptionsOf(flags) },
    });
    await writeResult(flags.out, report, judgement, flags.png);
  }
  if (flags.json) {
    process.stdout.write(`${toJson(judgement)}\n`);
    for (const note of notes) process.stderr.write(`${note}\n`);
    return;
  }
  const written = flags.out === undefined ? [] : [`Written to ${plain(flags.out)}`];
  process.stdout.write(`${[...summary(judgement), '', ...notes, ...written].join('\n')}\n`);
}

/** One data set for each --data, with its own or the common options. */
function evidenceOf(flags: Flags): Evidence[] {
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
const scansOf = (data: string): string[] => (existsSync(data) ? [data] : data.split(',').filter((file) => file !== ''));

/** Raw absorption wants its element: it is the absorber's, where that is named by element. */
const elementOf = (absorber: string): { element?: string } => (/^[A-Z][a-z]?$/.test(absorber) ? { element: absorber } : {});

function judgeOptionsOf(flags: Flags): JudgeOptions {
  const { thermal, debyeTemperature, selfEnergy, radius, maxLegs, rivals, coordinateSd, sampleSpread, modelError, sampling, json, out } =
    flags;
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
    bands: json === true || out !== undefined,
  };
}

function summary({ evidence, candidates, groups, timing }: Judgement): string[] {
  const sets = evidence.map(
    ({ file, absorber, edge, temperature, kRange, rRange, kWeight, independentPoints, resolution }) =>
      `${plain(file)}: ${absorber} ${edge}, ${temperature} K, k ${kRange.join(' to ')} Å⁻¹ weighted k^${kWeight}, R ${rRange.join(' to ')} Å; ${independentPoints.toFixed(1)} independent points, distances told apart from ${resolution.toFixed(2)} Å`,
  );
  return [
    ...sets,
    ...candidates.flatMap((candidate) => ['', ...describe(candidate)]),
    ...(candidates.length > 1 ? ['', 'Ranking by evidence', ...groups.map(({ sentence }, i) => `  ${i + 1}. ${plain(sentence)}`)] : []),
    '',
    candidates[0]!.caution,
    `Computed in ${timing.total.toFixed(1)} s.`,
  ];
}

function describe(candidate: CandidateJudgement): string[] {
  const { sentence, overlength, valence, parameters, rivals, notExcluded, wouldChange, disorder } = candidate;
  const moved = parameters
    .filter(({ name, strain }) => name !== 'scatterer-shift' || Math.abs(strain) > 1)
    .map(({ name, shell, value, unit, prior, sd, strain }) => [
      `${name}${shell ? ` ${shell}` : ''}`,
      `${prior.mean.toPrecision(3)} ± ${prior.sd.toPrecision(2)}`,
      `${value.toPrecision(3)} ± ${sd.toPrecision(2)} ${unit}`,
      strain.toFixed(1),
    ]);
  const sums = valence.map(
    ({ site, asGiven, rescaled }) =>
      `  ${plain(site)}: ${asGiven.map(({ oxidationState, sum }, i) => `for ${oxidationState}+ ${sum.toFixed(2)} → ${rescaled[i]!.sum.toFixed(2)}`).join(', ')}`,
  );
  return [
    plain(sentence),
    plain(overlength.sentence),
    '',
    textTable(
      ['shell', 'N', 'R (Å)', 'thermal σ² (Å²)', 'static σ² (Å²)', 'wanted by data (Å²)'],
      disorder.map((row) => [
        row.label,
        row.count.toFixed(1),
        row.meanDistance.toFixed(3),
        row.thermal.toFixed(5),
        row.static.toFixed(5),
        row.wanted.toFixed(5),
      ]),
    ),
    '',
    textTable(
      ['unknown', 'expected', 'found', 'strain'],
      moved.map((row) => row.map(plain)),
    ),
    ...(sums.length > 0 ? ['', 'Bond-valence sums, as given → with the distances the data want', ...sums] : []),
    ...(rivals.length > 0
      ? [
          '',
          `Not excluded by these data, of ${rivals.length} rivals: ${notExcluded.length > 0 ? notExcluded.map(plain).join('; ') : 'none'}`,
          textTable(
            ['rival', 'X', 'p', 'ln Z against the candidate'],
            rivals.map(({ label, x, p, logEvidence }) => [plain(label), x.toFixed(1), p.toPrecision(2), logEvidence.toFixed(1)]),
          ),
        ]
      : []),
    ...wouldChange.map((line) => `What would change this: ${plain(line)}`),
  ];
}
