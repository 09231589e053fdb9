import 'server-only';
import { createReadStream } from 'node:fs';
import { FRAME_STEPS } from '@/lib/domain/life-cycle';
import type { CommandContext } from '../context';
import { change, db } from '../db';
import { dropSpool, type Spooled } from '../spool';
import { isScan } from '../scan-frames';
import { originalKey, putObject, sizeOf } from '../storage';
import { inTransaction } from '../transaction';

/** Copies a spooled frame into the store and says so in its row. Safe to run again, and by two at once. */
export async function landFrame(
  context: CommandContext,
  frameId: number,
  spooled: Spooled,
): Promise<boolean> {
  const key = originalKey(spooled.sha256);
  if ((await sizeOf(key)) !== spooled.bytes) {
    await putObject(key, createReadStream(spooled.path), spooled.bytes, spooled.mediaType);
  }
  const landed = await markLanded(context, frameId);
  await dropSpool(spooled.path);
  return landed;
}

/** The bytes are in the store: the frame waits for its fit. False when somebody else has said so already. */
export async function markLanded(context: CommandContext, frameId: number): Promise<boolean> {
  const step = FRAME_STEPS.land;
  return inTransaction(context, async (work) => {
    const moved = await change(
      'UPDATE frames SET state = :to, spool_path = NULL WHERE id = :frameId AND state IN (:from)',
      { frameId, to: step.to, from: step.from },
      work.transaction,
    );
    if (moved !== 1) return false;
    const frame = await db().tables.frames.findByPk(frameId, {
      transaction: work.transaction,
      rejectOnEmpty: true,
    });
    work.audit({
      action: 'frame.receive',
      subject: { kind: 'frame', id: frameId, text: frame.fileName },
      before: null,
      after: {
        state: step.to,
        sha256: frame.sha256,
        bytes: frame.bytes,
        benchId: frame.benchId,
        setupId: frame.setupId,
        unitId: frame.unitId,
        sourceId: frame.sourceId,
        ...(isScan(frame) ? { detectorMm: frame.detectorMm } : {}),
      },
    });
    return true;
  });
}
