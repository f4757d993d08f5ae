/** `ringtrue sites`: the absorbing sites of a structure file, their neighbours, and what the distances say of the valence. */
import { basename } from 'node:path';
import { describeSites, readStructure, type SitesDescription } from '@ringtrue/core';
import { type Command, InvalidArgumentError } from 'commander';
import { aboutFile, runCommand } from './command.js';
import { readText } from './files.js';
import { toJson } from './json.js';
import { plain, textTable } from './terminal.js';

interface Flags {
  readonly absorber?: string;
  readonly radius?: number;
  readonly strict?: boolean;
  readonly json?: boolean;
}

const EXAMPLES = `
Examples:
  ringtrue sites demo-structures/tideglass.cif
  ringtrue sites protein.pdb --absorber Zn
  ringtrue sites model.xyz --absorber Fe1 --radius 5 --json > sites.json`;

export function addSites(program: Command): void {
  program
    .command('sites')
    .summary('list the absorbing sites of a structure')
    .description(
      'List the absorbing sites of a structure file (XYZ, PDB, mmCIF, CIF) with neighbours, alternates, bond valence and warnings.',
    )
    .argument('<structure>', 'coordinate file')
    .option('--absorber <element>', 'absorbing element, or the label of one atom (default: every element with an edge, metals first)')
    .option('--radius <angstrom>', 'list neighbours to this distance, Å', radius, 4)
    .option('--strict', 'refuse what could be read round')
    .option('--json', 'print one JSON document and nothing else on standard output')
    .addHelpText('after', EXAMPLES)
    .action((file: string, flags: Flags) => runCommand(() => run(file, flags)));
}

function radius(text: string): number {
  const value = Number(text);
  if (!(value > 0 && value <= 100)) throw new InvalidArgumentError(`a distance above 0 and up to 100 Å is wanted, got "${plain(text)}".`);
  return value;
}

function run(file: string, { json, ...options }: Flags): void {
  const description = describe(file, options);
  if (json) {
    process.stdout.write(`${toJson(description)}\n`);
    for (const { message } of description.warnings) process.stderr.write(`${plain(message)}\n`);
  } else process.stdout.write(summary(description));
}

function describe(file: string, { strict = false, ...options }: Omit<Flags, 'json'>): SitesDescription {
  const text = readText(file);
  return aboutFile(file, () => describeSites(readStructure(text, { fileName: file, strict }), { ...options, file: basename(file) }));
}

function summary({ structure, sites, warnings }: SitesDescription): string {
  const { cell } = structure;
  const percent = (part: number) => `${(100 * part).toFixed(part < 0.1 ? 1 : 0)} %`;
  const lines = [
    `${structure.file}: ${structure.format}, ${structure.atoms} atoms${structure.frames > 1 ? `, ${structure.frames} frames (the first is shown)` : ''}${structure.title ? `, "${structure.title}"` : ''}`,
    cell
      ? `cell ${[cell.a, cell.b, cell.c].map((v) => v.toFixed(4)).join(' ')} Å, ${[cell.alpha, cell.beta, cell.gamma].map((v) => v.toFixed(2)).join(' ')}°${structure.spaceGroup ? `, ${structure.spaceGroup}` : ''}`
      : 'no crystal',
    `coordinates good to ${structure.precision.sigma.toFixed(3)} Å an axis: ${structure.precision.origin}`,
  ].map(plain);
  for (const site of sites) {
    lines.push(
      '',
      plain(
        `${site.label}: ${percent(site.weight)} of the ${site.element} signal, ${Number(site.coordination.toFixed(2))} bonded ${site.coordination === 1 ? 'neighbour' : 'neighbours'}`,
      ),
    );
    for (const { name, weight, neighbours } of site.variants) {
      if (site.variants.length > 1) lines.push(plain(`alternates ${name}: ${percent(weight)} of this site`));
      const rows = neighbours.map((n) => [
        n.label,
        n.element,
        `${n.distance.toFixed(3)} ± ${n.sd.toFixed(3)}`,
        n.occupancy.toFixed(2),
        n.symmetry === 'x,y,z' ? '' : n.symmetry,
        n.bonded ? 'bonded' : '',
      ]);
      lines.push(
        rows.length > 0 ? textTable(['neighbour', 'element', 'distance (Å)', 'occupancy', 'symmetry', ''], rows) : 'no neighbours',
      );
    }
    for (const { oxidationState, sum, sd, missing } of site.valence) {
      lines.push(
        `bond valence for ${site.element}(${oxidationState}): ${sum.toFixed(2)} ± ${sd.toFixed(2)}${missing.length > 0 ? `, without ${missing.join(', ')} (no parameters)` : ''}`,
      );
    }
  }
  return [...lines, '', ...warnings.map(({ message }) => `Note: ${plain(message)}`), ''].join('\n');
}
