import 'server-only';
import { db } from './db';
import { mailText } from './people-mail';
import type { ReadingFacts } from './reading-facts';
import type { Work } from './transaction';

/** What happened to somebody's reading. */
export interface SenderMail {
  subject: string;
  /** One open mail per cause. */
  cause: string;
  paragraphs: readonly string[];
}

/** Tells whoever sent the reading, or took its frame where nobody sent it; not a person who was switched off. */
export async function mailSender(work: Work, facts: ReadingFacts, mail: SenderMail): Promise<void> {
  const sender = await db().tables.people.findByPk(facts.sentBy ?? facts.uploadedBy, {
    transaction: work.transaction,
    rejectOnEmpty: true,
  });
  if (!sender.active) return;
  await work.mail({
    to: sender.email,
    subject: mail.subject,
    notice: true,
    cause: mail.cause,
    text: mailText(sender.name, mail.paragraphs, `/frames/${facts.frameId}`),
  });
}
