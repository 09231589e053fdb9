import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { CommandContext } from '../context';
import { change } from '../db';
import { findReading, readingText, stepReading } from '../reading-facts';
import { inTransaction } from '../transaction';

export interface ToSend {
  readingId: number;
  version: number;
  note: string;
}

/** Sends one reading to review. */
export async function sendReading(
  context: CommandContext,
  { readingId, version, note }: ToSend,
): Promise<null> {
  return inTransaction(context, async (work) => {
    const facts = await findReading(readingId, work.transaction);
    await stepReading(work, context.at, facts, version, 'send', {
      sent_by: context.actor.id,
      sent_at: context.at,
      note,
    });
    await change(
      'UPDATE frames SET in_intake = FALSE WHERE id = :frameId',
      { frameId: facts.frameId },
      work.transaction,
    );
    work.audit({
      action: 'reading.send',
      subject: { kind: 'reading', id: readingId, text: readingText(facts) },
      before: { status: facts.status },
      after: { status: READING_STEPS.send.to, note },
    });
    return null;
  });
}

/** Sends many; what cannot be sent is said per reading and does not hold up the others. */
export async function sendReadings(
  context: CommandContext,
  readings: readonly ToSend[],
): Promise<{ sent: number; problems: string[] }> {
  let sent = 0;
  const problems: string[] = [];
  for (const reading of readings) {
    try {
      await sendReading(context, reading);
      sent += 1;
    } catch (problem) {
      if (!(problem instanceof AppError) || problem.status >= 500) throw problem;
      problems.push(`Reading ${reading.readingId}: ${problem.message}`);
    }
  }
  return { sent, problems };
}
