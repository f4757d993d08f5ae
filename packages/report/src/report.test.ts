import { predict, readStructure } from '@ringtrue/core';
import { expect, test } from 'vitest';
import { csvTable } from './csv.js';
import { documentHtml } from './document-html.js';
import { predictionReport } from './prediction-report.js';

test('commas, quotes and line ends inside a cell are quoted', () => {
  const csv = csvTable({
    name: 't',
    title: 't',
    columns: ['a', 'b'],
    rows: [
      ['x,"y"', 1.5],
      ['plain', -2e-7],
    ],
  });
  expect(csv).toBe('a,b\r\n"x,""y""",1.5\r\nplain,-2e-7\r\n');
});

const page = (title: string, thermal: 'debye' | 'springs' | 'einstein' | 'none') => {
  const structure = readStructure(`3\n${title}\nFe 0 0 0\nS 2.3 0 0\nS -2.3 0 0\n`);
  const prediction = predict(structure, { absorber: 'Fe', thermal, temperature: 20, bands: true }, { file: 'a&b.xyz', version: '1' });
  return documentHtml(predictionReport(prediction).document);
};

test('the report names the thermal model that was used', () => {
  expect(page('x', 'debye')).toContain('correlated Debye model, Debye temperature assumed, at 20 K');
  expect(page('x', 'springs')).toContain('springs set up from the coordinates, at 20 K');
  expect(page('x', 'einstein')).toContain('Einstein oscillators by bond');
  expect(page('x', 'none')).toContain('<td>none</td>');
});

test('titles and file names are text, never markup', () => {
  const html = page('<script>alert(1)</script>', 'none');
  expect(html).not.toContain('<script');
  expect(html).toContain('&lt;script&gt;');
  expect(html).toContain('a&amp;b.xyz');
});
