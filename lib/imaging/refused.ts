import type { RefusalCode } from '@/lib/domain/reading-result';

/**
 * A frame that will not be answered: a stable code and the sentence a person reads (what, why, what to do).
 * Thrown by a stage, turned into an answer in one place, lib/measure/analyse-frame.ts.
 */
export class Refused extends Error {
  constructor(
    readonly code: RefusalCode,
    message: string,
    readonly picture: { widthPx: number; heightPx: number; format: string } | null = null,
  ) {
    super(message);
    this.name = 'Refused';
  }
}
