import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { BORN, FRAME_STEPS, type FrameState, type FrameStep } from '@/lib/domain/life-cycle';
import type { FrameAnswer, Refusal } from '@/lib/domain/reading-result';
import type { FitResult, ScanAnswer } from '@/lib/domain/scan-result';
import type { CommandContext } from '../context';
import { change } from '../db';
import { fitFacts, loadFrame, type FitFacts } from '../frame-facts';
import { describe, log } from '../log';
import { firstOptions, fitInPool, sizeColumns, type SizeColumns } from '../scan-frames';
import { originalKey, readObject } from '../storage';
import { inTransaction, isDatabaseDown, type Work } from '../transaction';
import { storeReading } from './store-reading';

type FrameRow = Awaited<ReturnType<typeof loadFrame>>;

/** A fit that breaks off by a fault of the program is tried this often in all. */
export const MOST_TRIES = 3;

/**
 * Fits one waiting frame and says what came of it. Answers null when somebody else has taken the frame. A store or
 * database that cannot be reached puts it back and throws; any other failure ends as a sentence on the frame.
 */
export async function fitFrame(context: CommandContext, frameId: number): Promise<FrameState | null> {
  const { take } = FRAME_STEPS;
  const taken = await change(
    'UPDATE frames SET state = :to, claimed_at = :at, fit_tries = fit_tries + 1 WHERE id = :frameId AND state IN (:from)',
    { frameId, at: context.at, to: take.to, from: take.from },
  );
  if (taken !== 1) return null;
  const frame = await loadFrame(frameId);
  try {
    const facts = await fitFacts(frame);
    const answer = await analyse(frame, facts);
    return await settle(context, frame, facts, answer);
  } catch (problem) {
    const passing = isDatabaseDown(problem) || (problem instanceof AppError && problem.status >= 500);
    if (!passing) log().error({ frame: frameId, problem: describe(problem) }, 'a fit broke off');
    if (!passing && frame.fitTries >= MOST_TRIES) {
      return giveUp(
        context,
        frame,
        'FIT_BROKE_OFF',
        'The fit broke off by a fault of the program, which its log describes. The file itself is kept.',
      );
    }
    await putBack(frameId);
    if (passing) throw problem;
    return FRAME_STEPS.putBack.to;
  }
}

async function analyse(frame: FrameRow, facts: FitFacts): Promise<FrameAnswer | ScanAnswer | null> {
  const bytes = await readObject(originalKey(frame.sha256));
  return bytes ? fitInPool(bytes, facts.setup, firstOptions(frame, facts)) : null;
}

async function settle(
  context: CommandContext,
  frame: FrameRow,
  facts: FitFacts,
  answer: FrameAnswer | ScanAnswer | null,
): Promise<FrameState> {
  if (!answer)
    return giveUp(
      context,
      frame,
      'BYTES_MISSING',
      'The stored bytes of this frame are gone. Send the file again.',
    );
  if (answer.ok) return inTransaction(context, (work) => keepFirstFit(work, context, frame, facts, answer));
  const { code, message } = answer satisfies Refusal;
  const step = answer.fileAtFault ? 'giveUp' : 'refuse';
  return endWithout(context, frame, step, code, message, sizeColumns(answer));
}

async function keepFirstFit(
  work: Work,
  context: CommandContext,
  frame: FrameRow,
  facts: FitFacts,
  result: FitResult,
): Promise<FrameState> {
  const reading = await storeReading(
    {
      frame,
      result,
      setup: facts.setup,
      specification: facts.specification,
      comparison: facts.comparison,
      options: firstOptions(frame, facts),
      madeBy: null,
      madeInReview: false,
      replacesId: null,
      at: context.at,
      state: { status: BORN.reading, sentBy: null, sentAt: null, note: '' },
    },
    work.transaction,
  );
  await stepFrame(work, frame.id, 'fit', {
    reading_id: reading.id,
    ...sizeColumns(result),
    code: null,
    message: null,
  });
  work.audit({
    action: 'frame.fit',
    subject: { kind: 'frame', id: frame.id, text: frame.fileName },
    before: { state: frame.state },
    after: {
      state: FRAME_STEPS.fit.to,
      readingId: reading.id,
      region: result.region,
      wavelengthNm: result.wavelengthNm,
      engine: result.engine,
    },
  });
  return FRAME_STEPS.fit.to;
}

function giveUp(
  context: CommandContext,
  frame: FrameRow,
  code: string,
  message: string,
): Promise<FrameState> {
  return endWithout(context, frame, 'giveUp', code, message, {}, true);
}

/** The frame ends without a reading. `forget`: the same file may be sent again and is then a new frame. */
async function endWithout(
  context: CommandContext,
  frame: FrameRow,
  step: FrameStep,
  code: string,
  message: string,
  size: SizeColumns,
  forget = false,
): Promise<FrameState> {
  await inTransaction(context, async (work) => {
    await stepFrame(work, frame.id, step, {
      code,
      message: message.slice(0, 1000),
      ...size,
      ...(forget ? { same_key: null } : {}),
    });
    work.audit({
      action: `frame.${step === 'refuse' ? 'refuse' : 'give-up'}`,
      subject: { kind: 'frame', id: frame.id, text: frame.fileName },
      before: { state: frame.state },
      after: { state: FRAME_STEPS[step].to, code, message },
    });
  });
  return FRAME_STEPS[step].to;
}

type Columns = Partial<
  Record<
    'reading_id' | 'code' | 'message' | 'same_key' | 'spool_path' | keyof SizeColumns,
    string | number | null
  >
>;

/** One conditional update of a frame's state; exactly one row, or somebody was faster. */
export async function stepFrame(
  work: Work,
  frameId: number,
  step: FrameStep,
  columns: Columns,
): Promise<void> {
  const { from, to } = FRAME_STEPS[step];
  const sets = Object.keys(columns).map((column) => `, ${column} = :${column}`);
  const moved = await change(
    `UPDATE frames SET state = :to${sets.join('')} WHERE id = :frameId AND state IN (:from)`,
    { ...columns, frameId, to, from },
    work.transaction,
  );
  if (moved !== 1)
    throw new AppError('CHANGED_MEANWHILE', 'This frame was changed meanwhile. Load the page again.');
}

async function putBack(frameId: number): Promise<void> {
  const { from, to } = FRAME_STEPS.putBack;
  await change('UPDATE frames SET state = :to WHERE id = :frameId AND state IN (:from)', {
    frameId,
    from,
    to,
  });
}
