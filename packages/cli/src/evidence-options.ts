/** What `reduce` and `dose` share: their options, and reading scans with the file named in every error. */
import { type MeasuredScan, parseColumnRoles, type ReduceOptions, readScan, type ScanReadOptions } from '@ringtrue/core';
import { type Command, InvalidArgumentError, Option } from 'commander';
import { aboutFile, UsageError } from './command.js';
import { readText } from './files.js';
import { plain } from './terminal.js';

export interface EvidenceFlags {
  readonly element?: string;
  readonly edge?: 'K' | 'L1' | 'L2' | 'L3';
  readonly e0?: number;
  readonly pre?: readonly [number, number];
  readonly preForm?: 'line' | 'victoreen';
  readonly post?: readonly [number, number];
  readonly postDegree?: number;
  readonly columns?: ScanReadOptions['columns'];
  readonly energyUnit?: 'eV' | 'keV' | 'degrees' | 'radians';
  readonly dSpacing?: number;
  readonly chiWeight?: number;
  readonly json?: boolean;
  readonly out?: string;
}

export function number(text: string): number {
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value)) throw new InvalidArgumentError(`a number is wanted, got "${plain(text)}".`);
  return value;
}

/** "0,0,1" */
export function vector(text: string): readonly [number, number, number] {
  const parts = text.split(',').map((part) => (part.trim() === '' ? Number.NaN : Number(part)));
  if (parts.length !== 3 || !parts.every(Number.isFinite) || parts.every((part) => part === 0))
    throw new InvalidArgumentError(`three numbers like 0,0,1, not all 0, are wanted, got "${plain(text)}".`);
  return parts as unknown as readonly [number, number, number];
}

/** "-150,-30" */
export function range(text: string): readonly [number, number] {
  const parts = text.split(',').map((part) => (part.trim() === '' ? Number.NaN : Number(part)));
  const [from, to] = parts;
  if (parts.length !== 2 || !(from! < to!))
    throw new InvalidArgumentError(`two rising numbers like -150,-30 are wanted, got "${plain(text)}".`);
  return [from!, to!];
}

function columns(text: string): NonNullable<ScanReadOptions['columns']> {
  try {
    return parseColumnRoles(text);
  } catch (error) {
    throw new InvalidArgumentError(`${plain((error as Error).message)}.`);
  }
}

/** Options that say what the files are and how the edge is treated. */
export function addEvidenceOptions(command: Command): Command {
  return command
    .option('--element <symbol>', 'absorbing element (default: as the file declares)')
    .addOption(new Option('--edge <edge>', 'absorption edge (default: as the file declares, else K)').choices(['K', 'L3', 'L2', 'L1']))
    .option('--e0 <eV>', 'edge energy, eV (default: the steepest rise near the tabulated edge)', number)
    .option('--pre <from,to>', 'pre-edge range, eV from the edge (default -150,-30)', range)
    .addOption(new Option('--pre-form <form>', 'pre-edge curve (default line)').choices(['line', 'victoreen']))
    .option('--post <from,to>', 'post-edge range, eV from the edge (default 100 to the end)', range)
    .option('--post-degree <n>', 'degree of the post-edge polynomial (default 2)', number)
    .option(
      '--columns <roles>',
      'which column is what: energy=1,mu=2 or energy=1,i0=2,it=3,ir=4 or energy=1,i0=2,if=3+4 or k=1,chi=2',
      columns,
    )
    .addOption(new Option('--energy-unit <unit>', 'unit of the first column').choices(['eV', 'keV', 'degrees', 'radians']))
    .option('--d-spacing <angstrom>', 'd-spacing of the monochromator, Å, for angles', number)
    .option('--chi-weight <n>', 'the chi column holds k to this power times chi (default 0)', number)
    .option('--json', 'print one JSON document and nothing else on standard output');
}

/** The part of the flags that the core's reduction takes. */
export function reduceOptionsOf({ element, edge, e0, pre, preForm, post, postDegree }: EvidenceFlags): ReduceOptions {
  if (postDegree !== undefined && !(Number.isInteger(postDegree) && postDegree >= 0 && postDegree <= 3)) {
    throw new UsageError(`--post-degree: 0, 1, 2 or 3 is wanted, got ${postDegree}`);
  }
  return {
    ...(element === undefined ? {} : { element }),
    ...(edge === undefined ? {} : { edge }),
    ...(e0 === undefined ? {} : { e0 }),
    ...(pre === undefined ? {} : { pre }),
    ...(preForm === undefined ? {} : { preForm }),
    ...(post === undefined ? {} : { post }),
    ...(postDegree === undefined ? {} : { postDegree }),
  };
}

/** @throws {UsageError} a file cannot be read as a spectrum; it is named */
export function readScans(files: readonly string[], flags: EvidenceFlags): MeasuredScan[] {
  const { element, edge, columns, energyUnit, dSpacing, chiWeight } = flags;
  const options: ScanReadOptions = {
    ...(element === undefined ? {} : { element }),
    ...(edge === undefined ? {} : { edge }),
    ...(columns === undefined ? {} : { columns }),
    ...(energyUnit === undefined ? {} : { energyUnit }),
    ...(dSpacing === undefined ? {} : { dSpacing }),
    ...(chiWeight === undefined ? {} : { chiWeight }),
  };
  return files.map((file) => {
    const text = readText(file);
    return aboutFile(file, () => readScan(text, options));
  });
}

/** Notes of the files, each once, with its line. */
export function notesOf(warnings: readonly { readonly message: string; readonly line?: number }[]): string[] {
  return [...new Set(warnings.map(({ message, line }) => `Note: ${line === undefined ? '' : `line ${line}: `}${plain(message)}`))];
}
