import 'server-only';
import { mentionsIn } from '@/lib/domain/comment';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { pageAddress } from '../people-mail';
import { findReading, readingText } from '../reading-facts';
import { inTransaction } from '../transaction';

interface Named {
  id: number;
  name: string;
  email: string;
}

/** A word on a reading, whatever its state. Whoever is named in it with an @ gets one mail. */
export async function addComment(
  context: CommandContext,
  { readingId, words }: { readingId: number; words: string },
): Promise<{ commentId: number; mailed: string[] }> {
  const facts = await findReading(readingId);
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const comment = await tables.comments.create(
      { readingId, words, madeBy: context.actor.id, madeAt: context.at },
      { transaction },
    );
    const people = await select<Named>('SELECT id, name, email FROM people WHERE active', {}, transaction);
    const named = mentionsIn(words, people).filter(({ id }) => id !== context.actor.id);
    await tables.commentMentions.bulkCreate(
      named.map(({ id }) => ({ commentId: comment.id, personId: id })),
      { transaction },
    );
    for (const { name, email } of named) {
      await work.mail({
        to: email,
        subject: `${context.actor.name} names you: ${readingText(facts)}`,
        notice: true,
        text: [
          `Hello ${name},`,
          '',
          `${context.actor.name} wrote on ${readingText(facts)}:`,
          '',
          words,
          '',
          pageAddress(`/frames/${facts.frameId}?reading=${readingId}`),
        ].join('\n'),
      });
    }
    work.audit({
      action: 'reading.comment',
      subject: { kind: 'reading', id: readingId, text: readingText(facts) },
      before: null,
      after: { words, named: named.map(({ name }) => name) },
    });
    return { commentId: comment.id, mailed: named.map(({ name }) => name) };
  });
}
