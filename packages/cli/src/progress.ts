/** A line on standard error that overwrites itself, where a person is looking. */
import { plain } from './terminal.js';

export interface Progress {
  readonly running: { readonly onProgress: (stage: string, fraction: number) => void };
  /** Takes the line away. */
  readonly clear: () => void;
}

/** @returns undefined where standard error is no terminal */
export function showProgress(): Progress | undefined {
  if (!process.stderr.isTTY) return undefined;
  let shown = '';
  return {
    running: {
      onProgress(stage, fraction) {
        const line = `${stage} ${Math.round(100 * fraction)} %`;
        if (line === shown) return;
        shown = line;
        process.stderr.write(`\r\u001b[K${plain(line)}`);
      },
    },
    clear: () => process.stderr.write('\r\u001b[K'),
  };
}
