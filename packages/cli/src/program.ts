/** The `ringtrue` command with all it can do; started by main.ts. */
import { VERSION } from '@ringtrue/core';
import { Command } from 'commander';
import { addDose } from './dose.js';
import { addJudge } from './judge.js';
import { addPredict } from './predict.js';
import { addReduce } from './reduce.js';
import { addServe } from './serve.js';
import { addSites } from './sites.js';
import { addSweep } from './sweep.js';
import { plain } from './terminal.js';

export function ringtrueProgram(): Command {
  const program = new Command('ringtrue')
    .description('Is a structure consistent with a measured EXAFS spectrum? Predicted from first principles, not fitted shell by shell.')
    .version(VERSION)
    // What was typed is quoted in the message: a file name may hold what steers a terminal.
    .configureOutput({ outputError: (text, write) => write(`${text.trimEnd().split('\n').map(plain).join('\n')}\n`) })
    .showHelpAfterError('(--help shows the options, with examples)')
    .exitOverride();

  addPredict(program);
  addJudge(program);
  addReduce(program);
  addDose(program);
  addSites(program);
  addSweep(program);
  addServe(program);
  return program;
}
