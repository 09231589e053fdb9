import 'server-only';
import { FRAME_STEPS } from '@/lib/domain/life-cycle';
import type { CommandContext } from '../context';
import { change, db, select } from '../db';
import { spoolHas, sweepSpool } from '../spool';
import { originalKey, sizeOf } from '../storage';
import { inTransaction } from '../transaction';
import { MOST_TRIES, stepFrame } from './fit-frame';
import { landFrame, markLanded } from './land-frame';

const ORPHAN_MS = 3_600_000;

export interface Healed {
  landed: number;
  lost: number;
  putBack: number;
  swept: number;
}

/**
 * Finishes what a crash left: frames half copied are landed from the spool or the store, or said to be lost; frames
 * that were being fitted wait again; files of the spool that no row names are removed after an hour.
 */
export async function healFrames(context: CommandContext): Promise<Healed> {
  const { landed, lost } = await healCopying(context, context.at);
  const putBack = await putBackFitting(context);
  const named = await select<{ spool_path: string }>(
    'SELECT spool_path FROM frames WHERE spool_path IS NOT NULL',
  );
  const swept = await sweepSpool(new Set(named.map((row) => row.spool_path)), context.at, ORPHAN_MS);
  return { landed, lost, putBack, swept };
}

/** Frames whose copy began before `before` and has not ended: the store was away, or the server stopped. */
export async function healCopying(
  context: CommandContext,
  before: Date,
): Promise<{ landed: number; lost: number }> {
  const rows = await db().tables.frames.findAll({ where: { state: [...FRAME_STEPS.land.from] } });
  let landed = 0;
  let lost = 0;
  for (const frame of rows) {
    if (frame.receivedAt > before) continue;
    const { id, spoolPath, sha256, bytes, mediaType } = frame;
    if ((await sizeOf(originalKey(sha256))) === bytes) {
      landed += (await markLanded(context, id)) ? 1 : 0;
    } else if (spoolPath && (await spoolHas(spoolPath, bytes))) {
      landed += (await landFrame(context, id, { path: spoolPath, sha256, bytes, mediaType })) ? 1 : 0;
    } else {
      await sayLost(context, id, frame.fileName);
      lost += 1;
    }
  }
  return { landed, lost };
}

async function sayLost(context: CommandContext, frameId: number, fileName: string): Promise<void> {
  const code = 'COPY_BROKE_OFF';
  const message =
    'The server stopped while this file was being copied, and its bytes did not arrive whole. Send the file again.';
  await inTransaction(context, async (work) => {
    await stepFrame(work, frameId, 'breakOff', { code, message, same_key: null, spool_path: null });
    work.audit({
      action: 'frame.break-off',
      subject: { kind: 'frame', id: frameId, text: fileName },
      before: null,
      after: { state: FRAME_STEPS.breakOff.to, code },
    });
  });
}

/** A frame whose fit ended the server several times is not tried for ever. */
async function putBackFitting(context: CommandContext): Promise<number> {
  const worn = await db().tables.frames.findAll({ where: { state: [...FRAME_STEPS.giveUp.from] } });
  for (const frame of worn.filter(({ fitTries }) => fitTries >= MOST_TRIES)) {
    await inTransaction(context, async (work) => {
      const code = 'FIT_BROKE_OFF';
      const message =
        'The server stopped several times while this frame was being fitted. The file itself is kept.';
      await stepFrame(work, frame.id, 'giveUp', { code, message, same_key: null });
      work.audit({
        action: 'frame.give-up',
        subject: { kind: 'frame', id: frame.id, text: frame.fileName },
        before: { state: frame.state },
        after: { state: FRAME_STEPS.giveUp.to, code },
      });
    });
  }
  const { from, to } = FRAME_STEPS.putBack;
  return change('UPDATE frames SET state = :to WHERE state IN (:from)', { from, to });
}
