/**
 * Workers that judge candidates, each within bounds of time and memory. A worker that overruns is ended and replaced; what it
 * worked on gets an error in its place. Plain node:worker_threads: ending a single task for its time or memory is what a general
 * pool cannot do without ending the worker, which is all this is.
 */
import { Worker } from 'node:worker_threads';
import type { SweepAnswer, SweepRequest } from './sweep-worker.js';

export interface PoolBounds {
  readonly jobs: number;
  /** s a candidate */
  readonly seconds: number;
  /** MB of JavaScript heap a worker */
  readonly megabytes: number;
}

/** Runs every request, calling `done` as each ends, in no fixed order. Never rejects for a candidate's sake. */
export async function runCandidates(
  requests: readonly SweepRequest[],
  bounds: PoolBounds,
  done: (request: SweepRequest, result: SweepAnswer['result']) => void,
): Promise<void> {
  let next = 0;
  const lane = async (): Promise<void> => {
    let worker: Worker | undefined;
    while (next < requests.length) {
      const request = requests[next++]!;
      worker ??= newWorker(bounds);
      const { result, isSpent } = await one(worker, request, bounds);
      if (isSpent) {
        await worker.terminate();
        worker = undefined;
      }
      done(request, result);
    }
    await worker?.terminate();
  };
  await Promise.all(Array.from({ length: Math.min(bounds.jobs, requests.length) }, lane));
}

const newWorker = ({ megabytes }: PoolBounds): Worker =>
  new Worker(new URL('./sweep-worker.js', import.meta.url), { resourceLimits: { maxOldGenerationSizeMb: megabytes } });

/** One candidate; `isSpent` when the worker cannot be used again. */
function one(
  worker: Worker,
  request: SweepRequest,
  { seconds, megabytes }: PoolBounds,
): Promise<{ result: SweepAnswer['result']; isSpent: boolean }> {
  return new Promise((resolve) => {
    const end = (result: SweepAnswer['result'], isSpent: boolean): void => {
      clearTimeout(timer);
      worker.off('message', onMessage).off('error', onError).off('exit', onExit);
      if (isSpent) worker.on('error', () => {}); // what a dying worker still has to say
      resolve({ result, isSpent });
    };
    const timer = setTimeout(() => end({ error: `stopped after ${seconds} s, the time limit of one candidate` }, true), 1000 * seconds);
    const onMessage = ({ result }: SweepAnswer): void => end(result, false);
    const onError = (error: NodeJS.ErrnoException): void =>
      end(
        {
          error:
            error.code === 'ERR_WORKER_OUT_OF_MEMORY'
              ? `stopped at ${megabytes} MB, the memory limit of one candidate`
              : `a fault of the program: ${error.message}`,
        },
        true,
      );
    const onExit = (code: number): void => end({ error: `a fault of the program: its worker ended with code ${code}` }, true);
    worker.on('message', onMessage).on('error', onError).on('exit', onExit);
    worker.postMessage(request);
  });
}
