/**
 * The browser's own fitter, on a thread of its own: holds one decoded band stack and answers changes of the region by
 * the engine's plain arithmetic. Messages are handled one after another, so an answer belongs to the oldest question.
 */
import type { FrameAnswer } from '@/lib/domain/reading-result';
import { isScanRegion } from '@/lib/domain/scan-result';
import type { FitFacts, FitPreview, RegionChange } from '@/lib/domain/views';
import type { FrameStack } from '@/lib/measure/band-stack';
import { measureStack } from '@/lib/measure/measure-stack';
import { decodeStack } from '@/lib/measure/stack-file';
import { previewOf } from '@/lib/quantity/value-in';

export type FitQuestion =
  { kind: 'hold'; bytes: ArrayBuffer; facts: FitFacts } | { kind: 'fit'; change: RegionChange };

export type FitReply =
  | { kind: 'fit'; fit: FitPreview }
  | { kind: 'refused'; message: string }
  | { kind: 'broken'; message: string };

interface Held {
  stack: FrameStack;
  facts: FitFacts;
}

let held: Held | null = null;

/** Fits the stack's own region until the engine's code has been compiled; the numbers are not used. */
const WARM_UPS = 2;

addEventListener('message', ({ data }: MessageEvent<FitQuestion>) => {
  try {
    if (data.kind === 'hold') hold(data.bytes, data.facts);
    else postMessage(replyTo(data.change));
  } catch (problem) {
    const message = problem instanceof Error ? problem.message : String(problem);
    postMessage({ kind: 'broken', message } satisfies FitReply);
  }
});

function hold(bytes: ArrayBuffer, facts: FitFacts): void {
  const isFirst = held === null;
  const stack = decodeStack(new Uint8Array(bytes));
  held = { stack, facts };
  for (let i = 0; isFirst && i < WARM_UPS; i++) measureStack(stack, facts.setup, {});
}

function replyTo({ region, leaveOut, zeroShift }: RegionChange): FitReply {
  if (isScanRegion(region)) throw new Error('A scan has no bands.');
  if (!held) throw new Error('There are no bands to fit.');
  const { stack, facts } = held;
  const answer: FrameAnswer = measureStack(stack, facts.setup, { region, leaveOut, zeroShift });
  return answer.ok
    ? { kind: 'fit', fit: previewOf(answer, facts) }
    : { kind: 'refused', message: answer.message };
}
