import 'server-only';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { BORN, FRAME_STEPS, READING_STEPS, frameMay } from '@/lib/domain/life-cycle';
import { can } from '@/lib/domain/permissions';
import { isScanResult, type FitResult } from '@/lib/domain/scan-result';
import type { refitSchema, regionChangeSchema } from '@/lib/domain/schemas';
import type { FitPreview } from '@/lib/domain/views';
import type { CommandContext } from '../context';
import { change } from '../db';
import { fitFacts, loadFrame, type FitFacts } from '../frame-facts';
import { changedMeanwhile, findReading, readingText, stepReading, type ReadingFacts } from '../reading-facts';
import { changedOptions, fitInPool, sizeColumns } from '../scan-frames';
import { originalKey, readObject } from '../storage';
import { inTransaction, type Work } from '../transaction';
import { valueIn } from '../value';
import { stepFrame } from './fit-frame';
import { storeReading } from './store-reading';

type Refit = z.output<typeof refitSchema>;
type RegionChange = z.output<typeof regionChangeSchema>;
type FrameRow = Awaited<ReturnType<typeof loadFrame>>;

/** A fit with the person's region, shown and not kept. */
export async function previewFit(frameId: number, wanted: RegionChange): Promise<FitPreview> {
  const frame = await loadFrame(frameId);
  const facts = await fitFacts(frame);
  const result = await fitWith(frame, facts, wanted);
  const { medium, valueNm, expandedNm, judgement } = valueIn(result, facts.specification);
  return { result, wavelengthNm: valueNm, expandedNm, medium, judgement };
}

/**
 * Fits again on the server with the person's region and keeps it as a new reading, which names the one it replaces.
 * In review it goes straight back to review and keeps its sender.
 */
export async function keepFit(
  context: CommandContext,
  wanted: Refit,
): Promise<{ readingId: number; version: number }> {
  const frame = await loadFrame(wanted.frameId);
  const before = wanted.fromReadingId === null ? null : await findReading(wanted.fromReadingId);
  await requireRight(context, frame, before, wanted.fromVersion);
  const facts = await fitFacts(frame);
  const result = await fitWith(frame, facts, wanted);
  return inTransaction(context, (work) => store(work, context, frame, before, facts, result, wanted));
}

async function requireRight(
  context: CommandContext,
  frame: FrameRow,
  before: ReadingFacts | null,
  version: number,
): Promise<void> {
  if (!before) {
    if (!frameMay('fit', frame.state)) throw await changedMeanwhile('frame', frame.id);
    if (!can(context.actor, 'readings.send'))
      throw new AppError('NOT_ALLOWED', 'Before review, a technician makes the fits.');
    return;
  }
  if (before.frameId !== frame.id) throw new AppError('BAD_INPUT', 'This reading is of another frame.');
  if (before.currentReadingId !== before.readingId || before.version !== version)
    throw await changedMeanwhile('reading', before.readingId);
  if (isInReview(before)) {
    if (!can(context.actor, 'readings.return'))
      throw new AppError('NOT_ALLOWED', 'In review, a reviewer makes the fits.');
  } else if (!can(context.actor, 'readings.send')) {
    throw new AppError('NOT_ALLOWED', 'Before review, a technician makes the fits.');
  }
}

function isInReview(reading: ReadingFacts): boolean {
  return reading.status === READING_STEPS.send.to;
}

async function fitWith(frame: FrameRow, facts: FitFacts, wanted: RegionChange): Promise<FitResult> {
  const bytes = await readObject(originalKey(frame.sha256));
  if (!bytes) throw new AppError('NOT_FOUND', 'The stored bytes of this frame are gone.');
  const answer = await fitInPool(bytes, facts.setup, changedOptions(frame, facts, wanted));
  if (!answer.ok) throw new AppError('CANNOT_FIT', answer.message);
  return answer;
}

async function store(
  work: Work,
  context: CommandContext,
  frame: FrameRow,
  before: ReadingFacts | null,
  facts: FitFacts,
  result: FitResult,
  wanted: Refit,
): Promise<{ readingId: number; version: number }> {
  const inReview = before !== null && isInReview(before);
  if (before) await stepReading(work, context.at, before, wanted.fromVersion, 'replace');
  const reading = await storeReading(
    {
      frame,
      result,
      setup: facts.setup,
      specification: facts.specification,
      options: changedOptions(frame, facts, wanted),
      madeBy: context.actor.id,
      madeInReview: inReview,
      replacesId: before?.readingId ?? null,
      at: context.at,
      state: inReview
        ? { status: READING_STEPS.send.to, sentBy: before.sentBy, sentAt: before.sentAt, note: before.note }
        : { status: BORN.reading, sentBy: null, sentAt: null, note: '' },
    },
    work.transaction,
  );
  await pointFrameAt(work, frame, before, reading.id, result);
  work.audit({
    action: 'reading.refit',
    subject: {
      kind: 'reading',
      id: reading.id,
      text: readingText({ fileName: frame.fileName, number: reading.number }),
    },
    before: before
      ? {
          readingId: before.readingId,
          status: before.status,
          valueNm: before.valueNm,
          verdict: before.verdict,
        }
      : { frame: frame.state },
    after: {
      readingId: reading.id,
      status: inReview ? READING_STEPS.send.to : BORN.reading,
      region: wanted.region,
      ...(isScanResult(result) ? { detectorMm: result.detectorMm } : {}),
      zeroShift: wanted.zeroShift,
      leaveOut: wanted.leaveOut,
      valueNm: valueIn(result, facts.specification).valueNm,
    },
  });
  return { readingId: reading.id, version: 0 };
}

async function pointFrameAt(
  work: Work,
  frame: FrameRow,
  before: ReadingFacts | null,
  readingId: number,
  result: FitResult,
): Promise<void> {
  const size = sizeColumns(result);
  if (!before)
    return stepFrame(work, frame.id, 'fit', { reading_id: readingId, ...size, code: null, message: null });
  const moved = await change(
    'UPDATE frames SET reading_id = :readingId, detector_mm = :detectorMm WHERE id = :frameId AND reading_id = :before AND state = :state',
    {
      readingId,
      detectorMm: size.detector_mm ?? null,
      frameId: frame.id,
      before: before.readingId,
      state: FRAME_STEPS.fit.to,
    },
    work.transaction,
  );
  if (moved !== 1) throw await changedMeanwhile('reading', before.readingId);
}
