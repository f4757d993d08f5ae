/** The files of a result by their names in its folder: page, Markdown, figures, tables, references. result.json is the caller's. */
import type { Judgement, Prediction } from '@ringtrue/core';
import { standalone } from '@ringtrue/figures';
import { csvTable } from './csv.js';
import { documentHtml } from './document-html.js';
import { documentMarkdown } from './document-markdown.js';
import { type JudgementExtras, judgementReport } from './judgement-report.js';
import { judgementTables } from './judgement-tables.js';
import { type PredictionExtras, predictionReport, type Report } from './prediction-report.js';
import { type Table, tablesOf } from './prediction-tables.js';
import { bibtex } from './references.js';

export const predictionFiles = (prediction: Prediction, extras: PredictionExtras = {}): Map<string, string> =>
  filesOf(predictionReport(prediction, extras), Object.values(tablesOf(prediction)));

export function judgementFiles(judgement: Judgement, extras: JudgementExtras = {}): Map<string, string> {
  const paths = judgement.candidates.flatMap(({ file }, i): Table[] => {
    const own = extras.candidates?.get(file);
    return own ? [{ ...tablesOf(own.prediction).paths, name: `${i + 1}-paths` }] : [];
  });
  return filesOf(judgementReport(judgement, extras), [...judgementTables(judgement), ...paths]);
}

function filesOf({ document, references }: Report, tables: readonly Table[]): Map<string, string> {
  const files = new Map<string, string>();
  for (const block of document.blocks) if (block.kind === 'figure') files.set(`figures/${block.name}.svg`, `${standalone(block.svg)}\n`);
  for (const table of tables) files.set(`tables/${table.name}.csv`, csvTable(table));
  files.set('references.bib', bibtex(references));
  files.set('report.md', documentMarkdown(document));
  files.set('report.html', documentHtml(document));
  return files;
}
