/** `ringtrue sweep`: many candidates, overnight. */
import { availableParallelism } from 'node:os';
import { resolve } from 'node:path';
import { type Command, InvalidArgumentError, Option } from 'commander';
import { runCandidates } from './candidate-pool.js';
import { runCommand, UsageError } from './command.js';
import { number } from './evidence-options.js';
import { writeFolder } from './files.js';
import { addJudgeOptions, each } from './judge-options.js';
import { ResultFile, type ResultLine, ranking, taskKey } from './sweep-results.js';
import { type SweepTask, sweepTasks } from './sweep-tasks.js';
import { plain } from './terminal.js';

interface Flags {
  readonly out: string;
  readonly jobs?: number;
  readonly part?: readonly [number, number];
  readonly resume?: boolean;
  readonly timeLimit?: number;
  readonly memoryLimit?: number;
  readonly data?: readonly string[];
  readonly absorber?: readonly string[];
}

const SECONDS = 600;
const MEGABYTES = 2048;
/** Options of sweep itself, which are none of a candidate's. */
const OWN = new Set(['--out', '--jobs', '--part', '--resume', '--time-limit', '--memory-limit', '--json']);

const EXAMPLES = `
Examples:
  ringtrue sweep models --data scan1.xdi,scan2.xdi --absorber Mn --temperature 10 --out night
  ringtrue sweep manifest.csv --jobs 8 --out night --resume
  ringtrue sweep manifest.jsonl --part 3/16 --out night

A manifest is CSV with a heading (file, data, absorber, temperature, k-range, …: the names of judge's options) or JSON Lines with the
same names; what it leaves open comes from the command line. results.jsonl in the folder gets one line a candidate as each ends;
a killed run goes on with --resume. Parts are for array jobs of a batch scheduler:
  #SBATCH --array=1-16
  ringtrue sweep manifest.csv --part $SLURM_ARRAY_TASK_ID/16 --jobs 4 --out night --resume`;

function part(text: string): readonly [number, number] {
  const found = /^(\d+)\/(\d+)$/.exec(text);
  const [i, n] = [Number(found?.[1]), Number(found?.[2])];
  if (!(i >= 1 && i <= n)) throw new InvalidArgumentError(`a part like 3/16 is wanted, got "${plain(text)}".`);
  return [i, n];
}

export function addSweep(program: Command): void {
  addJudgeOptions(
    program
      .command('sweep')
      .summary('judge many structures, one after another or side by side')
      .description('Judge every structure of a folder or manifest; one bad candidate never stops the rest, a killed run can be resumed.')
      .argument('<source>', 'folder of coordinate files, or a manifest (CSV or JSON Lines)')
      .option('--data <scans>', 'as in judge, for candidates without data of their own', each(String))
      .option('--absorber <element>', 'as in judge, for candidates without one of their own', each(String)),
  )
    .requiredOption('--out <folder>', 'folder for results.jsonl and ranking.csv')
    .option('--jobs <n>', 'candidates at a time (default: the cores of this machine)', number)
    .option('--part <i/n>', 'only every n-th candidate from the i-th: for array jobs', part)
    .option('--resume', 'go on with the results that stand in the folder')
    .addOption(new Option('--time-limit <s>', `longest time for one candidate (default ${SECONDS})`).argParser(number))
    .addOption(new Option('--memory-limit <MB>', `memory of one candidate (default ${MEGABYTES})`).argParser(number))
    .addHelpText('after', EXAMPLES)
    .action((source: string, flags: Flags, command: Command) => runCommand(() => run(source, flags, command)));
}

async function run(source: string, flags: Flags, command: Command): Promise<void> {
  const bounds = {
    jobs: whole('--jobs', flags.jobs ?? availableParallelism(), 1, 256),
    seconds: whole('--time-limit', flags.timeLimit ?? SECONDS, 1, 1e6),
    megabytes: whole('--memory-limit', flags.memoryLimit ?? MEGABYTES, 64, 1e6),
  };
  const { tasks, notes } = sweepTasks(source);
  const [i, n] = flags.part ?? [1, 1];
  const own = tasks.filter((_, t) => t % n === i - 1);
  const shared = sharedOptions(command);
  checkEnough(own, flags, source);
  const results = new ResultFile(flags.out, flags.resume === true);
  const open = own.filter((task) => !results.finished.has(taskKey(task)));
  for (const note of notes) process.stderr.write(`Note: ${note}\n`);
  if (results.damaged > 0)
    process.stderr.write(`Note: ${results.damaged} damaged lines of results.jsonl are set aside; their candidates are judged again\n`);
  if (open.length < own.length) process.stderr.write(`${own.length - open.length} of ${own.length} candidates are done already\n`);
  const began = Date.now();
  let ended = 0;
  const byPath = new Map(open.map((task) => [requestKey(task, shared), task]));
  const requests = open.map((task) => ({ file: task.file, path: task.path, args: argsOf(task, shared) }));
  try {
    await runCandidates(requests, bounds, (request, result) => {
      const task = byPath.get(JSON.stringify([request.path, request.args]))!;
      results.append({ file: task.file, options: task.options, ...result } as ResultLine);
      ended++;
      report(ended, open.length, began, task, result);
    });
  } finally {
    results.close();
  }
  const { lines } = results.read();
  writeFolder(flags.out, new Map([['ranking.csv', ranking(lines)]]));
  const failed = lines.filter(({ error }) => error !== undefined).length;
  process.stdout.write(
    `${lines.length} candidates in ${plain(flags.out)}, ${failed} of them without a finding; ranking.csv lists them by evidence. Consistency is not proof.\n`,
  );
}

/** An option as it was written, and its value where it takes one. */
type Word = readonly [name: string, value?: string];

const argsOf = (task: SweepTask, shared: readonly Word[]): string[] => [
  ...shared.flatMap(([name, value]) => (task.options.includes(name) ? [] : value === undefined ? [name] : [name, value])),
  ...task.options,
];
const requestKey = (task: SweepTask, shared: readonly Word[]): string => JSON.stringify([task.path, argsOf(task, shared)]);

/** The command line's options for candidates: everything but the source and what is sweep's own; names of files made absolute. */
function sharedOptions(command: Command): Word[] {
  const raw = (command.parent as Command & { rawArgs: string[] }).rawArgs;
  const words = raw.slice(raw.indexOf('sweep') + 1).flatMap((word) => {
    const split = /^(--[a-z0-9-]+)=(.*)$/s.exec(word);
    return split ? [split[1]!, split[2]!] : [word];
  });
  const shared: Word[] = [];
  for (let w = 0; w < words.length; w++) {
    const option = command.options.find(({ long }) => long === words[w]);
    if (!option) continue;
    const name = option.long!;
    const value = option.required ? words[++w]! : undefined;
    if (OWN.has(name)) continue;
    if (value === undefined) shared.push([name]);
    else
      shared.push([
        name,
        name === '--data'
          ? value
              .split(',')
              .map((file) => resolve(file))
              .join(',')
          : value,
      ]);
  }
  return shared;
}

function checkEnough(tasks: readonly SweepTask[], { data, absorber }: Flags, source: string): void {
  for (const [name, given] of [
    ['data', data],
    ['absorber', absorber],
  ] as const) {
    const lacking = tasks.find(({ options }) => !options.includes(`--${name}`));
    if (!given && lacking) throw new UsageError(`${source}: ${plain(lacking.file)} has no ${name}, and no --${name} is given for all`);
  }
}

function whole(name: string, value: number, low: number, high: number): number {
  if (!(Number.isInteger(value) && value >= low && value <= high))
    throw new UsageError(`${name}: a whole number from ${low} to ${high} is wanted, got ${value}`);
  return value;
}

function report(ended: number, all: number, began: number, task: SweepTask, result: Readonly<Record<string, unknown>>): void {
  const left = ((Date.now() - began) / ended / 1000) * (all - ended);
  const what = result['error'] === undefined ? String(result['finding']) : `error: ${String(result['error'])}`;
  process.stderr.write(`${ended}/${all} ${plain(task.file)}: ${plain(what)}; about ${duration(left)} left\n`);
}

function duration(seconds: number): string {
  if (seconds < 90) return `${Math.round(seconds)} s`;
  if (seconds < 5400) return `${Math.round(seconds / 60)} min`;
  return `${(seconds / 3600).toFixed(1)} h`;
}
