/** Results in words and tables: HTML, Markdown, CSV and BibTeX strings, no I/O. */
export { csvTable } from './csv.js';
export type { ReportDocument } from './document.js';
export { documentHtml } from './document-html.js';
export { documentMarkdown } from './document-markdown.js';
export { judgementFiles, predictionFiles } from './files.js';
export { type CandidateExtras, type JudgementExtras, judgementReport } from './judgement-report.js';
export { judgementTables } from './judgement-tables.js';
export { type PredictionExtras, predictionReport, type Report } from './prediction-report.js';
export { type Table, tablesOf } from './prediction-tables.js';
export type { RunRecord } from './run-record.js';
