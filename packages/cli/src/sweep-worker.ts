/** One candidate of a sweep, in a worker of its own, so that neither its faults nor its appetite reach the others. */
import { parentPort } from 'node:worker_threads';
import { type Evidence, judge, readStructure, VERSION } from '@ringtrue/core';
import { Command } from 'commander';
import { exitCodeOf } from './command.js';
import { readText } from './files.js';
import { addJudgeOptions, each, evidenceOf, type JudgeFlags, judgeOptionsOf } from './judge-options.js';

export interface SweepRequest {
  readonly file: string;
  readonly path: string;
  /** All options, the candidate's own last. */
  readonly args: readonly string[];
}

export interface SweepAnswer {
  /** What stands in the line of results beside `file`: the judgement of this candidate, or `error`. */
  readonly result: Readonly<Record<string, unknown>>;
}

/** Evidence as it was reduced last: candidates of one spectrum need not reduce it again. */
let known: { readonly key: string; readonly evidence: readonly Evidence[] } | undefined;

parentPort?.on('message', ({ path, args }: SweepRequest) => {
  parentPort!.postMessage({ result: answer(path, args) } satisfies SweepAnswer);
});

function answer(path: string, args: readonly string[]): Record<string, unknown> {
  try {
    const flags = parse(args);
    const structure = readStructure(readText(path), { fileName: path });
    const key = JSON.stringify(args);
    if (known?.key !== key) known = { key, evidence: evidenceOf(flags) };
    const { evidence } = known;
    const { candidates, evidence: described } = judge(
      [{ file: path, structure }],
      evidence,
      { ...judgeOptionsOf(flags), bands: false },
      { version: VERSION },
    );
    const { file: _, comparisons: __, sentence, ...judged } = candidates[0]!;
    return { ...judged, sentence: sentence.replaceAll(path, 'the candidate'), evidence: described };
  } catch (error) {
    const message = error instanceof Error ? error.message : String(error);
    return { error: exitCodeOf(error) === 2 ? message : `a fault of the program: ${message}` };
  }
}

function parse(args: readonly string[]): JudgeFlags {
  const command = addJudgeOptions(new Command('candidate'))
    .requiredOption('--data <scans>', '', each(String))
    .requiredOption('--absorber <element>', '', each(String))
    .exitOverride()
    .configureOutput({ writeErr: () => {}, writeOut: () => {} });
  command.parse([...args], { from: 'user' });
  return command.opts<JudgeFlags>();
}
