import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import { RETURN_WORDS, type ReturnReason } from '@/lib/domain/views';
import type { CommandContext } from '../context';
import { db } from '../db';
import { findReading, readingText, stepReading } from '../reading-facts';
import { mailSender } from '../sender-mail';
import { inTransaction } from '../transaction';

/** Gives a reading back to the technician, with the reason, and mails it to whoever sent it. */
export async function returnReading(
  context: CommandContext,
  {
    readingId,
    version,
    reason,
    words,
  }: { readingId: number; version: number; reason: ReturnReason; words: string },
): Promise<{ readingId: number; version: number }> {
  if (reason === 'another' && !words) {
    throw new AppError('BAD_INPUT', 'Say the reason in words.', { words: 'Say the reason in words.' });
  }
  return inTransaction(context, async (work) => {
    const facts = await findReading(readingId, work.transaction);
    await stepReading(work, context.at, facts, version, 'return');
    await db().tables.returns.create(
      { readingId, reason, words, returnedBy: context.actor.id, returnedAt: context.at },
      { transaction: work.transaction },
    );
    work.audit({
      action: 'reading.return',
      subject: { kind: 'reading', id: readingId, text: readingText(facts) },
      before: { status: facts.status },
      after: { status: READING_STEPS.return.to, reason, words },
    });
    await mailSender(work, facts, {
      subject: `Returned: ${readingText(facts)}`,
      cause: `returned ${facts.readingId}`,
      paragraphs: [
        `${context.actor.name} returned ${readingText(facts)}:`,
        `${RETURN_WORDS[reason]}.${words ? ` ${words}` : ''}`,
      ],
    });
    return { readingId, version: version + 1 };
  });
}
