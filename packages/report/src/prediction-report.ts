/** The report of a prediction: what was assumed, the figures, the tables, how to do it again. */
import type { Prediction } from '@ringtrue/core';
import { chiInK, chiInR, contributionsByOrder, contributionsByShell, type SiteDrawing, siteDrawing } from '@ringtrue/figures';
import { type Block, caution, facts, figure, heading, list, type ReportDocument, tableOf } from './document.js';
import { predictionMethods } from './methods.js';
import { tablesOf } from './prediction-tables.js';
import type { Reference } from './references.js';
import { methodsSection, type RunRecord, reproducibility, settingsOf } from './run-record.js';

const CAUTION =
  "A prediction that agrees with a measurement shows that the structure is consistent with it; it proves no structure. Measurements at X-ray sources are made under the facility's own radiation-safety rules.";

export interface PredictionExtras {
  readonly record?: RunRecord;
  /** Drawings of the absorbing sites, with their names. */
  readonly sites?: readonly SiteDrawing[];
}

export interface Report {
  readonly document: ReportDocument;
  readonly references: readonly Reference[];
}

export function predictionReport(prediction: Prediction, { record, sites = [] }: PredictionExtras = {}): Report {
  const { structure, options, absorbers, warnings, program } = prediction;
  const tables = tablesOf(prediction);
  const assumed: [string, string][] = [
    ['Structure', `${structure.file} (${structure.format}, ${structure.atoms} atoms) ${structure.title}`],
    ['Absorber', absorbers.map(({ label, weight }) => `${label} (weight ${weight.toFixed(3)})`).join(', ')],
    ['Edge', options.edge],
    ...disorderRows(prediction),
    ...(options.electricVector ? [['Electric vector', options.electricVector.join(', ')] as [string, string]] : []),
    ['Spheres shared by', options.spheres === 'element' ? 'atoms of one element' : 'atoms of one element in like surroundings'],
    ['Self-energy', options.selfEnergy],
    ['Longest half path', `${options.radius} Å`],
    ['Most legs of a path', String(options.maxLegs)],
    ['S0²', String(options.s02)],
    ['Shift of the energy origin', `${options.e0} eV`],
    ['Signal left out with weak paths', `at most ${(100 * prediction.neglected).toFixed(2)} %`],
  ];
  const methods = methodsSection(predictionMethods(prediction));
  const blocks: Block[] = [
    caution(CAUTION),
    heading('What was assumed'),
    facts(assumed),
    ...(warnings.length > 0 ? [heading('To be known'), ...list(warnings.map(({ message }) => message))] : []),
    heading('Figures'),
    ...predictionFigures(prediction, sites),
    heading('Shells and paths'),
    ...tableOf(tables.shells),
    ...tableOf(tables.paths),
    ...reproducibility(program.version, record, settingsOf(options)),
    ...methods.blocks,
  ];
  return { document: { title: `Predicted EXAFS of ${structure.file}`, blocks }, references: methods.references };
}

/** @param lead  put before the names, where several structures share a folder */
export function predictionFigures(prediction: Prediction, sites: readonly SiteDrawing[], lead = ''): Block[] {
  const bands = prediction.bands
    ? ' over the bands of 68 % and 95 % that the uncertainty of the unknowns spans before any data are seen'
    : '';
  return [
    ...sites.map((site, i) =>
      figure(
        `${lead}site-${i + 1}`,
        siteDrawing(site),
        `Site of ${site.absorber.label}. Distances in Å; thickness of a bond and the number in brackets are the neighbour's part of the signal.`,
      ),
    ),
    figure(`${lead}chi-k`, chiInK(prediction), `Predicted EXAFS, weighted with k³,${bands || ' nothing fitted'}.`),
    figure(`${lead}chi-R`, chiInR(prediction), 'Modulus of its Fourier transform, not phase-corrected.'),
    ...(prediction.contributions
      ? [
          figure(`${lead}parts-by-shell`, contributionsByShell(prediction), 'Parts of the signal by shell, on one scale.'),
          figure(`${lead}parts-by-order`, contributionsByOrder(prediction), 'Parts of the signal by order of scattering, on one scale.'),
        ]
      : []),
  ];
}

/** Where the disorder comes from: the model with its temperature and inputs, and what would suit the structure, site by site. */
function disorderRows({ absorbers, options, ensemble }: Prediction): [string, string][] {
  const rows = absorbers.flatMap(({ thermal: { model, temperature, inputs, suggested } }): [string, string][] => {
    const words = Object.entries(inputs).map(([name, value]) => `${name}: ${value}`);
    const named = model === 'ensemble' ? 'average over frames' : thermalWords({ ...options, thermal: model });
    return [
      ['Disorder', `${named}${temperature === undefined || model === 'none' ? '' : `, at ${temperature} K`}`],
      ...(words.length > 0 ? [['Its inputs', words.join('; ')] as [string, string]] : []),
      ['Model for this kind of structure', `${suggested.model}. ${suggested.reason}`],
    ];
  });
  if (ensemble) {
    const percent = (value: number): string => `${(100 * value).toFixed(2)} %`;
    rows.push(
      ['Multiple scattering', `${ensemble.multipleScattering}, error of one frame ${percent(ensemble.expansionError)} rms of k²χ`],
      ['Beyond a Gaussian sum', `${percent(ensemble.beyondGaussian)} rms of k²χ`],
    );
    if (ensemble.renewed)
      rows.push([`Renewed every ${ensemble.renewed.every} frames`, `changes k²χ by ${percent(ensemble.renewed.change)} rms`]);
  }
  return [...new Map(rows.map((row) => [row.join('\n'), row])).values()];
}

/** The thermal model in words, with the inputs the user gave; what was assumed instead stands among the notes. */
function thermalWords({ thermal, debyeTemperature }: Prediction['options']): string {
  const debye =
    debyeTemperature === undefined
      ? 'correlated Debye model, Debye temperature assumed'
      : `correlated Debye model, Debye temperature ${debyeTemperature} K`;
  const words = {
    debye,
    springs: 'springs set up from the coordinates',
    einstein: `Einstein oscillators by bond, beyond them the ${debye}`,
    none: 'none',
  };
  return words[thermal];
}
