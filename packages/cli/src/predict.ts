/** `ringtrue predict`: a structure file to a predicted χ(k). */
import { basename } from 'node:path';
import { type Prediction, type PredictOptions, predict, readStructure, VERSION } from '@ringtrue/core';
import { predictionFiles } from '@ringtrue/report';
import { type Command, Option } from 'commander';
import { aboutFile, runCommand, UsageError } from './command.js';
import { computeEnsemble, type EnsembleFlags } from './ensemble.js';
import { number, vector } from './evidence-options.js';
import { readText } from './files.js';
import { toJson } from './json.js';
import { dpi } from './png.js';
import { showProgress } from './progress.js';
import { runRecord, sitePictures, writeResult } from './result-folder.js';
import { plain, smallPlot, textTable } from './terminal.js';

interface Flags extends Partial<PredictOptions>, EnsembleFlags {
  readonly absorber: string;
  readonly json?: boolean;
  readonly out?: string;
  readonly png?: number;
  readonly ensemble?: boolean;
}

export function addPredict(program: Command): void {
  program
    .command('predict')
    .summary('compute chi(k) of a structure, nothing fitted')
    .description('Compute chi(k) of a structure file (XYZ, PDB, mmCIF, CIF) from first principles; nothing is fitted.')
    .argument('<structure>', 'coordinate file')
    .requiredOption('--absorber <element>', 'absorbing element, or the label of one atom')
    .addOption(new Option('--edge <edge>', 'absorption edge').choices(['K', 'L3', 'L2', 'L1']).default('K'))
    .option('--temperature <K>', 'temperature of the sample, K (default 300)', number)
    .option('--debye-temperature <K>', 'Debye temperature, K (default: one is assumed, with a warning)', number)
    .addOption(new Option('--thermal <model>', 'thermal disorder').choices(['debye', 'einstein', 'springs', 'none']).default('debye'))
    .addOption(
      new Option('--self-energy <kind>', 'self-energy of the photoelectron')
        .choices(['mean', 'hedin-lundqvist', 'dirac-hara'])
        .default('mean'),
    )
    .addOption(
      new Option(
        '--spheres <per>',
        'one potential per element, or per element and surroundings (they differ when neighbours bring potentials more than 1 eV apart)',
      )
        .choices(['element', 'surroundings'])
        .default('element'),
    )
    .option('--radius <angstrom>', 'longest half path length, Å (default 5)', number)
    .option('--max-legs <n>', 'most legs of a path, 2 to 5 (default 4)', number)
    .option(
      '--electric-vector <x,y,z>',
      "polarised light on an oriented crystal: its electric vector in the file's Cartesian axes (a along x, b in the xy plane); default: averaged",
      vector,
    )
    .option('--k-max <k>', 'largest wave number, Å⁻¹ (default 15)', number)
    .option('--s02 <value>', 'passive-electron factor S0² (default 0.82)', number)
    .option('--e0 <eV>', "shift of the energy origin, eV, positive when the theory's zero lies above the data's (default 0)", number)
    .option('--ensemble', 'average chi over all frames of a trajectory or models of an entry; no thermal model')
    .option(
      '--jobs <n>',
      'with --ensemble: workers (default: as many as the machine runs at once); the result is the same to the last bit',
      number,
    )
    .option(
      '--renew <frames>',
      'with --ensemble: phase shifts and paths anew for every so many frames; the change it makes is told',
      number,
    )
    .option('--exact', 'with --ensemble: multiple scattering computed in every frame, some 100 times slower')
    .option('--path-signals', 'amplitude and phase of every path in the JSON')
    .option('--json', 'print one JSON document and nothing else on standard output')
    .option('--out <folder>', 'write report (HTML, Markdown), figures, tables, references and result.json into a folder')
    .option('--png <dpi>', 'with --out: each figure as PNG too, 8 cm wide at so many dots per inch', dpi)
    .addHelpText('after', EXAMPLES)
    .action((file: string, flags: Flags, command: Command) => runCommand(() => run(file, flags, command)));
}

const EXAMPLES = `
Examples:
  ringtrue predict demo-structures/tideglass.cif --absorber Mn --temperature 15 --debye-temperature 500
  ringtrue predict demo-structures/redoxin-site.xyz --absorber Fe --json > redoxin.json
  ringtrue predict demo-structures/tideglass.cif --absorber Mn --radius 6 --out tideglass-prediction --png 300
  ringtrue predict trajectory.xyz --absorber Fe --ensemble --jobs 4
  ringtrue predict demo-structures/tideglass.cif --absorber Mn --electric-vector 0,0,1

A prediction that agrees with a measurement shows consistency; it is no proof of a structure.`;

async function run(file: string, { json, out, png, ensemble, jobs, renew, exact, ...options }: Flags, command: Command): Promise<void> {
  const own = Object.entries({ jobs, renew, exact }).find(([, value]) => value !== undefined);
  if (own && !ensemble) throw new UsageError(`--${own[0]} goes with --ensemble`);
  if (ensemble && command.getOptionValueSource('thermal') === 'cli')
    throw new UsageError('--ensemble takes the disorder from the frames; leave --thermal out');
  if (png !== undefined && out === undefined) throw new UsageError('--png goes with --out');
  const { thermal: _, ...frameOptions } = options;
  const prediction = ensemble
    ? await computeEnsemble(file, frameOptions, {
        ...(jobs === undefined ? {} : { jobs }),
        ...(renew === undefined ? {} : { renew }),
        ...(exact === undefined ? {} : { exact }),
      })
    : compute(file, { ...options, bands: json === true || out !== undefined });
  if (out !== undefined) {
    // Frames have no one geometry to draw.
    const sites = ensemble ? [] : sitePictures(readStructure(readText(file), { fileName: file }), prediction);
    await writeResult(out, predictionFiles(prediction, { record: runRecord([file]), sites }), prediction, png);
  }
  if (json) {
    process.stdout.write(`${toJson(prediction)}\n`);
    for (const { message } of prediction.warnings) process.stderr.write(`${plain(message)}\n`);
  } else {
    process.stdout.write(summary(prediction, out));
  }
}

function compute(file: string, options: Omit<Flags, 'json' | 'out' | 'ensemble' | 'png' | keyof EnsembleFlags>): Prediction {
  const text = readText(file);
  const progress = showProgress();
  const context = {
    file: basename(file),
    version: VERSION,
    now: () => performance.now() / 1000,
    ...(progress ? { running: progress.running } : {}),
  };
  const prediction = aboutFile(file, () => predict(readStructure(text, { fileName: file }), options, context));
  progress?.clear();
  return prediction;
}

/** What a reader wants first, in words and three tables. */
function summary(prediction: Prediction, out: string | undefined): string {
  const { structure, options, absorbers, scattering, shells, paths, warnings, k, chi, timing, ensemble } = prediction;
  const share = (value: number): string => `${(100 * value).toFixed(1)} %`;
  const squared = (value: number): string => value.toFixed(5);
  const weighted = k.map((value, i) => value * value * chi[i]!).filter((_, i) => k[i]! >= 2);
  const hasBound = shells.some(({ bFactorBound }) => bFactorBound !== undefined);
  const shown = [...paths].sort((a, b) => b.share - a.share).slice(0, 12);
  return [
    `${plain(structure.file)}: ${structure.atoms} atoms, ${structure.format}${structure.title ? `, "${plain(structure.title)}"` : ''}`,
    `${absorbers.length} absorbing ${absorbers.length === 1 ? 'site' : 'sites'}: ${absorbers.map(({ label, weight }) => `${plain(label)} (${share(weight)})`).join(', ')}; ${options.edge} edge${options.electricVector ? ` in light polarised along (${options.electricVector.join(', ')})` : ''}, S0² ${options.s02}`,
    ...disorderLines(prediction),
    `Fermi level ${scattering.fermiLevelEv.toFixed(2)} eV, interstitial ${scattering.interstitialPotentialEv.toFixed(2)} eV; spheres (bohr): ${scattering.atoms.map(({ element, role, muffinTinRadius }) => `${element}${role === 'absorber' ? '*' : ''} ${muffinTinRadius.toFixed(3)}`).join(', ')}`,
    '',
    textTable(
      [
        'shell',
        'N',
        'mean R (Å)',
        `${ensemble ? 'frames' : 'thermal'} σ² (Å²)`,
        'static σ² (Å²)',
        'C3 (10⁻⁵ Å³)',
        'hidden by one shell',
        ...(hasBound ? ['B-factor bound (Å²)'] : []),
        'share',
      ],
      shells.map((s) => [
        s.label,
        s.count.toFixed(1),
        s.meanDistance.toFixed(4),
        squared(s.sigma2.thermal),
        squared(s.sigma2.static),
        (1e5 * s.thirdCumulant).toFixed(2),
        share(s.hiddenByOneShell),
        ...(hasBound ? [s.bFactorBound === undefined ? '' : squared(s.bFactorBound)] : []),
        share(s.share),
      ]),
    ),
    '',
    textTable(
      ensemble
        ? ['strongest paths', 'N', 'half length (Å)', 'σ² (Å²)', '±', 'C3 (10⁻⁵ Å³)', 'C4 (10⁻⁶ Å⁴)', 'share']
        : ['strongest paths', 'N', 'half length (Å)', 'σ² (Å²)', 'from', 'share'],
      shown.map((p) => [
        p.label,
        p.degeneracy.toFixed(1),
        p.halfLength.toFixed(4),
        squared(p.sigma2.thermal),
        ...(p.cumulants
          ? [squared(p.cumulants.error.variance), (1e5 * p.cumulants.third).toFixed(2), (1e6 * p.cumulants.fourth).toFixed(2)]
          : [p.sigma2.from]),
        share(p.share),
      ]),
    ),
    ...(paths.length > shown.length ? [`… and ${paths.length - shown.length} more paths (--json or --out lists all)`] : []),
    `Weaker paths were left out: at most ${share(prediction.neglected)} of the signal`,
    ...(hasBound ? ['B-factor bound: U of both atoms as if they moved independently; above the true σ², shown and never added.'] : []),
    '',
    `k²χ(k) from 2 to ${k.at(-1)!.toFixed(1)} Å⁻¹`,
    smallPlot(weighted, 70, 10),
    '',
    ...warnings.map(({ message }) => `Note: ${plain(message)}`),
    `Computed in ${timing.total.toFixed(2)} s. A prediction that agrees with a measurement shows consistency, never proof.`,
    ...(out === undefined ? [] : [`Written to ${plain(out)}`]),
    '',
  ].join('\n');
}

/** Where the disorder comes from, with temperature and inputs, and what would suit each site. */
function disorderLines({ absorbers, ensemble }: Prediction): string[] {
  const percent = (value: number): string => `${(100 * value).toFixed(2)} %`;
  const lines = absorbers.map(({ thermal: { model, temperature, inputs } }) => {
    const words = Object.entries(inputs).map(
      ([name, value]) => `${name} ${typeof value === 'number' ? Number(value.toPrecision(5)) : value}`,
    );
    return `Disorder: ${model}${temperature === undefined ? '' : ` at ${temperature} K`}${words.length ? ` (${words.join('; ')})` : ''}`;
  });
  lines.push(...absorbers.map(({ thermal: { suggested } }) => `Model for this kind of structure: ${suggested.model}. ${suggested.reason}`));
  if (ensemble) {
    const { frames, parts, multipleScattering, expansionError, testFrames, beyondGaussian, renewed } = ensemble;
    lines.push(
      `${frames} frames averaged, error of χ from ${parts} parts. Multiple scattering: ${multipleScattering}${multipleScattering === 'expanded' ? `, off by ${percent(expansionError)} rms of k²χ in single frames (${testFrames} tested)` : ''}.`,
      `A Gaussian sum of the same σ² over the mean surroundings would differ by ${percent(beyondGaussian)} rms of k²χ.`,
    );
    if (renewed) lines.push(`Phase shifts and paths renewed every ${renewed.every} frames: k²χ changes by ${percent(renewed.change)} rms.`);
  }
  return [...new Set(lines)].map(plain);
}
