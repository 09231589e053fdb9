import type { Finding, ReadingResult } from '@/lib/domain/reading-result';
import type { CommandContext } from '@/lib/server/context';
import { db } from '@/lib/server/db';
import { fitFacts } from '@/lib/server/frame-facts';
import { inTransaction } from '@/lib/server/transaction';
import { storeReading } from '@/lib/server/commands/store-reading';
import { BORN, FRAME_STEPS } from '@/lib/domain/life-cycle';
import { NOW, type World } from './world';

/** An invented engine's answer, for tests of what happens to a reading after it was measured. */
export function inventedResult(change: Partial<ReadingResult> = {}): ReadingResult {
  const region = { cxPx: 400, cyPx: 300, lengthPx: 600, heightPx: 80, angleDeg: 0 };
  return {
    ok: true,
    code: 'OK',
    message: '',
    spacingPx: 110.4,
    uSpacingPx: 0.01,
    dofSpacing: 14,
    tiltDeg: 0,
    uTiltDeg: 0.01,
    visibility: 0.9,
    uVisibility: 0.01,
    zeroOrder: { xPx: 402, yPx: 300 },
    orders: [{ m: 0, kind: 'bright', xPx: 402, yPx: 300, uPx: 0.02, pullPx: 0.01, alongPx: 2, used: true }],
    region,
    medium: 'air',
    wavelengthNm: 634.8,
    wavelengthVacuumNm: 634.9755,
    uWavelengthNm: 0.35,
    expandedNm: 0.7,
    k: 2,
    dofWavelength: null,
    budget: [],
    findings: [],
    engine: 'invented',
    picture: {
      widthPx: 800,
      heightPx: 600,
      bits: 8,
      format: 'png',
      channel: 'grey',
      tone: 'linear',
      toneBecause: 'invented',
    },
    peakShare: 0.8,
    clippedShare: 0,
    envelopeZeroOrder: 5,
    envelopeCentrePx: 0,
    rows: 80,
    chiSquareReduced: 1,
    curves: { alongPx: [0], data: [1], uData: [0.1], fit: [1], envelope: [1], misfit: [0], left: [0] },
    strip: { fromPx: -300, stepPx: 10, light: [0, 1, 0] },
    ms: { decode: 1, find: 1, profile: 1, fit: 1, total: 4 },
    ...change,
  };
}

export function finding(check: string, word: Finding['word']): Finding {
  const message = `Invented finding ${check}.`;
  return { check, word, message, seen: message, size: '', done: '', remedy: '', sizeNm: null };
}

let made = 0;

interface Made {
  frameId: number;
  readingId: number;
}

/** A fitted frame of a unit with a draft reading, uploaded by the context's person. */
export async function makeReading(
  world: World,
  context: CommandContext,
  unit = 0,
  result = inventedResult(),
): Promise<Made> {
  made += 1;
  const unitId = world.unitIds[unit];
  const sha256 = made.toString(16).padStart(64, 'a');
  const frame = await db().tables.frames.create({
    benchId: world.benchId,
    setupId: world.setupId,
    lotId: world.lotId,
    unitId,
    sourceId: null,
    fileName: `invented-${made}.png`,
    findText: `invented-${made}.png`,
    bytes: 100,
    sha256,
    mediaType: 'image/png',
    sameKey: null,
    state: FRAME_STEPS.fit.to,
    spoolPath: null,
    uploadedBy: context.actor.id,
    receivedAt: context.at,
  });
  const { setup, specification, comparison } = await fitFacts(frame);
  const reading = await inTransaction({ ...context, at: NOW }, (work) =>
    storeReading(
      {
        frame,
        result,
        setup,
        specification,
        comparison,
        options: { tone: 'auto' },
        madeBy: null,
        madeInReview: false,
        replacesId: null,
        at: context.at,
        state: { status: BORN.reading, sentBy: null, sentAt: null, note: '' },
      },
      work.transaction,
    ),
  );
  await frame.update({ readingId: reading.id });
  return { frameId: frame.id, readingId: reading.id };
}
