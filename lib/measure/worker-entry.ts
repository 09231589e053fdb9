import { performance } from 'node:perf_hooks';
import type { FitOptions, FrameAnswer, SetupValues } from '@/lib/domain/reading-result';
import { LIMITS } from '@/lib/domain/limits';
import { renderPreview, type Preview } from '@/lib/imaging/decode';
import { analyseFrame } from './analyse-frame';

export type WorkerTask =
  | { task: 'analyse'; bytes: Uint8Array; setup: SetupValues; options: FitOptions }
  | { task: 'preview'; bytes: Uint8Array };

/** One job of the worker pool. `analyse` answers a FrameAnswer, `preview` a small WebP picture (null for a file that is none). */
export default async function work(job: WorkerTask): Promise<FrameAnswer | Preview | null> {
  if (job.task === 'preview') return renderPreview(job.bytes, LIMITS);
  return analyseFrame(job.bytes, job.setup, job.options, () => performance.now());
}

/** The picture as a person sees it: oriented, long side at most 1600 px, 8 bits, not stretched. */
export async function makePreview(bytes: Uint8Array): Promise<Preview | null> {
  return renderPreview(bytes, LIMITS);
}
