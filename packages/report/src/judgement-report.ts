/** The report of a judgement: finding and caution, assumptions, what moved, figures, tables, what is not excluded, how to do it again. */
import type { CandidateJudgement, Judgement, Prediction, Reduction } from '@ringtrue/core';
import {
  absorptionFigure,
  comparisonInK,
  comparisonInR,
  contributionsByOrder,
  contributionsByShell,
  disorderChart,
  overlengthChart,
  rankingChart,
  reducedChi,
  type SiteDrawing,
  siteDrawing,
  strainChart,
} from '@ringtrue/figures';
import { type Block, caution, facts, figure, heading, list, paragraph, tableOf } from './document.js';
import { judgementTables } from './judgement-tables.js';
import { judgementMethods, predictionMethods, reductionMethods } from './methods.js';
import type { Report } from './prediction-report.js';
import { type Table, tablesOf } from './prediction-tables.js';
import { methodsSection, type RunRecord, reproducibility, settingsOf } from './run-record.js';

export interface CandidateExtras {
  /** The structure predicted under the same options, for paths and parts. */
  readonly prediction: Prediction;
  readonly sites: readonly SiteDrawing[];
}

export interface JudgementExtras {
  readonly record?: RunRecord;
  /** One an evidence, in its order. */
  readonly reductions?: readonly Reduction[];
  /** By file of the candidate. */
  readonly candidates?: ReadonlyMap<string, CandidateExtras>;
  /** As given, for the record. */
  readonly options?: object;
}

/** Paths listed in the report; the CSV has all. */
const PATHS_SHOWN = 25;

export function judgementReport(judgement: Judgement, extras: JudgementExtras = {}): Report {
  const { candidates, groups, evidence, warnings, program } = judgement;
  const tables = new Map(judgementTables(judgement).map((table) => [table.name, table]));
  const first = extras.candidates?.values().next().value;
  const methods = methodsSection(
    [
      ...(first ? [predictionMethods(first.prediction)] : []),
      ...(extras.reductions ?? []).slice(0, 1).map(reductionMethods),
      judgementMethods(judgement),
    ].join(' '),
  );
  const blocks: Block[] = [
    heading('Finding'),
    ...candidates.map(({ sentence }) => paragraph(sentence)),
    caution(candidates[0]!.caution),
    ...tableOf(tables.get('candidates')!),
    ...(candidates.length > 1
      ? [
          figure(
            'ranking',
            rankingChart(judgement),
            'Candidates by evidence. Within the grey band the data cannot tell them from the best.',
          ),
          ...list(groups.map(({ sentence }) => sentence)),
        ]
      : []),
    heading('What was assumed'),
    ...evidence.map((set) =>
      facts([
        ['Data', set.file],
        ['Absorber, edge, temperature', `${set.absorber} ${set.edge}, ${set.temperature} K`],
        ['Window', `k ${set.kRange.join(' to ')} Å⁻¹ weighted with k^${set.kWeight}, R ${set.rRange.join(' to ')} Å`],
        [
          'Independent points',
          `${set.independentPoints.toFixed(1)} (${set.independentPointsStern.toFixed(1)} with the two of the other count)`,
        ],
        ['Distances told apart from', `${set.resolution.toFixed(3)} Å`],
        ['Noise', `${set.epsilonK.toExponential(2)} a point of χ(k)`],
        ['Error of the theory', `${(100 * set.modelError).toFixed(0)} % of the rms of the transform`],
      ]),
    ),
    ...(warnings.length > 0 ? list(warnings.map(({ message }) => message)) : []),
    ...candidates.flatMap((candidate, i) => candidateBlocks(candidate, i, judgement, extras)),
    ...(extras.reductions ?? []).flatMap((reduction, s) => reductionBlocks(reduction, s, evidence[s]!.file)),
    ...reproducibility(program.version, extras.record, settingsOf(extras.options ?? {})),
    ...methods.blocks,
  ];
  const names = candidates.map(({ file }) => file).join(', ');
  return {
    document: { title: `${names} judged against ${evidence.map(({ file }) => file).join('; ')}`, blocks },
    references: methods.references,
  };
}

function candidateBlocks(candidate: CandidateJudgement, i: number, { evidence }: Judgement, extras: JudgementExtras): Block[] {
  const { file, title, assumptions, overlength, comparisons, disorder, posterior, cannotTell, wouldChange, warnings, strained } = candidate;
  const lead = `${i + 1}-`;
  const own = extras.candidates?.get(file);
  const tables = judgementTables({ candidates: [candidate], groups: [] } as unknown as Judgement);
  const ownTable = (name: string): Block[] =>
    tables.filter((table) => table.name === name).flatMap((table) => tableOf(withoutFirstColumn(table)));
  return [
    heading(`Candidate ${file}`),
    ...(title ? [paragraph(title)] : []),
    paragraph(`${candidate.sentence} ${overlength.sentence}`),
    heading(`What was assumed of ${file}`, 3),
    ...list([...assumptions, ...warnings.map(({ message }) => message)]),
    heading(`What moved in ${file}`, 3),
    ...list(strained),
    figure(
      `${lead}strain`,
      strainChart(candidate),
      `Where the data put each unknown of ${file}, in standard deviations of what was expected of it. Own shifts of single scatterers are drawn beyond one.`,
    ),
    ...ownTable('unknowns'),
    paragraph(`Posterior: ${posterior.method}; ${posterior.reason}.`),
    heading(`Figures of ${file}`, 3),
    ...(own?.sites ?? []).map((site, j) =>
      figure(
        `${lead}site-${j + 1}`,
        siteDrawing(site),
        `Site of ${site.absorber.label} in ${file}. Distances in Å; in brackets the neighbour's part of the signal.`,
      ),
    ),
    ...comparisons.flatMap((comparison, s) => {
      const set = evidence[s] ?? evidence[0]!;
      const end = comparisons.length > 1 ? `-${s + 1}` : '';
      return [
        figure(
          `${lead}comparison-k${end}`,
          comparisonInK(comparison, set),
          `Measured and predicted ${comparison.file}. Grey: expected before the data were seen; orange: after; below, what is left. Dashed lines end the window.`,
        ),
        figure(
          `${lead}comparison-R${end}`,
          comparisonInR(comparison, set),
          'The same as moduli of the Fourier transform, not phase-corrected; below, the modulus of the complex difference.',
        ),
      ];
    }),
    figure(
      `${lead}overlength`,
      overlengthChart(file, overlength),
      `Change of the distances of ${file} that the data want, from the ring to the dot; a change inside the grey bar these data would not have shown.`,
    ),
    ...ownTable('distances'),
    ...(own?.prediction.contributions
      ? [
          figure(`${lead}parts-by-shell`, contributionsByShell(own.prediction), `Parts of the predicted signal of ${file} by shell.`),
          figure(
            `${lead}parts-by-order`,
            contributionsByOrder(own.prediction),
            `Parts of the predicted signal of ${file} by order of scattering.`,
          ),
        ]
      : []),
    heading(`Disorder of ${file}`, 3),
    figure(
      `${lead}disorder`,
      disorderChart(file, disorder),
      `Mean-square relative displacement of each shell of ${file}: predicted thermal and static parts, and what the data want.`,
    ),
    ...ownTable('disorder'),
    ...ownTable('valence'),
    ...(own ? [heading(`Paths of ${file}`, 3), ...tableOf(strongest(tablesOf(own.prediction).paths))] : []),
    heading(`What is not excluded beside ${file}`, 3),
    ...ownTable('rivals'),
    paragraph(
      candidate.rivals.length === 0
        ? 'No rivals were judged.'
        : candidate.notExcluded.length > 0
          ? `Not excluded by these data: ${candidate.notExcluded.join('; ')}.`
          : `All ${candidate.rivals.length} rivals that were made from it are excluded; others may not be.`,
    ),
    paragraph('What these data cannot tell:'),
    ...list(cannotTell),
    ...(wouldChange.length > 0 ? [paragraph('What would change the finding:'), ...list(wouldChange)] : []),
  ];
}

function reductionBlocks(reduction: Reduction, s: number, file: string): Block[] {
  const { choices, flagged, warnings, energyEv } = reduction;
  const choiceTable: Table = {
    name: 'reduction',
    title: `Choices of the reduction of ${file}`,
    columns: ['choice', 'value', 'why'],
    rows: choices.map(({ what, value, why }) => [what, value, why]),
  };
  return [
    heading(`Reduction of ${file}`),
    ...(energyEv.length > 0
      ? [
          figure(
            `absorption-${s + 1}`,
            absorptionFigure(reduction),
            'Absorption and the curves laid under and through it; dotted lines end their ranges.',
          ),
        ]
      : [paragraph('χ(k) was ready; nothing was taken from raw absorption.')]),
    figure(`measured-chi-${s + 1}`, reducedChi(reduction), 'Measured χ(k) with one standard deviation of a point.'),
    ...tableOf(choiceTable),
    ...list([...new Set([...flagged, ...warnings].map(({ message }) => message))]),
  ];
}

const withoutFirstColumn = (table: Table): Table => ({
  ...table,
  columns: table.columns.slice(1),
  rows: table.rows.map((row) => row.slice(1)),
});

function strongest(table: Table): Table {
  const share = table.columns.indexOf('share');
  const rows = [...table.rows].sort((a, b) => Number(b[share]) - Number(a[share]));
  if (rows.length <= PATHS_SHOWN) return { ...table, rows };
  return { ...table, title: `The ${PATHS_SHOWN} strongest of ${rows.length} paths`, rows: rows.slice(0, PATHS_SHOWN) };
}
