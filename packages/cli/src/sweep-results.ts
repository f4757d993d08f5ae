/**
 * results.jsonl: one line a candidate, written whole and flushed as it ends, so that a killed run loses at most what was at work. A line
 * cut short by a crash is set aside on resuming, and its candidate judged again.
 */
import { closeSync, existsSync, fsyncSync, mkdirSync, openSync, readFileSync, renameSync, writeFileSync, writeSync } from 'node:fs';
import { join } from 'node:path';
import { csvTable } from '@ringtrue/report';
import { UsageError } from './command.js';

export interface ResultLine {
  readonly file: string;
  /** Options of the candidate's own; with `file` it says which task this was. */
  readonly options: readonly string[];
  readonly error?: string;
  readonly finding?: string;
  readonly x?: number;
  readonly p?: number;
  readonly rFactor?: number;
  readonly logEvidence?: number;
  readonly overlength?: { readonly verdict: string; readonly stretch: { readonly value: number; readonly sd: number } };
  readonly evidence?: readonly { readonly file: string }[];
}

export const taskKey = ({ file, options }: Pick<ResultLine, 'file' | 'options'>): string => JSON.stringify([file, options]);

export class ResultFile {
  /** Tasks that have a line already. */
  readonly finished: ReadonlySet<string>;
  /** Lines set aside because they were not whole. */
  readonly damaged: number;
  private readonly path: string;
  private readonly descriptor: number;

  /** @throws {UsageError} the folder cannot be written, or holds results and resuming was not asked for */
  constructor(folder: string, isResumed: boolean) {
    this.path = join(folder, 'results.jsonl');
    try {
      mkdirSync(folder, { recursive: true });
      if (existsSync(this.path) && !isResumed)
        throw new UsageError(`${this.path} stands already; --resume goes on with it, another --out begins anew`);
      const { lines, damaged, isEnded } = this.read();
      this.damaged = damaged;
      this.finished = new Set(lines.map(taskKey));
      if (damaged > 0 && !isEnded) {
        // the cut line goes, in one step, before anything is added to it
        const temporary = `${this.path}.part-${process.pid}`;
        writeFileSync(temporary, lines.map((line) => `${JSON.stringify(line)}\n`).join(''));
        renameSync(temporary, this.path);
      }
      this.descriptor = openSync(this.path, 'a');
    } catch (error) {
      if (error instanceof UsageError) throw error;
      throw new UsageError(`cannot write to ${folder}: ${(error as Error).message}`);
    }
  }

  /** One write of one whole line: parts of a sweep may share the file. @throws {UsageError} the disk is full or gone */
  append(line: ResultLine): void {
    try {
      const bytes = Buffer.from(
        `${JSON.stringify(line, (_, part: unknown) => (ArrayBuffer.isView(part) ? Array.from(part as Float64Array) : part))}\n`,
      );
      let written = 0;
      while (written < bytes.length) written += writeSync(this.descriptor, bytes, written);
      fsyncSync(this.descriptor);
    } catch (error) {
      throw new UsageError(`cannot write to ${this.path}: ${(error as Error).message}; free space and go on with --resume`);
    }
  }

  close(): void {
    closeSync(this.descriptor);
  }

  read(): { readonly lines: ResultLine[]; readonly damaged: number; readonly isEnded: boolean } {
    if (!existsSync(this.path)) return { lines: [], damaged: 0, isEnded: true };
    const text = readFileSync(this.path, 'utf8');
    let damaged = 0;
    const lines = text.split('\n').flatMap((content): ResultLine[] => {
      if (content === '') return [];
      try {
        const line = JSON.parse(content) as ResultLine;
        if (typeof line.file === 'string' && Array.isArray(line.options)) return [line];
      } catch {
        // counted below
      }
      damaged++;
      return [];
    });
    return { lines, damaged, isEnded: text === '' || text.endsWith('\n') };
  }
}

/** Candidates on the same data, best evidence first, those within ln 10 of a group's best in one group; then those that failed. */
export function ranking(lines: readonly ResultLine[]): string {
  const dataOf = (line: ResultLine): string => (line.evidence ?? []).map(({ file }) => file).join(' + ');
  const judged = lines.filter(({ error }) => error === undefined);
  const order = (a: ResultLine, b: ResultLine): number =>
    dataOf(a).localeCompare(dataOf(b)) || b.logEvidence! - a.logEvidence! || a.file.localeCompare(b.file);
  let group = 0;
  let best: ResultLine | undefined;
  const rows = [...judged].sort(order).map((line) => {
    if (!best || dataOf(best) !== dataOf(line)) group = 1;
    else if (best.logEvidence! - line.logEvidence! > Math.log(10)) group++;
    else return row(line, group);
    best = line;
    return row(line, group);
  });
  const failed = lines.filter(({ error }) => error !== undefined).sort((a, b) => a.file.localeCompare(b.file));
  return csvTable({
    name: 'ranking',
    title: 'Ranking',
    columns: [
      'data',
      'group',
      'candidate',
      'options',
      'finding',
      'ln Z',
      'X',
      'p',
      'R-factor',
      'stretch',
      'stretch sd',
      'distances',
      'error',
    ],
    rows: [...rows, ...failed.map((line) => ['', '', line.file, line.options.join(' '), '', '', '', '', '', '', '', '', line.error!])],
  });

  function row(line: ResultLine, number: number): (string | number)[] {
    const { stretch, verdict } = line.overlength!;
    return [
      dataOf(line),
      number,
      line.file,
      line.options.join(' '),
      line.finding!,
      line.logEvidence!,
      line.x!,
      line.p!,
      line.rFactor!,
      stretch.value,
      stretch.sd,
      verdict,
      '',
    ];
  }
}
