import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { READING_STEPS, readingMay } from '@/lib/domain/life-cycle';
import type { answerWithdrawalSchema, askWithdrawalSchema } from '@/lib/domain/withdrawal';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { requireOwnPassword } from '../password-proofs';
import { changedMeanwhile, findReading, readingText, stepReading } from '../reading-facts';
import { mailSender } from '../sender-mail';
import { inTransaction, type Work } from '../transaction';

/**
 * The first half of a withdrawal: a person asks for it, with a reason and their password. The reading stays accepted
 * until a second person has confirmed. One question at a time stands open on a reading.
 */
export async function askWithdrawal(
  context: CommandContext,
  wanted: z.output<typeof askWithdrawalSchema>,
): Promise<{ proposalId: number }> {
  const facts = await findReading(wanted.readingId);
  if (facts.version !== wanted.version) throw await changedMeanwhile('reading', wanted.readingId);
  if (!readingMay('withdraw', facts.status)) throw notAccepted();
  await requireOwnPassword(context, wanted.password);
  return inTransaction(context, async (work) => {
    await lockState(work, wanted.readingId);
    const now = await findReading(wanted.readingId, work.transaction);
    if (!readingMay('withdraw', now.status)) throw notAccepted();
    if (await openProposal(work, wanted.readingId)) {
      throw new AppError(
        'ALREADY_THERE',
        'Somebody has asked for this already; it waits for a second person.',
      );
    }
    const proposal = await db().tables.withdrawalProposals.create(
      {
        readingId: wanted.readingId,
        reason: wanted.reason,
        proposedBy: context.actor.id,
        proposedAt: context.at,
      },
      { transaction: work.transaction },
    );
    work.audit({
      action: 'reading.ask-withdrawal',
      subject: { kind: 'reading', id: now.readingId, text: readingText(now) },
      before: { status: now.status },
      after: { status: now.status, reason: wanted.reason },
    });
    return { proposalId: proposal.id };
  });
}

/**
 * The second half, never by who asked: confirmed, the reading steps to withdrawn, its numbers and its signature stay
 * untouched, and whoever sent it is told by mail. Declined, it stays accepted.
 */
export async function answerWithdrawal(
  context: CommandContext,
  wanted: z.output<typeof answerWithdrawalSchema>,
): Promise<{ readingId: number }> {
  const { tables } = db();
  const proposal = await tables.withdrawalProposals.findByPk(wanted.proposalId);
  if (!proposal) throw new AppError('NOT_FOUND', 'There is no such question.');
  const confirms = wanted.answer === 'confirmed';
  if (confirms && proposal.proposedBy === context.actor.id) {
    throw new AppError('NOT_ALLOWED', 'You asked for this withdrawal, so another person must confirm it.');
  }
  if (!confirms && !wanted.words) {
    throw new AppError('BAD_INPUT', 'Say why it stays.', { words: 'Say why it stays.' });
  }
  if (confirms) await requireOwnPassword(context, wanted.password);
  const { readingId } = proposal;
  return inTransaction(context, async (work) => {
    await lockState(work, readingId);
    const facts = await findReading(readingId, work.transaction);
    await keepAnswer(work, context, wanted);
    if (confirms) await stepReading(work, context.at, facts, facts.version, 'withdraw');
    work.audit({
      action: confirms ? 'reading.withdraw' : 'reading.decline-withdrawal',
      subject: { kind: 'reading', id: readingId, text: readingText(facts) },
      before: { status: facts.status },
      after: {
        status: confirms ? READING_STEPS.withdraw.to : facts.status,
        reason: proposal.reason,
        askedBy: proposal.proposedBy,
        words: wanted.words,
      },
    });
    if (confirms) {
      await mailSender(work, facts, {
        subject: `Withdrawn: ${readingText(facts)}`,
        cause: `withdrawn ${facts.readingId}`,
        paragraphs: [
          `${readingText(facts)} was accepted and has now been withdrawn, confirmed by ${context.actor.name}:`,
          proposal.reason,
          'What was measured and signed stays as it was. A new reading can take its place:',
        ],
      });
    }
    return { readingId };
  });
}

async function keepAnswer(
  work: Work,
  context: CommandContext,
  { proposalId, answer, words }: z.output<typeof answerWithdrawalSchema>,
): Promise<void> {
  try {
    await db().tables.withdrawalAnswers.create(
      { proposalId, answer, words, answeredBy: context.actor.id, answeredAt: context.at },
      { transaction: work.transaction },
    );
  } catch (problem) {
    if (!(problem instanceof UniqueConstraintError)) throw problem;
    throw new AppError('CHANGED_MEANWHILE', 'Somebody else has answered this already. Load the page again.');
  }
}

function notAccepted(): AppError {
  return new AppError('WRONG_STATE', 'Only an accepted reading can be withdrawn.');
}

/** Two who act on one reading at once wait for each other here. */
async function lockState(work: Work, readingId: number): Promise<void> {
  const { transaction } = work;
  await db().tables.readingStates.findByPk(readingId, {
    transaction,
    lock: transaction.LOCK.UPDATE,
    rejectOnEmpty: true,
  });
}

async function openProposal(work: Work, readingId: number): Promise<boolean> {
  const open = await select<{ id: number }>(
    `SELECT p.id FROM withdrawal_proposals p LEFT JOIN withdrawal_answers a ON a.proposal_id = p.id
     WHERE p.reading_id = :readingId AND a.id IS NULL LIMIT 1`,
    { readingId },
    work.transaction,
  );
  return open.length > 0;
}
