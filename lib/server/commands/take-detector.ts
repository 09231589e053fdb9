import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { FRAME_STEPS, frameMay, READING_STEPS, readingMay } from '@/lib/domain/life-cycle';
import type { FitOptions } from '@/lib/domain/reading-result';
import type { ScanOptions, ScanResult } from '@/lib/domain/scan-result';
import type { CommandContext } from '../context';
import { change, db } from '../db';
import { findReading } from '../reading-facts';
import { inTransaction } from '../transaction';
import { stepFrame } from './fit-frame';
import { keepFit } from './keep-fit';

interface ScanFrame {
  id: number;
  fileName: string;
  state: Parameters<typeof frameMay>[1];
  readingId: number | null;
  detectorMm: number | null;
}

const widthText = (mm: number | null) =>
  mm === null ? 'without a detector width' : `with a detector of ${mm} mm`;

/**
 * The same scan has been sent again with another width of the detector: the person corrects it. Before review the scan is
 * fitted anew, the new reading naming the one it replaces; afterwards nothing changes and the sentence says where it can be.
 */
export async function takeDetector(
  context: CommandContext,
  frame: ScanFrame,
  detectorMm: number | null,
): Promise<void> {
  if (frame.detectorMm === detectorMm) return;
  if (frame.readingId !== null) return fitAnew(context, frame, frame.readingId, detectorMm);
  if (frameMay('land', frame.state)) {
    await change('UPDATE frames SET detector_mm = :detectorMm WHERE id = :id AND state IN (:from)', {
      detectorMm,
      id: frame.id,
      from: FRAME_STEPS.land.from,
    });
    return;
  }
  if (frameMay('fitAnew', frame.state)) return waitAgain(context, frame, detectorMm);
  // An unreadable file stays so with any detector.
  if (!frameMay('giveUp', frame.state)) return;
  throw new AppError(
    'BUSY',
    `This scan is being fitted at the moment, ${widthText(frame.detectorMm)}. Send it again when that is done.`,
  );
}

async function waitAgain(
  context: CommandContext,
  frame: ScanFrame,
  detectorMm: number | null,
): Promise<void> {
  await inTransaction(context, async (work) => {
    await stepFrame(work, frame.id, 'fitAnew', { detector_mm: detectorMm, code: null, message: null });
    work.audit({
      action: 'frame.detector',
      subject: { kind: 'frame', id: frame.id, text: frame.fileName },
      before: { state: frame.state, detectorMm: frame.detectorMm },
      after: { state: FRAME_STEPS.fitAnew.to, detectorMm },
    });
  });
}

async function fitAnew(
  context: CommandContext,
  frame: ScanFrame,
  readingId: number,
  detectorMm: number | null,
): Promise<void> {
  const { tables } = db();
  const facts = await findReading(readingId);
  if (!readingMay('replace', facts.status) || facts.status === READING_STEPS.send.to)
    throw new AppError(
      'WRONG_STATE',
      `This scan is here already, ${widthText(frame.detectorMm)}, and its reading has gone to review. Nothing was changed; a reviewer can change the width there.`,
    );
  const [reading, stored] = await Promise.all([
    tables.readings.findByPk(readingId, { rejectOnEmpty: true }),
    tables.readingResults.findByPk(readingId, { rejectOnEmpty: true }),
  ]);
  const { zeroShift = 0, leaveOut = [] } = JSON.parse(reading.optionsJson) as FitOptions | ScanOptions;
  const { region } = JSON.parse(stored.resultJson) as ScanResult;
  await keepFit(context, {
    frameId: frame.id,
    fromReadingId: readingId,
    fromVersion: facts.version,
    region,
    zeroShift,
    leaveOut,
    detectorMm,
  });
}
