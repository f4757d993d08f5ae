/** Figures as SVG strings, without a DOM: the same in browser, command line and report. */
export { comparisonInK, comparisonInR } from './comparison-figures.js';
export { elementColour } from './element-colours.js';
export { escapeText } from './escape.js';
export { absorptionFigure, doseFigure, reducedChi } from './evidence-figures.js';
export { standalone } from './frame.js';
export { disorderChart, overlengthChart, rankingChart, strainChart, unknownInWords } from './judgement-figures.js';
export { type LineChart, lineChart } from './line-chart.js';
export type { ChartCurve, ChartRibbon } from './panels.js';
export { chiInK, chiInR, contributionsByOrder, contributionsByShell } from './prediction-figures.js';
export { type DrawnAtom, type SiteDrawing, siteDrawing } from './site-drawing.js';
export { sitePicture } from './site-picture.js';
