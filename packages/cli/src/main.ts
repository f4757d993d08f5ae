#!/usr/bin/env node
/** The `ringtrue` command. */
import { VERSION } from '@ringtrue/core';
import { Command, CommanderError } from 'commander';
import { addDose } from './dose.js';
import { addJudge } from './judge.js';
import { addPredict } from './predict.js';
import { addReduce } from './reduce.js';
import { addServe } from './serve.js';
import { addSites } from './sites.js';

// A reader that stops early, like head, is no fault.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0);
  throw error;
});

const program = new Command('ringtrue')
  .description('Is a structure consistent with a measured EXAFS spectrum? Predicted from first principles, not fitted shell by shell.')
  .version(VERSION)
  .showHelpAfterError('(--help shows the options, with examples)')
  .exitOverride();

addPredict(program);
addJudge(program);
addReduce(program);
addDose(program);
addSites(program);
addServe(program);

try {
  await program.parseAsync();
} catch (error) {
  // commander has printed its one line; help and version are no errors.
  if (!(error instanceof CommanderError)) throw error;
  process.exitCode = error.exitCode === 0 ? 0 : 2;
}
