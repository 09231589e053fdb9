import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import { BORN, frameMay } from '@/lib/domain/life-cycle';
import { LIMITS } from '@/lib/domain/limits';
import type { CommandContext } from '../context';
import { db } from '../db';
import { nudgeQueue } from '../queue';
import { brokeOff, dropSpool, spoolBody, type Spooled } from '../spool';
import { isScan } from '../scan-frames';
import { requireSetupAt } from '../setup-timeline';
import { findSubject, type FrameSubject, type SubjectChoice } from '../subject';
import { landFrame } from './land-frame';
import { takeDetector } from './take-detector';

export interface Incoming extends SubjectChoice {
  fileName: string;
  benchId: number;
  /** What Content-Length says. */
  declaredBytes: number;
  body: AsyncIterable<Uint8Array>;
  /** Width of a scan's detector, null for a point; nothing to a picture. */
  detectorMm: number | null;
}

/**
 * Takes one file: its bytes go to a file of the spool while they are hashed, then a row says `copying`, then the
 * store has them, then the row says `waiting`. A crash after any of these steps leaves what the next start needs.
 */
export async function receiveFrame(
  context: CommandContext,
  incoming: Incoming,
): Promise<{ frameId: number; sameAs: number | null }> {
  if (incoming.declaredBytes > LIMITS.fileBytes) throw tooLarge();
  const fileName = tidyName(incoming.fileName);
  const setup = await requireSetupAt(incoming.benchId, context.at);
  const subject = await findSubject(fileName, incoming);
  const spooled = await spoolBody(incoming.body, LIMITS.fileBytes);
  if (spooled.bytes !== incoming.declaredBytes) {
    await dropSpool(spooled.path);
    throw brokeOff();
  }
  const frame = await db()
    .tables.frames.create({
      benchId: incoming.benchId,
      setupId: setup.id,
      lotId: subject.lotId,
      unitId: subject.unitId,
      sourceId: subject.sourceId,
      fileName,
      findText: `${fileName} ${subject.findText}`.slice(0, 500),
      bytes: spooled.bytes,
      sha256: spooled.sha256,
      mediaType: spooled.mediaType,
      sameKey: sameKey(spooled, incoming.benchId, subject),
      state: BORN.frame,
      detectorMm: isScan(spooled) ? incoming.detectorMm : null,
      spoolPath: spooled.path,
      uploadedBy: context.actor.id,
      receivedAt: context.at,
    })
    .catch((problem: unknown) => {
      if (problem instanceof UniqueConstraintError) return null;
      throw problem;
    });
  if (!frame) return sameAgain(context, spooled, incoming, subject);
  await landFrame(context, frame.id, spooled);
  nudgeQueue();
  return { frameId: frame.id, sameAs: null };
}

/** The same bytes for the same bench and subject are there already; a copy that had broken off is finished. */
async function sameAgain(
  context: CommandContext,
  spooled: Spooled,
  { benchId, detectorMm }: Incoming,
  subject: FrameSubject,
) {
  const frame = await db().tables.frames.findOne({
    where: { sameKey: sameKey(spooled, benchId, subject) },
    rejectOnEmpty: true,
  });
  if (isScan(spooled))
    await takeDetector(context, frame, detectorMm).catch(async (problem: unknown) => {
      await dropSpool(spooled.path);
      throw problem;
    });
  if (frameMay('land', frame.state)) {
    await landFrame(context, frame.id, spooled);
    nudgeQueue();
  } else {
    await dropSpool(spooled.path);
  }
  return { frameId: frame.id, sameAs: frame.id };
}

function sameKey(spooled: Spooled, benchId: number, { unitId, sourceId }: FrameSubject): string {
  return `${spooled.sha256}:${benchId}:${unitId !== null ? `u${unitId}` : `s${sourceId}`}`;
}

export function tooLarge(): AppError {
  const megabytes = LIMITS.fileBytes / 1024 / 1024;
  return new AppError(
    'TOO_LARGE',
    `This file is larger than ${megabytes} MB. Save the frame with compression, or crop it to the fringes.`,
  );
}

/** The last part of a name, without control characters; at most 255 characters. */
function tidyName(name: string): string {
  const last = name.split(/[/\\]/).at(-1) ?? '';
  const clean = last.replace(/[\p{Cc}\p{Cf}]/gu, '').trim();
  if (!clean) throw new AppError('BAD_INPUT', 'The file has no name.');
  return clean.slice(-255);
}
