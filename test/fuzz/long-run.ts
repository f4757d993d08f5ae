/**
 * Hostile input in the long: each target in a process of bounded memory, watched from outside.
 *
 *   npm run fuzz -- [--inputs 1000000] [--seed 1] [--targets structure,stream,scan,cli] [--keep folder]
 *
 * Prints one JSON line a target: how many were read and refused, each different failure once with its number, the slowest input in ms,
 * the largest heap in MB. An input that takes more than 2 s, or ends its process, is a failure; `--keep` writes failing inputs there,
 * to be cut down and put into found/. Exit code 1 when anything failed.
 */
import { fork } from 'node:child_process';
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import * as fc from 'fast-check';
import { calls, runCall } from './command-line.js';
import { TARGETS, type TargetName } from './targets.js';

type Name = TargetName | 'cli';
/** Parts of the whole: a spectrum or a command takes ten times as long as a structure. */
const SHARES: Readonly<Record<Name, number>> = { structure: 0.7, stream: 0.17, scan: 0.1, cli: 0.03 };
const BATCH = 200;
const SLOW_MS = 2000;
const HEAP_MB = 1024;
/** Set in the processes that do the work. */
const WORKER = 'RINGTRUE_FUZZ_WORKER';

interface Task {
  readonly name: Name;
  readonly seed: number;
  readonly batches: number;
}

type News =
  | { readonly kind: 'start'; readonly text: string }
  | { readonly kind: 'end'; readonly outcome: string; readonly ms: number; readonly failure?: string }
  | { readonly kind: 'heap'; readonly mb: number }
  | { readonly kind: 'batch'; readonly next: number };

async function work({ name, seed, batches }: Task, from: number): Promise<void> {
  const tell = (news: News) => process.send!(news);
  const one = async (text: string, run: () => unknown): Promise<void> => {
    tell({ kind: 'start', text });
    const start = performance.now();
    let outcome = 'failed';
    let failure: string | undefined;
    try {
      outcome = String(await run());
    } catch (error) {
      const { stack = '' } = error as Error;
      failure = stack.split('\n').slice(0, 4).join(' | ').slice(0, 600);
    }
    tell({ kind: 'end', outcome, ms: performance.now() - start, ...(failure === undefined ? {} : { failure }) });
  };
  for (let batch = from; batch < batches; batch++) {
    const options = { numRuns: BATCH, seed: seed * 1_000_003 + batch };
    if (name === 'cli') for (const call of fc.sample(calls, options)) await one(JSON.stringify(call), () => runCall(call));
    else for (const { text } of fc.sample(TARGETS[name].inputs, options)) await one(text, () => TARGETS[name].run(text));
    tell({ kind: 'heap', mb: Math.round(process.memoryUsage().heapUsed / 1e6) });
    tell({ kind: 'batch', next: batch + 1 });
  }
}

interface Report {
  readonly outcomes: Record<string, number>;
  readonly failures: Map<string, { count: number; text: string }>;
  slowestMs: number;
  heapMb: number;
}

/** Runs a target to its end, starting a new process after every one that hung or died. */
async function watch(task: Task): Promise<Report> {
  const report: Report = { outcomes: {}, failures: new Map(), slowestMs: 0, heapMb: 0 };
  const fail = (what: string, text: string): void => {
    const known = report.failures.get(what);
    if (known) known.count++;
    else report.failures.set(what, { count: 1, text });
  };
  let from = 0;
  while (from < task.batches) {
    await new Promise<void>((resolve) => {
      const worker = fork(fileURLToPath(import.meta.url), [JSON.stringify({ task, from })], {
        execArgv: [...process.execArgv, `--max-old-space-size=${HEAP_MB}`],
        env: { ...process.env, [WORKER]: '1' },
        stdio: ['ignore', 'ignore', 'inherit', 'ipc'],
      });
      let present = '';
      let since = 0;
      const stop = (what: string): void => {
        fail(what, present);
        from++; // the rest of the batch is given up
        worker.kill('SIGKILL');
      };
      // Seen twice: after a pause of the whole machine the first look comes before the news that waited.
      let suspect = 0;
      const guard = setInterval(() => {
        if (since > 0 && since === suspect) stop('hangs');
        suspect = performance.now() - since > 5 * SLOW_MS ? since : 0;
      }, 500);
      worker.on('message', (news: News) => {
        if (news.kind === 'start') {
          present = news.text;
          since = performance.now();
        } else if (news.kind === 'end') {
          since = 0;
          report.outcomes[news.outcome] = (report.outcomes[news.outcome] ?? 0) + 1;
          report.slowestMs = Math.max(report.slowestMs, Math.round(news.ms));
          if (news.failure !== undefined) fail(news.failure, present);
          else if (news.ms > SLOW_MS) fail('slow', present);
        } else if (news.kind === 'heap') report.heapMb = Math.max(report.heapMb, news.mb);
        else from = news.next;
      });
      // The last news may arrive after the exit: both ends are waited for.
      let open = 2;
      const closed = (): void => {
        if (--open > 0) return;
        clearInterval(guard);
        resolve();
      };
      worker.on('disconnect', closed);
      worker.on('exit', (code, signal) => {
        if (code !== 0 && signal !== 'SIGKILL') stop(`the process ended with ${code ?? signal}`);
        closed();
      });
    });
  }
  return report;
}

async function main(): Promise<void> {
  const { values } = parseArgs({
    options: {
      inputs: { type: 'string', default: '1000000' },
      seed: { type: 'string', default: '1' },
      targets: { type: 'string', default: Object.keys(SHARES).join() },
      keep: { type: 'string' },
    },
  });
  const names = values.targets.split(',') as Name[];
  const whole = names.reduce((sum, name) => sum + SHARES[name], 0);
  for (const name of names) {
    const started = performance.now();
    const batches = Math.ceil((Number(values.inputs) * SHARES[name]) / whole / BATCH);
    const { outcomes, failures, slowestMs, heapMb } = await watch({ name, seed: Number(values.seed), batches });
    const list = [...failures].map(([what, { count }]) => ({ what, count }));
    const seconds = Math.round((performance.now() - started) / 1000);
    console.log(JSON.stringify({ target: name, inputs: batches * BATCH, outcomes, failures: list, slowestMs, heapMb, seconds }));
    if (failures.size > 0) process.exitCode = 1;
    if (values.keep === undefined) continue;
    mkdirSync(values.keep, { recursive: true });
    let number = 0;
    for (const { text } of failures.values()) writeFileSync(join(values.keep, `${name}-${++number}.txt`), text);
  }
}

if (process.env[WORKER] === undefined) await main();
else {
  const { task, from } = JSON.parse(process.argv[2]!) as { task: Task; from: number };
  await work(task, from);
  process.disconnect();
}
