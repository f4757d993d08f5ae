/** Figures as SVG strings, without a DOM: the same in browser, command line and report. */
export { escapeText } from './escape.js';
export { type ChartCurve, type LineChart, lineChart } from './line-chart.js';
export { chiInK, chiInR } from './prediction-figures.js';
