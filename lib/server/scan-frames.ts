import 'server-only';
import { AppError } from '@/lib/domain/errors';
import type { FitOptions, FrameAnswer, Refusal, SetupValues } from '@/lib/domain/reading-result';
import {
  isScanRegion,
  isScanResult,
  SCAN_MEDIA_TYPE,
  type FitResult,
  type ScanAnswer,
  type ScanFacts,
  type ScanOptions,
  type ScanRefusal,
} from '@/lib/domain/scan-result';
import type { RegionChange } from '@/lib/domain/views';
import type { FitFacts } from './frame-facts';
import { analyseInPool, analyseScanInPool } from './measure-pool';

/** What tells a scan from a picture, and how it was taken. */
export interface TakenFrame {
  mediaType: string;
  detectorMm: number | null;
}

export function isScan(frame: Pick<TakenFrame, 'mediaType'>): boolean {
  return frame.mediaType === SCAN_MEDIA_TYPE;
}

/** Options of the product's own first fit. */
export function firstOptions(frame: TakenFrame, { tone }: FitFacts): FitOptions | ScanOptions {
  return isScan(frame) ? { detectorMm: frame.detectorMm } : { tone };
}

/** Options of a person's fit. Throws BAD_INPUT for a region of the other kind. */
export function changedOptions(
  frame: TakenFrame,
  { tone }: FitFacts,
  { region, zeroShift, leaveOut, detectorMm }: RegionChange,
): FitOptions | ScanOptions {
  if (isScanRegion(region) !== isScan(frame))
    throw new AppError(
      'BAD_INPUT',
      isScan(frame)
        ? 'The region of a scan is a part of it, from and to in mm.'
        : 'The region of a frame is a rectangle in px.',
    );
  if (!isScanRegion(region)) return { region, tone, zeroShift, leaveOut };
  return {
    region,
    zeroShift,
    leaveOut,
    detectorMm: detectorMm === undefined ? frame.detectorMm : detectorMm,
  };
}

/** Fits stored bytes as what they are. The bytes are handed over. */
export function fitInPool(
  bytes: Uint8Array<ArrayBuffer>,
  setup: SetupValues,
  options: FitOptions | ScanOptions,
): Promise<FrameAnswer | ScanAnswer> {
  return 'detectorMm' in options
    ? analyseScanInPool(bytes, setup, options)
    : analyseInPool(bytes, setup, options);
}

/** Size of a picture, or length and detector of a scan, as the columns of its frame. */
export interface SizeColumns {
  width_px?: number | null;
  height_px?: number | null;
  scan_from_mm?: number | null;
  scan_to_mm?: number | null;
  scan_points?: number | null;
  detector_mm?: number | null;
}

export function sizeColumns(answer: FitResult | Refusal | ScanRefusal): SizeColumns {
  if (!answer.ok)
    return 'scan' in answer
      ? scanColumns(answer.scan)
      : { width_px: answer.picture?.widthPx ?? null, height_px: answer.picture?.heightPx ?? null };
  if (isScanResult(answer)) return { ...scanColumns(answer.scan), detector_mm: answer.detectorMm };
  return { width_px: answer.picture.widthPx, height_px: answer.picture.heightPx };
}

function scanColumns(scan: ScanFacts | null): SizeColumns {
  return {
    scan_from_mm: scan?.fromMm ?? null,
    scan_to_mm: scan?.toMm ?? null,
    scan_points: scan?.points ?? null,
  };
}
