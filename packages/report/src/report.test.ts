import { expect, test } from 'vitest';
import { csvTable } from './csv.js';

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
