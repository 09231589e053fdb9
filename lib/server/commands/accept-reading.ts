import 'server-only';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { ReadingResult } from '@/lib/domain/reading-result';
import type { sheetSchema } from '@/lib/domain/review-schemas';
import type { acceptSchema } from '@/lib/domain/schemas';
import { whyNotAcceptable } from '../acceptability';
import type { CommandContext } from '../context';
import { db } from '../db';
import {
  changedMeanwhile,
  findReading,
  readingText,
  stepReading,
  whyBarred,
  type ReadingFacts,
} from '../reading-facts';
import { recordReferenceCheck, requireBenchOpen } from '../reference-checks';
import { requireOwnPassword } from '../password-proofs';
import { requireMoveReason } from '../move-reasons';
import { inTransaction } from '../transaction';

type Acceptance = Omit<z.output<typeof acceptSchema>, 'moveReason'> & { moveReason?: string };

export const SIGNATURE_MEANING = 'I have looked at this fit and accept it.';

/**
 * A reviewer signs a reading. Refused to whoever had a hand in it before review, while a stop stands on the
 * wavelength, while a look has no word, while a moved value has no reason, and while the bench's records speak against it.
 * Of two at once exactly one wins.
 */
export async function acceptReading(
  context: CommandContext,
  wanted: Acceptance,
): Promise<{ readingId: number; version: number }> {
  const facts = await findReading(wanted.readingId);
  const barred = await whyBarred(context.actor.id, facts);
  if (barred) throw new AppError('NOT_ALLOWED', barred);
  if (facts.version !== wanted.version) throw await changedMeanwhile('reading', wanted.readingId);
  await requireAcceptable(context, facts, wanted.answers);
  return sign(context, wanted, await requireOwnPassword(context, wanted.password));
}

/** The signature itself, once the person has shown who they are; everything is looked at again under the lock. */
async function sign(
  context: CommandContext,
  wanted: Acceptance,
  passwordAt: Date,
): Promise<{ readingId: number; version: number }> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const now = await findReading(wanted.readingId, transaction);
    const barredNow = await whyBarred(context.actor.id, now, transaction);
    if (barredNow) throw new AppError('NOT_ALLOWED', barredNow);
    await requireBenchOpen(work, now.readingId);
    await stepReading(work, context.at, now, wanted.version, 'accept', { accepted_at: context.at });
    await tables.signatures.create(
      {
        readingId: now.readingId,
        personId: context.actor.id,
        personName: context.actor.name,
        role: 'reviewer',
        meaning: SIGNATURE_MEANING,
        signedAt: context.at,
        digest: now.digest,
        passwordAt,
      },
      { transaction },
    );
    const moved = await requireMoveReason(work, context, now, wanted.moveReason);
    await tables.lookAnswers.bulkCreate(
      wanted.answers.map(({ check, answer, reason }) => ({
        readingId: now.readingId,
        checkName: check,
        answer,
        reason,
        answeredBy: context.actor.id,
        answeredAt: context.at,
      })),
      { transaction },
    );
    work.audit({
      action: 'reading.accept',
      subject: { kind: 'reading', id: now.readingId, text: readingText(now) },
      before: { status: now.status },
      after: {
        status: READING_STEPS.accept.to,
        digest: now.digest,
        passwordAt,
        answers: wanted.answers,
        ...moved,
      },
    });
    await recordReferenceCheck(work, context, now.readingId);
    return { readingId: now.readingId, version: wanted.version + 1 };
  });
}

/** Of one reading of a contact sheet: accepted, or why not. */
export interface SheetRefusal {
  readingId: number;
  name: string;
  message: string;
}

/**
 * Signs many clean readings, each in a transaction of its own with a signature of its own. Clean is a value within
 * its limits without a look or a stop. What cannot be signed is told by name and holds up none of the others.
 */
export async function acceptSheet(
  context: CommandContext,
  { readings, password }: z.output<typeof sheetSchema>,
): Promise<{ accepted: number; refused: SheetRefusal[] }> {
  const passwordAt = await requireOwnPassword(context, password);
  const refused: SheetRefusal[] = [];
  let accepted = 0;
  for (const { readingId, version } of readings) {
    let name = `Reading ${readingId}`;
    try {
      const facts = await findReading(readingId);
      name = readingText(facts);
      const barred = await whyBarred(context.actor.id, facts);
      if (barred) throw new AppError('NOT_ALLOWED', barred);
      if (facts.version !== version) throw await changedMeanwhile('reading', readingId);
      await requireAcceptable(context, facts, []);
      if (facts.verdict !== 'within')
        throw new AppError('WRONG_STATE', 'It is not within its limits, so it is looked at on its own page.');
      await sign(context, { readingId, version, password, answers: [] }, passwordAt);
      accepted += 1;
    } catch (problem) {
      if (!(problem instanceof AppError) || problem.status >= 500) throw problem;
      refused.push({ readingId, name, message: problem.message });
    }
  }
  return { accepted, refused };
}

async function requireAcceptable(
  context: CommandContext,
  facts: ReadingFacts,
  answers: Acceptance['answers'],
): Promise<void> {
  const { tables } = db();
  const because = await whyNotAcceptable(facts, context.at);
  if (because) throw new AppError('WRONG_STATE', because);
  if (facts.valueNm === null)
    throw new AppError('WRONG_STATE', 'This reading has no wavelength, so there is nothing to accept.');
  const row = await tables.readingResults.findByPk(facts.readingId, { rejectOnEmpty: true });
  const { findings } = JSON.parse(row.resultJson) as ReadingResult;
  const stop = findings.find((finding) => finding.word === 'stop');
  if (stop)
    throw new AppError(
      'WRONG_STATE',
      `A stop stands on the wavelength: ${stop.message} Return the reading, or change its region.`,
    );
  const answered = new Set(answers.map((answer) => answer.check));
  const open = findings.filter((finding) => finding.word === 'look' && !answered.has(finding.check));
  if (open.length) {
    throw new AppError(
      'BAD_INPUT',
      `Say a word on: ${open.map((finding) => finding.message).join(' ')}`,
      Object.fromEntries(open.map((finding) => [finding.check, 'This finding needs your word.'])),
    );
  }
  const known = new Set(findings.map((finding) => finding.check));
  if (answers.length !== answered.size || answers.some((answer) => !known.has(answer.check))) {
    throw new AppError('BAD_INPUT', 'An answer names a finding this reading does not have, or one twice.');
  }
}
