#!/usr/bin/env node
/** The `ringtrue` command. */
import { CommanderError } from 'commander';
import { ringtrueProgram } from './program.js';

// A reader that stops early, like head, is no fault.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0);
  throw error;
});

try {
  await ringtrueProgram().parseAsync();
} catch (error) {
  // commander has printed its one line; help and version are no errors.
  if (!(error instanceof CommanderError)) throw error;
  process.exitCode = error.exitCode === 0 ? 0 : 2;
}
