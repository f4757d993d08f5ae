/** What every command shares: how faults become one line and an exit code. */
import { InputError, ReadError } from '@ringtrue/core';
import { CommanderError } from 'commander';
import { plain } from './terminal.js';

/** Input or options are unusable; the message is the whole story. */
export class UsageError extends Error {
  override readonly name = 'UsageError';
}

/** Run what concerns one file. Errors of the core know the line but not the file; here it is named. */
export function aboutFile<T>(file: string, work: () => T): T {
  try {
    return work();
  } catch (error) {
    if (error instanceof ReadError || error instanceof InputError) throw new UsageError(`${file}: ${error.message}`);
    throw error;
  }
}

/** The same for work that takes its time. */
export async function aboutFileLater<T>(file: string, work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    return aboutFile(file, () => {
      throw error;
    });
  }
}

/** 2: the input or the options; 1: a fault of the program. */
export function exitCodeOf(error: unknown): 1 | 2 {
  return error instanceof UsageError || error instanceof InputError || error instanceof ReadError ? 2 : 1;
}

/**
 * Run a command's work. Whatever goes wrong ends as one line on standard error and an exit code, never as a stack trace.
 * Ctrl-C needs no handler: the process ends at once. Every file of a result is renamed into place whole, result.json last, so a
 * folder with a result.json is complete; an interrupted run can leave a file named .part-….
 */
export async function runCommand(work: () => void | Promise<void>): Promise<void> {
  try {
    await work();
  } catch (error) {
    if (error instanceof CommanderError) throw error;
    const message = error instanceof Error ? error.message : String(error);
    const code = exitCodeOf(error);
    const lead = code === 2 ? 'ringtrue' : 'ringtrue: a fault of the program';
    process.stderr.write(`${lead}: ${plain(message)}\n`);
    process.exitCode = code;
  }
}
