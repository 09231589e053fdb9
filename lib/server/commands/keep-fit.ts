import 'server-only';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { BORN, FRAME_STEPS, READING_STEPS, frameMay, readingMayBeFollowed } from '@/lib/domain/life-cycle';
import { can } from '@/lib/domain/permissions';
import type { FitOptions } from '@/lib/domain/reading-result';
import { isScanRegion, isScanResult, type FitResult, type ScanOptions } from '@/lib/domain/scan-result';
import type { keepFitSchema } from '@/lib/domain/review-schemas';
import type { RegionChange, SeenDigits, ServerFit } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';
import { previewOf, valueIn } from '@/lib/quantity/value-in';
import type { CommandContext } from '../context';
import { stackForFit } from '../band-stacks';
import { change } from '../db';
import { fitFacts, loadFrame, type FitFacts } from '../frame-facts';
import { log } from '../log';
import { refitInPool } from '../measure-pool';
import { changedMeanwhile, findReading, readingText, stepReading, type ReadingFacts } from '../reading-facts';
import { changedOptions, fitInPool, sizeColumns } from '../scan-frames';
import { keepMoveReason } from '../move-reasons';
import { storeTrials } from '../region-trials';
import { originalKey, readObject } from '../storage';
import { inTransaction, type Work } from '../transaction';
import { stepFrame } from './fit-frame';
import { storeReading } from './store-reading';

/** Where the change was not fitted in a browser, there is no stack and nothing was seen. */
type Wanted = z.output<typeof keepFitSchema>;
type MayMiss = 'stackSha256' | 'seen' | 'trials' | 'moveReason';
type Refit = Omit<Wanted, MayMiss> & Partial<Pick<Wanted, MayMiss>>;
type FrameRow = Awaited<ReturnType<typeof loadFrame>>;

/** A new reading, and what is to be said where the person saw other numbers than the server keeps. */
export interface KeptFit {
  readingId: number;
  version: number;
  differs: string | null;
}

/** A fit with the person's region, shown and not kept: for browsers that cannot make it themselves. */
export async function previewFit(
  frameId: number,
  wanted: RegionChange & { stackSha256: string | null },
): Promise<ServerFit> {
  const frame = await loadFrame(frameId);
  const facts = await fitFacts(frame);
  const { result, stackSha256 } = await fitWith(frame, facts, wanted);
  return { ...previewOf(result, facts), stackSha256 };
}

/**
 * Fits again on the server with the person's region and keeps it as a new reading, which names the one it replaces.
 * In review it goes straight back to review and keeps its sender. The server measures from its own copy of the band
 * stack the person's browser measured from, so the digits are the same; where they are not, it says so.
 */
export async function keepFit(context: CommandContext, wanted: Refit): Promise<KeptFit> {
  const frame = await loadFrame(wanted.frameId);
  const before = wanted.fromReadingId === null ? null : await findReading(wanted.fromReadingId);
  await requireRight(context, frame, before, wanted.fromVersion);
  const facts = await fitFacts(frame);
  const fit = await fitWith(frame, facts, wanted);
  const kept = await inTransaction(context, (work) =>
    store(work, context, frame, before, facts, fit, wanted),
  );
  return { ...kept, differs: wanted.seen ? tellDifference(frame, wanted.seen, fit.result) : null };
}

/** Same stack, same digits: browser and server may differ by this share of a number. */
const SAME_DIGITS = 1e-9;

/** A sentence where the digits a person saw are not those that were kept; it is logged as well. */
function tellDifference(frame: FrameRow, seen: SeenDigits, kept: FitResult): string | null {
  if (isScanResult(kept)) return null;
  const { spacingPx, uSpacingPx, wavelengthNm, expandedNm } = kept;
  const digits: SeenDigits = { spacingPx, uSpacingPx, wavelengthNm, expandedNm };
  const isSame = (Object.keys(digits) as (keyof SeenDigits)[]).every((key) => {
    const [a, b] = [seen[key], digits[key]];
    return a === b || (a !== null && b !== null && Math.abs(a - b) <= SAME_DIGITS * Math.abs(b));
  });
  if (isSame) return null;
  log().warn({ frame: frame.id, engine: kept.engine, seen, kept: digits }, 'browser and server differ');
  return `The server’s fit gives a spacing of ${formatNumber(spacingPx, 6)} px, this page showed ${formatNumber(seen.spacingPx, 6)} px. The server’s numbers are the ones kept; look at them before you go on.`;
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

/** A fit by the server, with the options that give it again from the frame's bytes. */
interface MadeFit {
  result: FitResult;
  options: FitOptions | ScanOptions;
  stackSha256: string | null;
}

async function fitWith(
  frame: FrameRow,
  facts: FitFacts,
  wanted: RegionChange & { stackSha256?: string | null },
): Promise<MadeFit> {
  const options = changedOptions(frame, facts, wanted);
  const { region, leaveOut, zeroShift } = wanted;
  if (isScanRegion(region)) return { ...(await scanFit(frame, facts, options)), options, stackSha256: null };
  const stack = await stackForFit(frame, facts, { region, leaveOut, zeroShift }, wanted.stackSha256 ?? null);
  const pictured = { region, tone: facts.tone, zeroShift, leaveOut };
  const result = await refitInPool(stack.bytes, facts.setup, pictured);
  if (!result.ok) throw new AppError('CANNOT_FIT', result.message);
  return { result, options: { ...pictured, stack: result.stack }, stackSha256: stack.sha256 };
}

/** A scan is small: it is fitted from its bytes each time. */
async function scanFit(
  frame: FrameRow,
  facts: FitFacts,
  options: FitOptions | ScanOptions,
): Promise<{ result: FitResult }> {
  const bytes = await readObject(originalKey(frame.sha256));
  if (!bytes) throw new AppError('NOT_FOUND', 'The stored bytes of this frame are gone.');
  const result = await fitInPool(bytes, facts.setup, options);
  if (!result.ok) throw new AppError('CANNOT_FIT', result.message);
  return { result };
}

async function store(
  work: Work,
  context: CommandContext,
  frame: FrameRow,
  before: ReadingFacts | null,
  facts: FitFacts,
  { result, options }: MadeFit,
  wanted: Refit,
): Promise<{ readingId: number; version: number }> {
  const inReview = before !== null && isInReview(before);
  // What was withdrawn stays withdrawn; the new reading names it and takes its place at the frame.
  if (before && !readingMayBeFollowed(before.status))
    await stepReading(work, context.at, before, wanted.fromVersion, 'replace');
  const reading = await storeReading(
    {
      frame,
      result,
      setup: facts.setup,
      specification: facts.specification,
      comparison: facts.comparison,
      options,
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
  const trials = wanted.trials ?? [];
  const fromReadingId = before?.readingId ?? null;
  await storeTrials(work, context, { frameId: frame.id, fromReadingId, keptReadingId: reading.id }, trials);
  if (wanted.moveReason) await keepMoveReason(work, context, reading.id, wanted.moveReason);
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
      valueNm: valueIn(result, facts).valueNm,
      regionsTried: trials.length,
      ...(wanted.moveReason ? { moveReason: wanted.moveReason } : {}),
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
