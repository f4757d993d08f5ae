/** `ringtrue reduce`: measured absorption to chi(k) with its noise. */
import { basename } from 'node:path';
import { type MeasuredScan, type ReduceOptions, type Reduction, reduce, VERSION, writeXdi } from '@ringtrue/core';
import { type Command, InvalidArgumentError, Option } from 'commander';
import { runCommand } from './command.js';
import { addEvidenceOptions, type EvidenceFlags, notesOf, number, readScans, reduceOptionsOf } from './evidence-options.js';
import { writeFolder } from './files.js';
import { toJson } from './json.js';
import { plain, smallPlot, textTable } from './terminal.js';

interface Flags extends EvidenceFlags {
  readonly backgroundBelow?: number;
  readonly kMax?: number;
  readonly normalisation?: 'atomic' | 'constant';
  readonly selfAbsorption?: NonNullable<ReduceOptions['selfAbsorption']>;
  readonly leaveOutFlagged?: boolean;
}

/** "Fe2O3", "Fe2O3,in=45,out=45" or "absorber=1,total=3,fluorescence=2,in=45,out=45" */
function sample(text: string): NonNullable<ReduceOptions['selfAbsorption']> {
  const parts = text.split(',');
  const given = new Map(
    parts.filter((part) => part.includes('=')).map((part) => part.split('=').map((piece) => piece.trim()) as [string, string]),
  );
  const composition = parts.filter((part) => !part.includes('=')).join(',');
  const known = composition ? ['in', 'out'] : ['absorber', 'total', 'fluorescence', 'in', 'out'];
  const wrong = [...given].find(([word, value]) => !known.includes(word) || !(Number(value) > 0));
  if (wrong || (!composition && !known.slice(0, 3).every((word) => given.has(word)))) {
    throw new InvalidArgumentError(
      `a formula like Fe2O3, parts by mass like Fe:0.05,Si:0.44,O:0.51, or absorber=1,total=3,fluorescence=2, then perhaps in=45,out=45, are wanted, got "${plain(text)}".`,
    );
  }
  const angles = { angleIn: Number(given.get('in') ?? 45), angleOut: Number(given.get('out') ?? 45) };
  if (composition) return { composition, ...angles };
  const [absorber, total, atFluorescence] = known.slice(0, 3).map((word) => Number(given.get(word)));
  return { absorber: absorber!, total: total!, atFluorescence: atFluorescence!, ...angles };
}

const EXAMPLES = `
Examples:
  ringtrue reduce scan1.xdi scan2.xdi scan3.xdi --out reduced
  ringtrue reduce scan.dat --element Fe --edge K --columns energy=1,i0=2,it=3 --background-below 0.8
  ringtrue reduce fluorescence.csv --element Mn --columns energy=1,i0=2,if=3+4+5+6 --json > mn.json
  ringtrue reduce rust.dat --element Fe --columns energy=1,i0=2,if=3 --self-absorption Fe2O3,in=30,out=60
  ringtrue reduce chi.dat --columns k=1,chi=2 --chi-weight 3

Every choice is listed with its reason. Points that stick out are listed, and kept unless --leave-out-flagged is given.`;

export function addReduce(program: Command): void {
  addEvidenceOptions(
    program
      .command('reduce')
      .summary('measured absorption to chi(k) with its noise')
      .description('Reduce measured scans (XDI, or columns of text) of one sample to chi(k); several scans are aligned and merged.')
      .argument('<scan...>', 'files, one scan each'),
  )
    .option(
      '--background-below <angstrom>',
      'what transforms below this R is background, Å (default: from the first peak, 0.6 to 1)',
      number,
    )
    .option('--k-max <k>', 'largest wave number, Å⁻¹ (default: as far as the data reach)', number)
    .addOption(
      new Option('--normalisation <step>', 'chi in units of the falling atomic step or of the constant step').choices([
        'atomic',
        'constant',
      ]),
    )
    .option(
      '--self-absorption <sample>',
      'correct fluorescence of a thick, flat sample of this make: Fe2O3 or Fe:0.05,Si:0.44,O:0.51 or its absorptions at the edge, absorber=1,total=3,fluorescence=2; then beam and detector from the surface, degrees (default in=45,out=45)',
      sample,
    )
    .option('--leave-out-flagged', 'leave out the points that stick out, and list them (default: they are kept and listed)')
    .option('--out <folder>', 'write chi.xdi, absorption.xdi, tables and result.json into a folder')
    .addHelpText('after', EXAMPLES)
    .action((files: string[], flags: Flags) => runCommand(() => run(files, flags)));
}

function run(files: readonly string[], flags: Flags): void {
  const scans = readScans(files, flags);
  const { backgroundBelow, kMax, normalisation, selfAbsorption, leaveOutFlagged } = flags;
  const reduction = reduce(scans, {
    ...reduceOptionsOf(flags),
    ...(backgroundBelow === undefined ? {} : { backgroundBelow }),
    ...(kMax === undefined ? {} : { kMax }),
    ...(normalisation === undefined ? {} : { normalisation }),
    ...(selfAbsorption === undefined ? {} : { selfAbsorption }),
    ...(leaveOutFlagged === undefined ? {} : { leaveOutFlagged }),
  });
  const result = { program: { name: 'ringtrue', version: VERSION }, files: files.map((file) => basename(file)), ...reduction };
  if (flags.out !== undefined) writeFolder(flags.out, filesOf(files, scans, reduction, toJson(result)));
  if (flags.json) {
    process.stdout.write(`${toJson(result)}\n`);
    for (const note of notesOf([...reduction.flagged, ...reduction.warnings])) process.stderr.write(`${note}\n`);
  } else process.stdout.write(summary(files, reduction, flags.out));
}

function filesOf(files: readonly string[], scans: readonly MeasuredScan[], reduction: Reduction, json: string): Map<string, string> {
  const { k, chi, sigmaChi, energyEv, mu, preEdge, postEdge, background, element, edge, choices } = reduction;
  const fields: [string, string][] = [
    ...(element ? ([['Element.symbol', element]] as [string, string][]) : []),
    ...(edge ? ([['Element.edge', edge]] as [string, string][]) : []),
    ...(scans[0]!.title ? ([['Sample.name', plain(scans[0]!.title)]] as [string, string][]) : []),
    ...(Number.isFinite(reduction.e0) ? ([['Scan.edge_energy', `${reduction.e0.toFixed(2)} eV`]] as [string, string][]) : []),
  ];
  const comments = [
    `reduced from ${files.map((file) => plain(basename(file))).join(', ')}`,
    ...choices.map((c) => `${c.what}: ${c.value} (${c.why})`),
  ];
  const applications = [`Ringtrue/${VERSION}`];
  const out = new Map<string, string>();
  const chiTable = { names: ['k', 'chi', 'sigma_chi'], units: ['1/angstrom', '', ''], columns: [k, chi, sigmaChi] };
  out.set('chi.xdi', writeXdi({ applications, fields, comments, table: chiTable }));
  out.set('tables/chi.csv', csv(['k_inverse_angstrom', 'chi', 'sigma_chi'], chiTable.columns));
  if (energyEv.length > 0) {
    const columns = [energyEv, mu, preEdge.curve, postEdge.curve, background.curve];
    const word = scans[0]!.kind === 'absorption' && scans[0]!.detection === 'fluorescence' ? 'mufluor' : 'mutrans';
    const table = { names: ['energy', word, 'pre_edge', 'post_edge', 'background'], units: ['eV', '', '', '', ''], columns };
    out.set('absorption.xdi', writeXdi({ applications, fields, comments, table }));
    out.set('tables/absorption.csv', csv(['energy_eV', 'mu', 'pre_edge', 'post_edge', 'background'], columns));
  }
  out.set('result.json', `${json}\n`);
  return out;
}

const csv = (names: readonly string[], columns: readonly Float64Array[]): string =>
  `${[names.join(','), ...Array.from(columns[0]!, (_, i) => columns.map((column) => Number(column[i]!.toPrecision(10))).join(','))].join('\n')}\n`;

function summary(files: readonly string[], reduction: Reduction, out: string | undefined): string {
  const { k, chi, noise, e0, edgeStep, element, edge, choices, flagged, warnings, scans } = reduction;
  const weighted = k.map((q, i) => q * q * chi[i]!).filter((_, i) => k[i]! >= 2);
  const shift = (s: number) => (scans.length > 1 ? `, shifted by ${scans[s]!.shiftEv.value.toFixed(3)} eV` : '');
  return [
    ...files.map(
      (file, s) =>
        `${plain(basename(file))}: ${plain(scans[s]!.title) || 'untitled'}${shift(s)}${scans[s]!.guess ? `; guessed: ${plain(scans[s]!.guess)}` : ''}`,
    ),
    Number.isFinite(e0)
      ? `${element ?? '?'} ${edge} edge at ${e0.toFixed(2)} eV, edge step ${edgeStep.toPrecision(4)}`
      : 'chi(k) was ready',
    '',
    textTable(
      ['choice', 'value', 'why'],
      choices.map((c) => [c.what, c.value, c.why]),
    ),
    '',
    `Noise: ${noise.epsilonK.toExponential(1)} per point of chi; useful to k = ${noise.kMaxUseful.toFixed(1)} Å⁻¹`,
    `k²chi(k) from ${Math.max(2, k[0]!).toFixed(1)} to ${k.at(-1)!.toFixed(1)} Å⁻¹`,
    smallPlot(weighted, 70, 10),
    '',
    ...notesOf([...flagged, ...warnings]),
    ...(out === undefined ? [] : [`Written to ${plain(out)}`]),
    '',
  ].join('\n');
}
