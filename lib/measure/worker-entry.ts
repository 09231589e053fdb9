import { performance } from 'node:perf_hooks';
import type { FitOptions, FrameAnswer, SetupValues } from '@/lib/domain/reading-result';
import type { ScaleAnswer, ScaleKind, ScaleRefusal } from '@/lib/domain/scale-result';
import { LIMITS } from '@/lib/domain/limits';
import { decodePicture, renderPreview, type Preview } from '@/lib/imaging/decode';
import { Refused } from '@/lib/imaging/refused';
import { analyseFrame } from './analyse-frame';
import { measureScale } from './measure-scale';

export type WorkerTask =
  | { task: 'analyse'; bytes: Uint8Array; setup: SetupValues; options: FitOptions }
  | { task: 'preview'; bytes: Uint8Array }
  | { task: 'scale'; bytes: Uint8Array; kind: ScaleKind; pitchMm: number; uPitchRelative: number };

/**
 * One job of the worker pool. `analyse` answers a FrameAnswer, `preview` a small WebP picture (null for a file that
 * is none), `scale` the pixel scale of a photographed ruler or grid, or why there is none.
 */
export default async function work(
  job: WorkerTask,
): Promise<FrameAnswer | Preview | ScaleAnswer | ScaleRefusal | null> {
  if (job.task === 'preview') return renderPreview(job.bytes, LIMITS);
  if (job.task === 'scale') return scaleOf(job);
  return analyseFrame(job.bytes, job.setup, job.options, () => performance.now());
}

/** The picture as a person sees it: oriented, long side at most 1600 px, 8 bits, not stretched. */
export async function makePreview(bytes: Uint8Array): Promise<Preview | null> {
  return renderPreview(bytes, LIMITS);
}

async function scaleOf(job: Extract<WorkerTask, { task: 'scale' }>): Promise<ScaleAnswer | ScaleRefusal> {
  try {
    return measureScale(
      await decodePicture(job.bytes, 'auto', LIMITS),
      job.kind,
      job.pitchMm,
      job.uPitchRelative,
    );
  } catch (problem) {
    if (problem instanceof Refused) return { ok: false, message: problem.message };
    throw problem;
  }
}
