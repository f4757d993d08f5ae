/** The command line under hostile arguments and files, in this process: exit codes, one line of fault, nothing that steers a terminal. */
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import * as fc from 'fast-check';
import { ringtrueProgram } from '../../packages/cli/src/program.js';
import { SCANS, STRUCTURES } from './corpus.js';
import { type Input, scanInputs, structureInputs } from './inputs.js';

export interface Call {
  readonly command: string;
  readonly input: Input;
  readonly options: readonly string[];
}

const value = fc.oneof(
  {
    weight: 3,
    arbitrary: fc.constantFrom(
      'Fe',
      'Mn',
      'K',
      'L3',
      '3',
      '0',
      '-1',
      '1e9',
      'NaN',
      '',
      '1,2',
      '-150,-30',
      'energy=1,mu=2',
      'constructor=1',
      '__proto__=2',
      'debye',
      'mean',
      '1e400',
    ),
  },
  {
    weight: 1,
    arbitrary: fc.constantFrom('\u001b[31m', '../../x', '/dev/null', '\0', '--', '-', '%n', '\n', '٣', 'a'.repeat(5000), '$(id)', '<b>'),
  },
  { weight: 1, arbitrary: fc.string({ maxLength: 8, unit: 'binary' }) },
);
// biome-ignore format: a list
const FLAGS = ['--absorber', '--edge', '--json', '--element', '--e0', '--pre', '--post', '--columns', '--energy-unit', '--d-spacing', '--chi-weight', '--background-below', '--k-max', '--self-absorption',
  '--temperature', '--help', '--version', '--nonsense', '--radius', '--__proto__', '--constructor', '-x'];
const options = fc
  .array(fc.tuple(fc.constantFrom(...FLAGS), fc.option(value)), { maxLength: 4 })
  .map((pairs) => pairs.flatMap(([flag, given]) => (given === null ? [flag] : [flag, given])));

export const calls: fc.Arbitrary<Call> = fc.oneof(
  fc.record({ command: fc.constant('sites'), input: structureInputs(STRUCTURES), options }),
  fc.record({ command: fc.constantFrom('reduce', 'dose'), input: scanInputs(SCANS), options }),
  fc.record({
    command: fc.constantFrom('judge', 'predict', 'constructor', '', '__proto__', '--help'),
    input: structureInputs(STRUCTURES.slice(0, 3)),
    options: fc.constant(['--absorber', 'Xx']),
  }),
);

// biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is looked for
const STEERS = /[\u0000-\u0008\u000b-\u001f\u007f-\u009f\u202a-\u202e\u2066-\u2069]/;

/**
 * @returns the exit code
 * @throws {Error} anything that must not happen
 */
export async function runCall({ command, input, options }: Call): Promise<number> {
  const folder = mkdtempSync(join(tmpdir(), 'ringtrue-fuzz-'));
  const file = join(folder, 'input');
  const written = { out: '', err: '' };
  const [stdout, stderr] = [process.stdout.write, process.stderr.write];
  process.exitCode = 0;
  let code = 0;
  let beside: string[] = [];
  try {
    writeFileSync(file, input.text);
    process.stdout.write = ((text: string) => {
      written.out += text;
      return true;
    }) as typeof process.stdout.write;
    process.stderr.write = ((text: string) => {
      written.err += text;
      return true;
    }) as typeof process.stderr.write;
    await ringtrueProgram().parseAsync([command, file, ...options, '--out', join(folder, 'out')].filter(isAsked(command)), {
      from: 'user',
    });
    code = Number(process.exitCode);
  } catch (error) {
    const { code: kind = '', exitCode } = error as { code?: string; exitCode?: number };
    if (!kind.startsWith('commander.')) throw error;
    code = exitCode === 0 ? 0 : 2;
  } finally {
    process.stdout.write = stdout;
    process.stderr.write = stderr;
    process.exitCode = 0;
    beside = readdirSync(folder).filter((name) => name !== 'input' && name !== 'out');
    rmSync(folder, { recursive: true, force: true });
  }
  if (beside.length > 0) throw new Error(`written outside the folder: ${beside.join()}`);
  if (code !== 0 && code !== 2) throw new Error(`exit code ${code}: ${written.err}`);
  if (code === 2 && written.err.trim() === '') throw new Error('refused without a word');
  for (const text of [written.out, written.err])
    if (STEERS.test(text)) throw new Error(`control characters reach the terminal: ${JSON.stringify(text.slice(0, 400))}`);
  if (
    code === 0 &&
    options.includes('--json') &&
    !options.some((option) => /^(--help|--version|-h|-V)/.test(option)) &&
    written.out.trim() !== ''
  )
    JSON.parse(written.out);
  return code;
}

/** `sites` writes no folder. */
const isAsked =
  (command: string) =>
  (_: string, i: number, all: readonly string[]): boolean =>
    command !== 'sites' || i < all.length - 2;
