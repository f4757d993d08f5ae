/** A worker that sums blocks of frames. */
import { parentPort } from 'node:worker_threads';
import { type BlockPlan, type BlockSums, blockSums } from '@ringtrue/core';

export type WorkerTask =
  | { readonly number: number; readonly plan: BlockPlan }
  | { readonly number: number; readonly id: number; readonly frames: Float64Array };
export interface WorkerAnswer {
  readonly id: number;
  readonly sums?: BlockSums;
  readonly fault?: string;
}

const plans = new Map<number, BlockPlan>();

parentPort!.on('message', (task: WorkerTask) => {
  if ('plan' in task) {
    plans.set(task.number, task.plan);
    return;
  }
  let answer: WorkerAnswer;
  try {
    answer = { id: task.id, sums: blockSums(plans.get(task.number)!, task.frames) };
  } catch (error) {
    answer = { id: task.id, fault: error instanceof Error ? error.message : String(error) };
  }
  parentPort!.postMessage(answer);
});
