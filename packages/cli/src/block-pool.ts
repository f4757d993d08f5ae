/**
 * Blocks of frames summed side by side. Plain node:worker_threads: a pool library starts its own worker file from its own folder,
 * which this one-file bundle has not, and all that is needed here is to send every worker the plan once and take answers in order.
 */
import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import { type BlockPlan, type BlockSums, blockSums } from '@ringtrue/core';
import type { WorkerAnswer, WorkerTask } from './ensemble-worker.js';

export interface BlockPool {
  readonly jobs: number;
  /** Makes a plan known under a number. */
  plan(number: number, plan: BlockPlan): void;
  /** @param frames packed; given away */
  run(number: number, frames: Float64Array): Promise<BlockSums>;
  close(): Promise<void>;
}

/** @param jobs workers; 1 computes here */
export function blockPool(jobs: number = availableParallelism()): BlockPool {
  return jobs <= 1 ? localPool() : new WorkerPool(jobs);
}

function localPool(): BlockPool {
  const plans = new Map<number, BlockPlan>();
  return {
    jobs: 1,
    plan: (number, plan) => void plans.set(number, plan),
    run: async (number, frames) => blockSums(plans.get(number)!, frames),
    close: async () => {},
  };
}

class WorkerPool implements BlockPool {
  readonly jobs: number;
  private readonly workers: Worker[];
  private readonly waiting = new Map<number, { resolve: (sums: BlockSums) => void; reject: (error: Error) => void }>();
  private next = 0;

  constructor(jobs: number) {
    this.jobs = jobs;
    this.workers = Array.from({ length: jobs }, () => {
      const worker = new Worker(new URL('./ensemble-worker.js', import.meta.url));
      worker.on('message', ({ id, sums, fault }: WorkerAnswer) => {
        const waiting = this.waiting.get(id)!;
        this.waiting.delete(id);
        if (sums) waiting.resolve(sums);
        else waiting.reject(new Error(fault));
      });
      worker.on('error', (error) => {
        for (const { reject } of this.waiting.values()) reject(error);
        this.waiting.clear();
      });
      return worker;
    });
  }

  plan(number: number, plan: BlockPlan): void {
    for (const worker of this.workers) worker.postMessage({ plan, number } satisfies WorkerTask);
  }

  run(number: number, frames: Float64Array): Promise<BlockSums> {
    const id = this.next++;
    return new Promise((resolve, reject) => {
      this.waiting.set(id, { resolve, reject });
      const task: WorkerTask = { id, number, frames };
      this.workers[id % this.jobs]!.postMessage(task, [frames.buffer as ArrayBuffer]);
    });
  }

  async close(): Promise<void> {
    await Promise.all(this.workers.map((worker) => worker.terminate()));
  }
}
