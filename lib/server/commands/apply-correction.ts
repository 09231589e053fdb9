import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { BORN, READING_STEPS, readingMay } from '@/lib/domain/life-cycle';
import type { FitOptions } from '@/lib/domain/reading-result';
import type { FitResult, ScanOptions } from '@/lib/domain/scan-result';
import { VERDICT_WORDS } from '@/lib/domain/specification';
import { formatNumber } from '@/lib/quantity/format';
import type { Setup } from '@/models/setup';
import type { CommandContext } from '../context';
import { correctedReadings, correctedTime, type CorrectedReading, type CorrectedTime } from '../corrections';
import { change, db, select } from '../db';
import { fitFacts, loadFrame } from '../frame-facts';
import { mailText, type Addressee } from '../people-mail';
import { changedMeanwhile, findReading, readingText, stepReading } from '../reading-facts';
import type { Work } from '../transaction';
import { storeReading } from './store-reading';

/** Lines of one mail; more are on the bench's page. */
const MOST_LINES = 30;

/**
 * Makes the new readings of a correction that QA approves: exactly those that were measured and shown before. A reading
 * that was not signed steps back for its successor; a signed one stays as it is, and its successor goes to review. The
 * frames of the time are of this setup from now on. Belongs into the transaction of the approval.
 */
export async function applyCorrection(
  work: Work,
  context: CommandContext,
  bench: { id: number; name: string },
  setup: Setup,
): Promise<number> {
  const { transaction } = work;
  const time = await correctedTime(setup.id, transaction);
  if (!time) throw new AppError('WRONG_STATE', 'This setup corrects nothing.');
  const readings = await correctedReadings(time, transaction);
  const open = readings.filter(({ isMeasured }) => !isMeasured).length;
  if (open) {
    throw new AppError(
      'WRONG_STATE',
      `${open} of ${readings.length} readings have not been measured with the new values yet. Wait a moment and load the page again.`,
    );
  }
  const corrected = readings.filter(({ message }) => message === null);
  for (const reading of corrected) await correct(work, context, setup, reading);
  await change(
    `UPDATE frames SET setup_id = :setupId WHERE bench_id = :benchId AND received_at >= :from AND (:until IS NULL OR received_at < :until)`,
    { ...time },
    transaction,
  );
  await tellPeople(work, context, bench, setup, time, corrected);
  return corrected.length;
}

async function correct(
  work: Work,
  context: CommandContext,
  setup: Setup,
  reading: CorrectedReading,
): Promise<void> {
  const { transaction } = work;
  const frame = await loadFrame(reading.frameId, transaction);
  const facts = await fitFacts({ ...frame.get({ plain: true }), setupId: setup.id }, transaction);
  const fit = await db().tables.correctionFits.findOne({
    where: { setupId: setup.id, readingId: reading.readingId },
    transaction,
    rejectOnEmpty: true,
  });
  const before = await findReading(reading.readingId, transaction);
  const wasInReview = before.status === READING_STEPS.send.to;
  const wasAccepted = before.status === READING_STEPS.accept.to;
  if (readingMay('replace', before.status))
    await stepReading(work, context.at, before, reading.version, 'replace');
  const made = await storeReading(
    {
      frame: { ...frame.get({ plain: true }), setupId: setup.id },
      result: JSON.parse(fit.resultJson ?? 'null') as FitResult,
      setup: facts.setup,
      specification: facts.specification,
      comparison: facts.comparison,
      options: JSON.parse(fit.optionsJson ?? '{}') as FitOptions | ScanOptions,
      madeBy: null,
      madeInReview: true,
      replacesId: before.readingId,
      at: context.at,
      state:
        wasInReview || wasAccepted
          ? {
              status: READING_STEPS.send.to,
              sentBy: before.sentBy,
              sentAt: wasInReview ? before.sentAt : context.at,
              note: before.note,
            }
          : { status: BORN.reading, sentBy: null, sentAt: null, note: '' },
    },
    transaction,
  );
  const moved = await change(
    'UPDATE frames SET reading_id = :readingId WHERE id = :frameId AND reading_id = :before',
    { readingId: made.id, frameId: frame.id, before: before.readingId },
    transaction,
  );
  if (moved !== 1) throw await changedMeanwhile('reading', before.readingId);
  work.audit({
    action: 'reading.correct',
    subject: {
      kind: 'reading',
      id: made.id,
      text: readingText({ fileName: frame.fileName, number: made.number }),
    },
    before: {
      readingId: before.readingId,
      status: before.status,
      setupId: before.setupId,
      valueNm: reading.valueNm,
      verdict: reading.verdict,
    },
    after: {
      readingId: made.id,
      status: wasInReview || wasAccepted ? READING_STEPS.send.to : BORN.reading,
      setupId: setup.id,
      valueNm: reading.newValueNm,
      verdict: reading.newVerdict,
    },
  });
}

interface Concerned extends Addressee {
  reading_id: number;
}

/** Whoever took, sent or signed one of the readings hears which of theirs have a successor. */
async function tellPeople(
  work: Work,
  context: CommandContext,
  bench: { id: number; name: string },
  setup: Setup,
  time: CorrectedTime,
  corrected: readonly CorrectedReading[],
): Promise<void> {
  if (!corrected.length) return;
  const concerned = await select<Concerned>(
    `SELECT DISTINCT p.id, p.name, p.email, r.id AS reading_id FROM readings r JOIN frames f ON f.id = r.frame_id
     JOIN reading_states st ON st.reading_id = r.id LEFT JOIN signatures sg ON sg.reading_id = r.id
     JOIN people p ON p.active AND p.id IN (f.uploaded_by, st.sent_by, sg.person_id) WHERE r.id IN (:ids)`,
    { ids: corrected.map(({ readingId }) => readingId) },
    work.transaction,
  );
  for (const id of new Set(concerned.map((person) => person.id))) {
    const own = concerned.filter((person) => person.id === id);
    const lines = corrected.filter(({ readingId }) => own.some((one) => one.reading_id === readingId));
    const until = time.until ? `to ${utc(time.until)}` : 'until now';
    const more = lines.length - MOST_LINES;
    await work.mail({
      to: own[0].email,
      subject: `${bench.name}: setup ${setup.number} corrects ${lines.length === 1 ? 'a reading' : `${lines.length} readings`} of yours`,
      text: mailText(
        own[0].name,
        [
          `${context.actor.name} approved setup ${setup.number} of ${bench.name}, which corrects the readings from ${utc(time.from)} ${until}. Why: ${setup.why}`,
          [...lines.slice(0, MOST_LINES).map(lineOf), ...(more > 0 ? [`and ${more} more`] : [])].join('\n'),
          'The earlier readings stay as they were signed. Successors of signed ones are in review.',
        ],
        `/benches/${bench.id}`,
      ),
    });
  }
}

const utc = (at: Date): string => `${at.toISOString().slice(0, 16).replace('T', ' ')} UTC`;

function lineOf(reading: CorrectedReading): string {
  const nm = (value: number | null) => (value === null ? 'no value' : `${formatNumber(value, 3)} nm`);
  const flips =
    reading.verdict === reading.newVerdict
      ? ''
      : `, ${VERDICT_WORDS[reading.verdict ?? 'none'].toLowerCase()} becomes ${VERDICT_WORDS[reading.newVerdict ?? 'none'].toLowerCase()}`;
  return `- ${reading.name}, reading ${reading.number}: ${nm(reading.valueNm)} becomes ${nm(reading.newValueNm)} (${reading.medium})${flips}`;
}
