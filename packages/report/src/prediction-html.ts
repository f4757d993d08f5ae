import type { Prediction } from '@ringtrue/core';
import { chiInK, chiInR, escapeText } from '@ringtrue/figures';
import { type Table, tablesOf } from './prediction-tables.js';

const STYLE = `
:root { color-scheme: light; }
body { font: 15px/1.5 system-ui, sans-serif; color: #20262c; max-width: 46rem; margin: 2rem auto; padding: 0 1rem; }
h1 { font-size: 1.5rem; } h2 { font-size: 1.1rem; margin-top: 2rem; }
table { border-collapse: collapse; width: 100%; font-variant-numeric: tabular-nums; }
th, td { text-align: right; padding: 0.2rem 0.5rem; border-bottom: 1px solid #d9dee3; }
th:first-child, td:first-child { text-align: left; }
svg { max-width: 100%; height: auto; } figure { margin: 1rem 0; break-inside: avoid; }
aside { border-left: 3px solid #c4571a; padding: 0.3rem 0 0.3rem 1rem; margin: 1rem 0; }
@media print { body { margin: 0; max-width: none; } h2 { break-after: avoid; } tr { break-inside: avoid; } }
`;

/** A self-contained page: what was assumed, the figures, the tables, the caution. */
export function predictionHtml(prediction: Prediction): string {
  const { structure, options, absorbers, warnings, program } = prediction;
  const tables = tablesOf(prediction);
  const title = `Predicted EXAFS of ${structure.file}`;
  const assumed: [string, string][] = [
    ['Structure', `${structure.file} (${structure.format}, ${structure.atoms} atoms) ${structure.title}`],
    ['Absorber', absorbers.map(({ label, weight }) => `${label} (weight ${weight.toFixed(3)})`).join(', ')],
    ['Edge', options.edge],
    ...(options.electricVector ? [['Electric vector', options.electricVector.join(', ')] as [string, string]] : []),
    ...disorderRows(prediction),
    ['Self-energy', options.selfEnergy],
    ['Longest half path', `${options.radius} Å`],
    ['S0²', String(options.s02)],
    ['Shift of the energy origin', `${options.e0} eV`],
  ];
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><title>${escapeText(title)}</title><style>${STYLE}</style></head><body>
<h1>${escapeText(title)}</h1>
<aside>A prediction that agrees with a measurement shows that the structure is consistent with it; it proves no structure. Measurements at X-ray sources are made under the facility's own radiation-safety rules.</aside>
<h2>What was assumed</h2>
<table>${assumed.map(([name, value]) => `<tr><td>${escapeText(name)}</td><td>${escapeText(value)}</td></tr>`).join('')}</table>
${warnings.length ? `<h2>To be known</h2><ul>${warnings.map(({ message }) => `<li>${escapeText(message)}</li>`).join('')}</ul>` : ''}
<h2>Spectrum</h2>
<figure>${chiInK(prediction)}</figure>
<figure>${chiInR(prediction)}</figure>
${htmlTable(tables.shells)}
${htmlTable(tables.paths)}
<p>Made by ringtrue ${escapeText(program.version)}.</p>
</body></html>
`;
}

function htmlTable({ title, columns, rows }: Table): string {
  const cell = (value: string | number): string => escapeText(typeof value === 'number' ? number(value) : value);
  return `<h2>${escapeText(title)}</h2><table><thead><tr>${columns.map((name) => `<th>${escapeText(name)}</th>`).join('')}</tr></thead><tbody>${rows
    .map((row) => `<tr>${row.map((value) => `<td>${cell(value)}</td>`).join('')}</tr>`)
    .join('')}</tbody></table>`;
}

const number = (value: number): string => (Number.isInteger(value) ? String(value) : value.toPrecision(4));

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
