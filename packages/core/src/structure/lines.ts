/** Walks over the lines of a text without splitting it into an array of strings. */
export class Lines {
  /** Of the present line: its number from 1, and where it starts and ends (without its line break). */
  number = 0;
  start = 0;
  end = 0;
  readonly text: string;
  private cursor = 0;

  constructor(text: string) {
    this.text = text;
  }

  next(): boolean {
    if (this.cursor >= this.text.length) return false;
    this.start = this.cursor;
    const at = this.text.indexOf('\n', this.cursor);
    this.end = at < 0 ? this.text.length : at;
    this.cursor = this.end + 1;
    if (this.end > this.start && this.text.charCodeAt(this.end - 1) === 13) this.end--;
    this.number++;
    return true;
  }

  get line(): string {
    return this.text.slice(this.start, this.end);
  }
}

/** Byte order mark off; lone carriage returns (old Mac files) become line breaks. */
export function plainText(text: string): string {
  const body = text.charCodeAt(0) === 0xfeff ? text.slice(1) : text;
  return body.includes('\r') && /\r(?!\n)/.test(body) ? body.replace(/\r\n?/g, '\n') : body;
}
