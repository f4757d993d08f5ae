/** A report as one page without any outside file: readable on a screen, printable on A4 and Letter. */
import { escapeText, standalone } from '@ringtrue/figures';
import { type Block, type ReportDocument, readable } from './document.js';
import type { Table } from './prediction-tables.js';

const STYLE = `
:root { color-scheme: light; }
body { font: 15px/1.5 sans-serif; color: #20262c; background: #fff; max-width: 50rem; margin: 2rem auto; padding: 0 1rem; }
h1 { font-size: 1.5rem; } h2 { font-size: 1.2rem; margin-top: 2.2rem; } h3 { font-size: 1.02rem; margin-top: 1.6rem; }
p, li, td, th, figcaption { overflow-wrap: anywhere; }
.wide { overflow-x: auto; }
table { border-collapse: collapse; width: 100%; font-size: 0.86rem; font-variant-numeric: tabular-nums; }
caption { text-align: left; font-weight: bold; padding: 0.4rem 0; }
th, td { text-align: right; vertical-align: top; padding: 0.2rem 0.5rem; border-bottom: 1px solid #d9dee3; overflow-wrap: break-word; }
th:first-child, td:first-child, table.facts th, table.facts td { text-align: left; }
.facts th, .facts td { overflow-wrap: anywhere; }
table.facts th { width: 32%; font-weight: normal; color: #4b555e; }
figure { margin: 1.2rem 0; break-inside: avoid; }
figure svg { display: block; width: 100%; max-width: 32rem; height: auto; }
figcaption { font-size: 0.86rem; color: #4b555e; max-width: 36rem; }
.caution { border-left: 3px solid #c4571a; padding: 0.3rem 0 0.3rem 1rem; margin: 1rem 0; }
@page { size: auto; margin: 18mm 16mm; }
@media print {
  body { margin: 0; padding: 0; max-width: none; font-size: 10.5pt; }
  h2, h3, caption { break-after: avoid; } tr, li { break-inside: avoid; } thead { display: table-header-group; }
  .wide { overflow: visible; } table { font-size: 8pt; } th, td { padding: 0.12rem 0.3rem; }
  figure svg { max-width: 13cm; max-height: 20cm; }
}
`;

export function documentHtml({ title, blocks }: ReportDocument): string {
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><title>${escapeText(title)}</title><style>${STYLE}</style></head><body><main>
<h1>${escapeText(title)}</h1>
${blocks.map(blockHtml).join('\n')}
</main></body></html>
`;
}

function blockHtml(block: Block): string {
  switch (block.kind) {
    case 'heading':
      return `<h${block.level}>${escapeText(block.text)}</h${block.level}>`;
    case 'paragraph':
      return `<p>${escapeText(block.text)}</p>`;
    case 'caution':
      return `<p class="caution">${escapeText(block.text)}</p>`;
    case 'list':
      return `<ul>${block.items.map((item) => `<li>${escapeText(item)}</li>`).join('')}</ul>`;
    case 'facts':
      return `<table class="facts"><tbody>${block.facts.map(([name, value]) => `<tr><th scope="row">${escapeText(name)}</th><td>${escapeText(value)}</td></tr>`).join('')}</tbody></table>`;
    case 'table':
      return tableHtml(block.table);
    case 'figure':
      return `<figure id="figure-${escapeText(block.name)}">${standalone(block.svg)}<figcaption>${escapeText(block.caption)}</figcaption></figure>`;
  }
}

/** The scrolling box can be reached by keyboard, so that a narrow screen hides nothing. */
function tableHtml({ title, columns, rows }: Table): string {
  const head = columns.map((name) => `<th scope="col">${escapeText(name)}</th>`).join('');
  const body = rows.map((row) => `<tr>${row.map((value) => `<td>${escapeText(readable(value))}</td>`).join('')}</tr>`).join('\n');
  return `<div class="wide" tabindex="0" role="region" aria-label="${escapeText(title)}"><table><caption>${escapeText(title)}</caption><thead><tr>${head}</tr></thead><tbody>${body}</tbody></table></div>`;
}
