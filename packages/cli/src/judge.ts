/** `ringtrue judge`: structures on trial against measured spectra. */
import { basename } from 'node:path';
import { type CandidateJudgement, type Judgement, judge, readStructure, VERSION } from '@ringtrue/core';
import { judgementFiles } from '@ringtrue/report';
import type { Command } from 'commander';
import { aboutFile, runCommand, UsageError } from './command.js';
import { notesOf, reduceOptionsOf } from './evidence-options.js';
import { readText } from './files.js';
import { toJson } from './json.js';
import { addJudgeOptions, each, evidenceOf, type JudgeFlags, judgeOptionsOf, scansOf } from './judge-options.js';
import { dpi } from './png.js';
import { showProgress } from './progress.js';
import { candidateExtras, runRecord, writeResult } from './result-folder.js';
import { plain, textTable } from './terminal.js';

interface Flags extends JudgeFlags {
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

export function addJudge(program: Command): void {
  addJudgeOptions(
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
  const judgement = judge(
    candidates,
    evidence,
    { ...judgeOptionsOf(flags), bands: flags.json === true || flags.out !== undefined },
    {
      version: VERSION,
      now: () => performance.now() / 1000,
      ...(progress ? { running: progress.running } : {}),
    },
  );
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
