/** Results in words and tables: HTML and CSV strings, no I/O. */
export { csvTable } from './csv.js';
export { judgementTables } from './judgement-tables.js';
export { predictionHtml } from './prediction-html.js';
export { type Table, tablesOf } from './prediction-tables.js';
