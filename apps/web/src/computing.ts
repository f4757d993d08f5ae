/** One worker, replaced when a run is cancelled: the physics does not pause to look for a message. */
import { type Remote, wrap } from 'comlink';
import type { WorkerApi } from './worker.js';

export class Computing {
  private worker: Worker | undefined;
  private remote: Remote<WorkerApi> | undefined;
  private stop: (() => void) | undefined;

  /** Resolves with the outcome, or undefined when the run was cancelled. */
  predict(...input: Parameters<WorkerApi['predict']>): Promise<ReturnType<WorkerApi['predict']> | undefined> {
    return this.run(async (remote) => remote.predict(...input));
  }

  /** As `predict`. */
  judge(...input: Parameters<WorkerApi['judge']>): Promise<ReturnType<WorkerApi['judge']> | undefined> {
    return this.run(async (remote) => remote.judge(...input));
  }

  private async run<T>(work: (remote: Remote<WorkerApi>) => Promise<T>): Promise<T | undefined> {
    this.cancel();
    this.worker ??= new Worker(new URL('./worker.ts', import.meta.url), { type: 'module' });
    this.remote ??= wrap<WorkerApi>(this.worker);
    const { worker, remote } = this;
    const ended = new Promise<undefined>((resolve, reject) => {
      this.stop = () => resolve(undefined);
      worker.onerror = () => reject(new Error('the part of the page that computes could not be started or broke off; reload the page'));
    });
    try {
      return await Promise.race([work(remote), ended]);
    } catch (error) {
      this.discard();
      throw error;
    } finally {
      if (this.worker === worker) this.stop = undefined;
    }
  }

  /** End a run under way; the next one starts in a new worker. */
  cancel(): void {
    if (!this.stop) return;
    this.stop();
    this.discard();
  }

  private discard(): void {
    this.stop = undefined;
    this.worker?.terminate();
    this.worker = undefined;
    this.remote = undefined;
  }
}
