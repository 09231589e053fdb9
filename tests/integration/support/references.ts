import { BORN, FRAME_STEPS } from '@/lib/domain/life-cycle';
import type { ReadingResult } from '@/lib/domain/reading-result';
import { acceptReading } from '@/lib/server/commands/accept-reading';
import { sendReading } from '@/lib/server/commands/send-reading';
import { storeReading } from '@/lib/server/commands/store-reading';
import { db } from '@/lib/server/db';
import { fitFacts } from '@/lib/server/frame-facts';
import { inTransaction } from '@/lib/server/transaction';
import { airFromVacuum, vacuumFromAir } from '@/lib/quantity/air-index';
import { inventedResult } from './readings';
import { PASSWORD, as, type World } from './world';

let made = 0;

/** An invented answer that reads the world's reference source off by so many nm in air. */
export function referenceResult(offNm: number, change: Partial<ReadingResult> = {}): ReadingResult {
  const airNm = airFromVacuum(632.991) + offNm;
  return inventedResult({ wavelengthNm: airNm, wavelengthVacuumNm: vacuumFromAir(airNm), ...change });
}

/** A frame of the world's reference source with a reading in review. */
export async function referenceInReview(
  world: World,
  result: ReadingResult,
  setupId = world.setupId,
  at = new Date(),
): Promise<{ frameId: number; readingId: number }> {
  made += 1;
  const technician = as(world.people.technician, at);
  const frame = await db().tables.frames.create({
    benchId: world.benchId,
    setupId,
    lotId: null,
    unitId: null,
    sourceId: world.sourceId,
    fileName: `reference-${made}.png`,
    findText: `reference-${made}.png`,
    bytes: 100,
    sha256: made.toString(16).padStart(64, 'b'),
    mediaType: 'image/png',
    sameKey: null,
    state: FRAME_STEPS.fit.to,
    spoolPath: null,
    uploadedBy: technician.actor.id,
    receivedAt: at,
  });
  const facts = await fitFacts(frame);
  const reading = await inTransaction(technician, (work) =>
    storeReading(
      {
        frame,
        result,
        setup: facts.setup,
        specification: null,
        comparison: null,
        options: { tone: 'auto' },
        madeBy: null,
        madeInReview: false,
        replacesId: null,
        at,
        state: { status: BORN.reading, sentBy: null, sentAt: null, note: '' },
      },
      work.transaction,
    ),
  );
  await frame.update({ readingId: reading.id });
  await sendReading(technician, { readingId: reading.id, version: 0, note: '' });
  return { frameId: frame.id, readingId: reading.id };
}

export async function acceptAs(
  world: World,
  who: 'reviewer' | 'reviewer2',
  readingId: number,
): Promise<void> {
  await acceptReading(as(world.people[who], new Date()), {
    readingId,
    version: 1,
    password: PASSWORD,
    answers: [],
  });
}

/** The same, signed. */
export async function acceptReference(
  world: World,
  offNm: number,
  setupId = world.setupId,
  change: Partial<ReadingResult> = {},
): Promise<{ frameId: number; readingId: number }> {
  const made = await referenceInReview(world, referenceResult(offNm, change), setupId);
  await acceptAs(world, 'reviewer', made.readingId);
  return made;
}
