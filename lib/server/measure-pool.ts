import 'server-only';
import { Piscina } from 'piscina';
import type { BudgetRow, FitOptions, FrameAnswer, Refusal, SetupValues } from '@/lib/domain/reading-result';
import type { ScaleAnswer, ScaleKind, ScaleRefusal } from '@/lib/domain/scale-result';
import type { ScanAnswer, ScanDrawing, ScanOptions } from '@/lib/domain/scan-result';
import type { MonteCarlo } from '@/lib/quantity/monte-carlo';
import { env } from './env';

export interface PreviewPicture {
  webp: Uint8Array;
  widthPx: number;
  heightPx: number;
}

const held = globalThis as { midfringePool?: Piscina };

/** The threads that decode and fit, off the thread that answers requests. One pool per process. */
function pool(): Piscina {
  const { MEASURE_WORKER, MEASURE_THREADS } = env();
  held.midfringePool ??= new Piscina({
    filename: MEASURE_WORKER,
    minThreads: 0,
    maxThreads: MEASURE_THREADS,
    idleTimeout: 60_000,
    maxQueue: 600,
  });
  return held.midfringePool;
}

/** Fits one frame. The bytes are handed over to the thread: the caller's array is empty afterwards. */
export async function analyseInPool(
  bytes: Uint8Array<ArrayBuffer>,
  setup: SetupValues,
  options: FitOptions,
): Promise<FrameAnswer> {
  const answer: unknown = await pool().run(
    { task: 'analyse', bytes, setup, options },
    { transferList: [bytes.buffer] },
  );
  return answer as FrameAnswer;
}

/** The band stack of a frame for `options.region` or after `options.stack`, or why there is none. The bytes are handed over. */
export async function stackInPool(
  bytes: Uint8Array<ArrayBuffer>,
  setup: SetupValues,
  options: FitOptions,
): Promise<{ ok: true; stack: Uint8Array<ArrayBuffer> } | Refusal> {
  const answer: unknown = await pool().run(
    { task: 'stack', bytes, setup, options },
    { transferList: [bytes.buffer] },
  );
  return answer as { ok: true; stack: Uint8Array<ArrayBuffer> } | Refusal;
}

/** Fits a region from a band stack. The stack is handed over. */
export async function refitInPool(
  stack: Uint8Array<ArrayBuffer>,
  setup: SetupValues,
  options: FitOptions,
): Promise<FrameAnswer> {
  const answer: unknown = await pool().run(
    { task: 'refit', stack, setup, options },
    { transferList: [stack.buffer] },
  );
  return answer as FrameAnswer;
}

/** Fits one line scan. The bytes are handed over. */
export async function analyseScanInPool(
  bytes: Uint8Array<ArrayBuffer>,
  setup: SetupValues,
  options: ScanOptions,
): Promise<ScanAnswer> {
  const answer: unknown = await pool().run(
    { task: 'scan', bytes, setup, options },
    { transferList: [bytes.buffer] },
  );
  return answer as ScanAnswer;
}

/** A whole scan to be drawn, or null when the file is none. The bytes are handed over. */
export async function drawScanInPool(bytes: Uint8Array<ArrayBuffer>): Promise<ScanDrawing | null> {
  const answer: unknown = await pool().run({ task: 'scan-drawing', bytes }, { transferList: [bytes.buffer] });
  return answer as ScanDrawing | null;
}

/** The frame as a person sees it, or null when the file is no picture. The bytes are handed over. */
export async function previewInPool(bytes: Uint8Array<ArrayBuffer>): Promise<PreviewPicture | null> {
  const answer: unknown = await pool().run({ task: 'preview', bytes }, { transferList: [bytes.buffer] });
  return answer as PreviewPicture | null;
}

/** The pixel scale of a photographed ruler or grid. The bytes are handed over. */
export async function scaleInPool(
  bytes: Uint8Array<ArrayBuffer>,
  wanted: { kind: ScaleKind; pitchMm: number; uPitchRelative: number },
): Promise<ScaleAnswer | ScaleRefusal> {
  const answer: unknown = await pool().run(
    { task: 'scale', bytes, ...wanted },
    { transferList: [bytes.buffer] },
  );
  return answer as ScaleAnswer | ScaleRefusal;
}

/** The drawn check of a budget: some hundred thousand draws would hold up every other request. */
export async function drawBudgetInPool(
  rows: readonly BudgetRow[],
  valueNm: number,
  expandedNm: number,
  seed: string,
): Promise<MonteCarlo> {
  const answer: unknown = await pool().run({ task: 'draw-budget', rows, valueNm, expandedNm, seed });
  return answer as MonteCarlo;
}

export async function closePool(): Promise<void> {
  const open = held.midfringePool;
  held.midfringePool = undefined;
  await open?.close();
}
