/**
 * The errors and diagnostics every room shares. An error says who, what was wanted, what came, where.
 */

/** Where in a text something was found; lines and columns count from 1. */
export interface TextPlace {
  readonly line?: number;
  readonly columns?: readonly [first: number, last: number];
  /** The offending text, cut to a printable length by the one who prints it. */
  readonly text?: string;
}

/** A message is one a person reads: what a file put into it may be a megabyte long. */
const LONGEST_MESSAGE = 600;
const cut = (message: string): string => (message.length > LONGEST_MESSAGE ? `${message.slice(0, LONGEST_MESSAGE - 1)}…` : message);

/** A file's content is unusable. The message already names the place; the caller adds the file name. */
export class ReadError extends Error {
  override readonly name = 'ReadError';
  readonly place: TextPlace;

  constructor(message: string, place: TextPlace = {}) {
    super(cut(message));
    this.place = place;
  }
}

/** What was asked cannot be done with this input (element absent, edge unknown, atoms coincide). */
export class InputError extends Error {
  override readonly name = 'InputError';

  constructor(message: string) {
    super(cut(message));
  }
}

/** An iteration did not reach its tolerance. */
export class ConvergenceError extends Error {
  override readonly name = 'ConvergenceError';
  readonly iterations: number;
  readonly residual: number;

  constructor(what: string, iterations: number, residual: number) {
    super(`${what}: no convergence after ${iterations} iterations, residual ${residual.toExponential(2)}`);
    this.iterations = iterations;
    this.residual = residual;
  }
}

/** The caller asked to stop. */
export class CancelledError extends Error {
  override readonly name = 'CancelledError';
  constructor() {
    super('cancelled');
  }
}

/** What could be read round or should be known beside a result: nothing is dropped without one. */
export interface Diagnostic {
  /** Stable kebab-case code, for scripts. */
  readonly code: string;
  /** One plain sentence. */
  readonly message: string;
  readonly line?: number;
}

/** Progress and cancellation of a long computation; an AbortSignal satisfies `signal`. */
export interface Running {
  readonly onProgress?: ((stage: string, fraction: number) => void) | undefined;
  readonly signal?: { readonly aborted: boolean } | undefined;
}

/** @throws {CancelledError} the caller asked to stop */
export function checkRunning(running: Running | undefined): void {
  if (running?.signal?.aborted) throw new CancelledError();
}
