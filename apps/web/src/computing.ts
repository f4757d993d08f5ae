/** One worker, replaced when a run is cancelled: the physics does not pause to look for a message. */
import { type Remote, wrap } from 'comlink';
import type { WorkerApi } from './worker.js';

export class Computing {
  private worker: Worker | undefined;
  private remote: Remote<WorkerApi> | undefined;
  private stop: (() => void) | undefined;

  /** Resolves with the outcome, or undefined when the run was cancelled. */
  async predict(...input: Parameters<WorkerApi['predict']>): Promise<ReturnType<WorkerApi['predict']> | undefined> {
    this.cancel();
    this.worker ??= new Worker(new URL('./worker.ts', import.meta.url), { type: 'module' });
    this.remote ??= wrap<WorkerApi>(this.worker);
    const cancelled = new Promise<undefined>((resolve) => {
      this.stop = () => resolve(undefined);
    });
    const outcome = await Promise.race([this.remote.predict(...input), cancelled]);
    this.stop = undefined;
    return outcome;
  }

  /** End a run under way; the next one starts in a new worker. */
  cancel(): void {
    if (!this.stop) return;
    this.stop();
    this.stop = undefined;
    this.worker?.terminate();
    this.worker = undefined;
    this.remote = undefined;
  }
}
