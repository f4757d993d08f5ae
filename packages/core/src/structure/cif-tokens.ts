/**
 * CIF 1.1 (International Tables G, 2.2) as a stream of items: no token list is kept, so that a file of hundreds of megabytes
 * costs its own text and no more. Tags and keywords are case-insensitive; "." and "?" unquoted mean no value.
 */
import { ReadError } from '../errors.js';

/** undefined: no value ("." or "?"). */
export type CifValue = string | undefined;

export interface CifHandler {
  block(name: string, line: number): void;
  pair(tag: string, value: CifValue, line: number): void;
  /** Tags in lower case. Returns which columns to hand over and the taker of rows, or undefined to skip the loop. */
  loop(
    tags: readonly string[],
    line: number,
  ): { columns: readonly number[]; row: (values: readonly CifValue[], line: number) => void } | undefined;
}

const QUOTE = 39;
const DOUBLE = 34;
const SEMICOLON = 59;

type Kind = 'tag' | 'loop' | 'block' | 'save' | 'value' | 'end';

class Tokens {
  kind: Kind = 'end';
  /** Of the present item, without quotes. */
  start = 0;
  end = 0;
  line = 1;
  private quoted = false;
  private cursor = 0;
  private cursorLine = 1;
  readonly text: string;

  constructor(text: string) {
    this.text = text;
    this.next();
  }

  get value(): CifValue {
    if (this.isMissing()) return undefined;
    return this.text.slice(this.start, this.end);
  }

  private isMissing(): boolean {
    if (this.quoted || this.end - this.start !== 1) return false;
    const code = this.text.charCodeAt(this.start);
    return code === 46 || code === 63;
  }

  next(): void {
    const { text } = this;
    let i = this.cursor;
    for (;;) {
      const code = text.charCodeAt(i);
      if (code === 10) this.cursorLine++;
      else if (code === 35) {
        const at = text.indexOf('\n', i);
        i = at < 0 ? text.length : at;
        continue;
      } else if (!(code <= 32)) break;
      i++;
    }
    this.line = this.cursorLine;
    this.quoted = false;
    if (i >= text.length) {
      this.kind = 'end';
      this.cursor = i;
      return;
    }
    const code = text.charCodeAt(i);
    if (code === SEMICOLON && (i === 0 || text.charCodeAt(i - 1) === 10)) this.textField(i);
    else if (code === QUOTE || code === DOUBLE) this.quotedValue(i, code);
    else this.bareWord(i);
  }

  private textField(at: number): void {
    const close = this.text.indexOf('\n;', at);
    if (close < 0)
      throw new ReadError(`line ${this.line}: a text field opened by ";" is never closed; end it with ";" at a line start`, {
        line: this.line,
      });
    this.kind = 'value';
    this.quoted = true;
    this.start = at + 1;
    this.end = close;
    for (let i = this.text.indexOf('\n', at); i >= 0 && i <= close; i = this.text.indexOf('\n', i + 1)) this.cursorLine++;
    this.cursor = close + 2;
  }

  private quotedValue(at: number, quote: number): void {
    const { text } = this;
    let i = at + 1;
    // A quote ends the value only before white space: 'C2''' and 'a dog's life' are whole.
    while (i < text.length && !(text.charCodeAt(i) === quote && !(text.charCodeAt(i + 1) > 32))) {
      if (text.charCodeAt(i) === 10) break;
      i++;
    }
    if (text.charCodeAt(i) !== quote) {
      throw new ReadError(`line ${this.line}: a quoted value is not closed on its line; add the closing quote`, {
        line: this.line,
        text: text.slice(at, i),
      });
    }
    this.kind = 'value';
    this.quoted = true;
    this.start = at + 1;
    this.end = i;
    this.cursor = i + 1;
  }

  private bareWord(at: number): void {
    const { text } = this;
    let i = at;
    while (text.charCodeAt(i) > 32) i++;
    this.start = at;
    this.end = i;
    this.cursor = i;
    this.kind = this.kindOfWord();
  }

  private kindOfWord(): Kind {
    const first = this.text.charCodeAt(this.start) | 32;
    if (this.text.charCodeAt(this.start) === 95) return 'tag';
    if (first !== 100 && first !== 108 && first !== 115 && first !== 103) return 'value'; // d, l, s, g
    const word = this.text.slice(this.start, this.end).toLowerCase();
    if (word === 'loop_') return 'loop';
    if (word.startsWith('data_')) return 'block';
    if (word.startsWith('save_') || word === 'global_' || word === 'stop_') return 'save';
    return 'value';
  }
}

/**
 * Walks through a CIF text and tells the handler of blocks, pairs and loop rows.
 * @throws {ReadError} a quote, text field, pair or loop that does not come out even, with its line
 */
export function scanCif(text: string, handler: CifHandler): void {
  const tokens = new Tokens(text);
  while (tokens.kind !== 'end') {
    const { kind, line } = tokens;
    if (kind === 'block') {
      handler.block(text.slice(tokens.start + 5, tokens.end), line);
      tokens.next();
    } else if (kind === 'save') tokens.next();
    else if (kind === 'loop') scanLoop(tokens, handler);
    else if (kind === 'tag') {
      const tag = text.slice(tokens.start, tokens.end).toLowerCase();
      tokens.next();
      if ((tokens.kind as Kind) !== 'value')
        throw new ReadError(`line ${line}: ${tag} has no value; write ? where it is unknown`, { line, text: tag });
      handler.pair(tag, tokens.value, line);
      tokens.next();
    } else {
      const found = text.slice(tokens.start, Math.min(tokens.end, tokens.start + 40));
      throw new ReadError(`line ${line}: a value stands where a tag should, "${found}"; quote values that hold blanks`, {
        line,
        text: found,
      });
    }
  }
}

function scanLoop(tokens: Tokens, handler: CifHandler): void {
  const loopLine = tokens.line;
  const tags: string[] = [];
  tokens.next();
  while (tokens.kind === 'tag') {
    tags.push(tokens.text.slice(tokens.start, tokens.end).toLowerCase());
    tokens.next();
  }
  if (tags.length === 0) throw new ReadError(`line ${loopLine}: loop_ names no tags`, { line: loopLine });
  const wanted = handler.loop(tags, loopLine);
  const slots = new Int16Array(tags.length).fill(-1);
  wanted?.columns.forEach((column, slot) => {
    slots[column] = slot;
  });
  const row: CifValue[] = new Array(wanted?.columns.length ?? 0).fill(undefined);
  let column = 0;
  let rowLine = tokens.line;
  while (tokens.kind === 'value') {
    if (column === 0) rowLine = tokens.line;
    const slot = slots[column]!;
    if (slot >= 0) row[slot] = tokens.value;
    if (++column === tags.length) {
      column = 0;
      wanted?.row(row, rowLine);
    }
    tokens.next();
  }
  if (column !== 0) {
    throw new ReadError(
      `line ${rowLine}: the loop of line ${loopLine} has ${tags.length} columns, but its values end with a row of ${column}; a value is missing or one too many stands before`,
      { line: rowLine },
    );
  }
}
