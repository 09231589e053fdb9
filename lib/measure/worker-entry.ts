import { performance } from 'node:perf_hooks';
import type { BudgetRow, FitOptions, FrameAnswer, Refusal, SetupValues } from '@/lib/domain/reading-result';
import type { ScanAnswer, ScanDrawing, ScanOptions } from '@/lib/domain/scan-result';
import type { ScaleAnswer, ScaleKind, ScaleRefusal } from '@/lib/domain/scale-result';
import { LIMITS } from '@/lib/domain/limits';
import { decodePicture, renderPreview, type Preview } from '@/lib/imaging/decode';
import { Refused } from '@/lib/imaging/refused';
import { drawBudget, type MonteCarlo } from '@/lib/quantity/monte-carlo';
import { analyseFrame, measureFrame } from './analyse-frame';
import { analyseScan } from './analyse-scan';
import { measureScale } from './measure-scale';
import { measureStack } from './measure-stack';
import { drawScan } from './read-scan';
import { decodeStack, encodeStack } from './stack-file';

export type WorkerTask =
  | { task: 'analyse'; bytes: Uint8Array; setup: SetupValues; options: FitOptions }
  | { task: 'scan'; bytes: Uint8Array; setup: SetupValues; options: ScanOptions }
  | { task: 'scan-drawing'; bytes: Uint8Array }
  | { task: 'stack'; bytes: Uint8Array; setup: SetupValues; options: FitOptions }
  | { task: 'refit'; stack: Uint8Array; setup: SetupValues; options: FitOptions }
  | { task: 'draw-budget'; rows: readonly BudgetRow[]; valueNm: number; expandedNm: number; seed: string }
  | { task: 'preview'; bytes: Uint8Array }
  | { task: 'scale'; bytes: Uint8Array; kind: ScaleKind; pitchMm: number; uPitchRelative: number };

/** A band stack made for a region, as the bytes it is stored and sent as. */
export interface StackAnswer {
  ok: true;
  stack: Uint8Array<ArrayBuffer>;
}

type Answer =
  | FrameAnswer
  | ScanAnswer
  | ScanDrawing
  | StackAnswer
  | Preview
  | ScaleAnswer
  | ScaleRefusal
  | MonteCarlo
  | null;

const clock = () => performance.now();

/**
 * One job of the worker pool. `analyse` answers a FrameAnswer, `stack` the band stack of a frame for `options.region` or
 * after `options.stack` (or the refusal that stands in its way), `refit` a FrameAnswer from such a stack, `preview` a small
 * WebP picture (null for a file that is none), `scale` the pixel scale of a photographed ruler or grid, or why there is none,
 * `scan` a ScanAnswer, `scan-drawing` the whole scan for a drawing (null for a file that is none), `draw-budget` the drawn
 * check of a budget.
 */
export default async function work(job: WorkerTask): Promise<Answer> {
  if (job.task === 'preview') return renderPreview(job.bytes, LIMITS);
  if (job.task === 'scale') return scaleOf(job);
  if (job.task === 'scan') return analyseScan(job.bytes, job.setup, job.options, clock);
  if (job.task === 'scan-drawing') return drawScan(job.bytes);
  if (job.task === 'draw-budget') return drawBudget(job.rows, job.valueNm, job.expandedNm, job.seed);
  if (job.task === 'stack') return makeStack(job);
  if (job.task === 'refit') return measureStack(decodeStack(job.stack), job.setup, job.options, clock);
  return analyseFrame(job.bytes, job.setup, job.options, clock);
}

/** The picture as a person sees it: oriented, long side at most 1600 px, 8 bits, not stretched. */
export async function makePreview(bytes: Uint8Array): Promise<Preview | null> {
  return renderPreview(bytes, LIMITS);
}

async function makeStack(job: Extract<WorkerTask, { task: 'stack' }>): Promise<StackAnswer | Refusal> {
  const measured = await measureFrame(job.bytes, job.setup, job.options, clock);
  return 'stack' in measured ? { ok: true, stack: encodeStack(measured.stack) } : measured;
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
