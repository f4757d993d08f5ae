/** `ringtrue dose`: does the sample change under the beam? */
import { basename } from 'node:path';
import { dose, VERSION } from '@ringtrue/core';
import type { Command } from 'commander';
import { runCommand } from './command.js';
import { addEvidenceOptions, type EvidenceFlags, notesOf, readScans, reduceOptionsOf } from './evidence-options.js';
import { writeFolder } from './files.js';
import { toJson } from './json.js';
import { plain, textTable } from './terminal.js';

const EXAMPLES = `
Examples:
  ringtrue dose scan01.xdi scan02.xdi scan03.xdi scan04.xdi
  ringtrue dose scan*.dat --element Mn --columns energy=1,i0=2,if=3+4 --json

Give the scans in the order they were taken, all of one spot. Look here before anything else is done with them.`;

export function addDose(program: Command): void {
  addEvidenceOptions(
    program
      .command('dose')
      .summary('does the sample change under the beam?')
      .description('Look for drift along repeated scans: edge energy, its drift with error, number of components, amplitude of chi.')
      .argument('<scan...>', 'files, one scan each, in order'),
  )
    .option('--out <folder>', 'write result.json and a table into a folder')
    .addHelpText('after', EXAMPLES)
    .action((files: string[], flags: EvidenceFlags) => runCommand(() => run(files, flags)));
}

function run(files: readonly string[], flags: EvidenceFlags): void {
  const names = files.map((file) => basename(file));
  const report = dose(readScans(files, flags), names, reduceOptionsOf(flags));
  const result = { program: { name: 'ringtrue', version: VERSION }, files: names, ...report };
  const rows = report.edgeEnergy.map(({ scan, value, sd }, s) => [
    scan,
    value.toFixed(4),
    sd.toFixed(4),
    report.chiAmplitude.values[s]!.toFixed(4),
    report.keep.includes(s + 1) ? 'yes' : 'no',
  ]);
  if (flags.out !== undefined) {
    const quoted = rows.map(([name, ...rest]) => [`"${name!.replaceAll('"', '""')}"`, ...rest].join(','));
    const table = `${['scan,edge_eV,sd_eV,chi_amplitude,keep', ...quoted].join('\n')}\n`;
    writeFolder(
      flags.out,
      new Map([
        ['result.json', `${toJson(result)}\n`],
        ['tables/dose.csv', table],
      ]),
    );
  }
  const notes = notesOf(report.warnings);
  if (flags.json) {
    process.stdout.write(`${toJson(result)}\n`);
    for (const note of notes) process.stderr.write(`${note}\n`);
    return;
  }
  const lines = [textTable(['scan', 'edge (eV)', '± (eV)', 'chi amplitude', 'keep'], rows), '', report.sentence, ...notes];
  process.stdout.write(`${[...lines, ...(flags.out === undefined ? [] : [`Written to ${plain(flags.out)}`])].join('\n')}\n`);
}
