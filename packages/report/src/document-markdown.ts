/** A report as Markdown with pipe tables; figures are files beside it. */
import { type Block, type ReportDocument, readable } from './document.js';

/** What Markdown and HTML would take for markup is made text. */
const plain = (text: string): string => text.replace(/\s+/g, ' ').replace(/[\\`*_[\]<>|#]/g, '\\$&');

export const documentMarkdown = ({ title, blocks }: ReportDocument): string =>
  `${[`# ${plain(title)}`, ...blocks.map(blockMarkdown)].join('\n\n')}\n`;

function blockMarkdown(block: Block): string {
  switch (block.kind) {
    case 'heading':
      return `${'#'.repeat(block.level)} ${plain(block.text)}`;
    case 'paragraph':
      return plain(block.text);
    case 'caution':
      return `> ${plain(block.text)}`;
    case 'list':
      return block.items.map((item) => `- ${plain(item)}`).join('\n');
    case 'facts':
      return pipes(['', ''], block.facts, true);
    case 'table':
      return `**${plain(block.table.title)}**\n\n${pipes(block.table.columns, block.table.rows, false)}`;
    case 'figure':
      return `![${plain(block.caption)}](figures/${block.name}.svg)\n\n${plain(block.caption)}`;
  }
}

function pipes(columns: readonly string[], rows: readonly (readonly (string | number)[])[], isWords: boolean): string {
  const line = (cells: readonly (string | number)[]): string => `| ${cells.map((cell) => plain(readable(cell))).join(' | ')} |`;
  return [line(columns), `|${columns.map((_, i) => (i === 0 || isWords ? ' --- |' : ' ---: |')).join('')}`, ...rows.map(line)].join('\n');
}
