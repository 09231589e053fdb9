import 'server-only';
import type { Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import { moveFrom, moveNeedsReason, type FirstValue } from '@/lib/domain/move';
import { formatNumber, formatSigned } from '@/lib/quantity/format';
import type { CommandContext } from './context';
import { db, select } from './db';
import type { ReadingFacts } from './reading-facts';
import type { Work } from './transaction';

/** What the first fit of a frame that gave a value said. */
export async function firstValueOf(frameId: number, transaction?: Transaction): Promise<FirstValue | null> {
  const [first] = await select<FirstValue>(
    `SELECT value_nm AS valueNm, u_nm AS uNm FROM readings WHERE frame_id = :frameId AND value_nm IS NOT NULL
     ORDER BY number LIMIT 1`,
    { frameId },
    transaction,
  );
  return first ?? null;
}

export async function keepMoveReason(
  work: Work,
  context: CommandContext,
  readingId: number,
  words: string,
): Promise<void> {
  await db().tables.moveReasons.create(
    { readingId, words, givenBy: context.actor.id, givenAt: context.at },
    { transaction: work.transaction },
  );
}

/**
 * A value that was moved by more than 0.3 u is signed with a reason: one given when the change was kept, or the one
 * given now. Throws BAD_INPUT without either. Answers what the log is to say of it.
 */
export async function requireMoveReason(
  work: Work,
  context: CommandContext,
  facts: ReadingFacts,
  given = '',
): Promise<{ movedNm?: number; moveReason?: string }> {
  const move = moveFrom(await firstValueOf(facts.frameId, work.transaction), facts.valueNm);
  if (!move || !moveNeedsReason(move)) return {};
  const kept = await db().tables.moveReasons.findOne({
    where: { readingId: facts.readingId },
    transaction: work.transaction,
  });
  if (!kept && !given) {
    const far = move.inU === null ? '' : `, ${formatNumber(Math.abs(move.inU), 1)} u`;
    throw new AppError(
      'BAD_INPUT',
      `The region moved the value by ${formatSigned(move.nm, 3)} nm${far} from the first fit. Say why, then accept.`,
      { moveReason: 'Say why the value was moved.' },
    );
  }
  if (!kept) await keepMoveReason(work, context, facts.readingId, given);
  return { movedNm: move.nm, moveReason: kept?.words ?? given };
}
