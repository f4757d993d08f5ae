/** What may go to a terminal: text from files without control characters, tables, a small plot. */
import asciichart from 'asciichart';
import Table from 'cli-table3';

/** Text on one line with control and escape characters taken out, so that a file cannot steer the terminal. */
export function plain(text: string): string {
  // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is looked for
  return text.replace(/\s+/g, ' ').replace(/[\u0000-\u001f\u007f-\u009f\u202a-\u202e\u2066-\u2069]/g, '');
}

/** A table without colours, numbers to the right. */
export function textTable(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const table = new Table({
    head: head.map(plain),
    colAligns: head.map((_, i) => (i === 0 ? 'left' : 'right')),
    style: { head: [], border: [], compact: true },
  });
  for (const row of rows) table.push(row.map(plain));
  return table.toString();
}

/** A small plot of y over evenly spaced x, `width` characters wide. */
export function smallPlot(y: ArrayLike<number>, width: number, height: number): string {
  const columns = Array.from({ length: width }, (_, i) => y[Math.round((i * (y.length - 1)) / (width - 1))]!);
  return asciichart.plot(columns, { height, format: (value) => value.toFixed(1).padStart(7) });
}
