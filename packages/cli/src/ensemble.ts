/** `ringtrue predict --ensemble`: frames read twice as a stream, once for the mean and once for the sums, blocks side by side. */
import { basename } from 'node:path';
import {
  BLOCK_FRAMES,
  EnsembleAverage,
  type EnsembleFrame,
  type EnsemblePlan,
  EnsembleSurvey,
  frameSize,
  type PredictContext,
  type Prediction,
  type PredictOptions,
  packFrame,
  planEnsemble,
  type Structure,
  VERSION,
} from '@ringtrue/core';
import { type BlockPool, blockPool } from './block-pool.js';
import { aboutFileLater, UsageError } from './command.js';
import { type FrameSource, openFrames } from './frames.js';
import { showProgress } from './progress.js';

export interface EnsembleFlags {
  readonly jobs?: number;
  readonly renew?: number;
  readonly exact?: boolean;
}

/** @throws {UsageError} options or input unusable */
export async function computeEnsemble(
  file: string,
  options: Partial<PredictOptions> & { readonly absorber: string },
  { jobs, renew, exact = false }: EnsembleFlags,
): Promise<Prediction> {
  if (jobs !== undefined && !(Number.isInteger(jobs) && jobs >= 1 && jobs <= 256))
    throw new UsageError(`--jobs should be a whole number from 1 to 256, got ${jobs}`);
  if (renew !== undefined && !(Number.isInteger(renew) && renew >= 2))
    throw new UsageError(`--renew should be a whole number of frames, at least 2, got ${renew}`);
  const progress = showProgress();
  const running = progress?.running;
  const context: PredictContext = {
    file: basename(file),
    version: VERSION,
    now: () => performance.now() / 1000,
    ...(running ? { running } : {}),
  };
  const pool = blockPool(jobs);
  try {
    return await aboutFileLater(file, async () => {
      const source = await openFrames(file);
      const surveys = await survey(source, options, renew, (part) => running?.onProgress('reading frames', part));
      const plans = surveys.map((one, i) => {
        if (i > 0) running?.onProgress('renewing', i / surveys.length);
        return planEnsemble(one, options, { exact }, context);
      });
      return await average(source, plans, pool, renew, context);
    });
  } finally {
    progress?.clear();
    await pool.close();
  }
}

/** First of all frames, then, with `renew`, of each section; a last section of less than half its length joins the one before. */
async function survey(
  { first, frames }: FrameSource,
  { absorber, radius = 5 }: { readonly absorber: string; readonly radius?: number },
  renew: number | undefined,
  onPart: (part: number) => void,
): Promise<EnsembleSurvey[]> {
  const surveys = [new EnsembleSurvey(first, absorber, radius)];
  const packed = new Float64Array(frameSize(first));
  let count = 0;
  for await (const frame of frames(onPart)) {
    packFrame(first, frame, count + 1, packed, 0);
    surveys[0]!.add(packed);
    if (renew !== undefined) {
      if (count % renew === 0) surveys.push(new EnsembleSurvey(first, absorber, radius));
      surveys.at(-1)!.add(packed);
    }
    count++;
  }
  if (renew !== undefined && surveys.length > 2 && surveys.at(-1)!.count < renew / 2) surveys.pop();
  return surveys;
}

async function average(
  { first, frames }: FrameSource,
  plans: readonly EnsemblePlan[],
  pool: BlockPool,
  renew: number | undefined,
  context: PredictContext,
): Promise<Prediction> {
  plans.forEach((plan, i) => void pool.plan(i, plan.block));
  const averages = plans.map((plan) => new EnsembleAverage(plan));
  const pending: { readonly plan: number; readonly sums: ReturnType<BlockPool['run']> }[] = [];
  const settle = async (most: number): Promise<void> => {
    while (pending.length > most) {
      const { plan, sums } = pending.shift()!;
      averages[plan]!.add(await sums);
    }
  };
  const sectionOf = (frame: number): number => (renew === undefined ? 0 : Math.min(Math.floor(frame / renew), plans.length - 2) + 1);
  const send = async (block: Float64Array, section: number): Promise<void> => {
    if (section > 0) pending.push({ plan: section, sums: pool.run(section, block.slice()) });
    pending.push({ plan: 0, sums: pool.run(0, block) });
    await settle(4 * pool.jobs);
  };
  for await (const { block, section } of blocksOf(
    first,
    frames((part) => context.running?.onProgress?.('frames', part)),
    sectionOf,
  ))
    await send(block, section);
  await settle(0);
  const [whole, ...sections] = averages;
  if (renew === undefined) return whole!.result(context);
  const chi = new Float64Array(whole!.k.length);
  for (const section of sections) {
    const own = section.chi();
    for (let i = 0; i < chi.length; i++) chi[i]! += (own[i]! * section.frames) / whole!.frames;
  }
  return whole!.result(context, { every: renew, chi });
}

/** Packed blocks of frames; none reaches over the end of a section. */
async function* blocksOf(
  first: Structure,
  frames: AsyncGenerator<EnsembleFrame>,
  sectionOf: (frame: number) => number,
): AsyncGenerator<{ readonly block: Float64Array; readonly section: number }> {
  const size = frameSize(first);
  let block = new Float64Array(size * BLOCK_FRAMES);
  let filled = 0;
  let count = 0;
  for await (const frame of frames) {
    if (filled > 0 && (filled === BLOCK_FRAMES || sectionOf(count) !== sectionOf(count - 1))) {
      yield { block: block.slice(0, filled * size), section: sectionOf(count - 1) };
      block = new Float64Array(size * BLOCK_FRAMES);
      filled = 0;
    }
    packFrame(first, frame, count + 1, block, filled * size);
    filled++;
    count++;
  }
  if (filled > 0) yield { block: block.slice(0, filled * size), section: sectionOf(count - 1) };
}
