import 'server-only';
import { randomUUID } from 'node:crypto';
import type { Transaction } from 'sequelize';
import { change, db, select } from './db';
import { describe, log } from './log';
import { sendMail } from './mail';

/** A mail claimed longer ago than this was left by a crash. */
const CLAIM_SECONDS = 120;
const WAIT_SECONDS = [10, 60, 300, 1800, 7200];
const IDLE_MS = 15_000;

const held = globalThis as {
  midfringeOutbox?: { running: boolean; again: boolean; timer: NodeJS.Timeout | null };
};

/** Started by the server process only; elsewhere mails wait in their table until it runs. */
export function startOutbox(): void {
  held.midfringeOutbox ??= { running: false, again: false, timer: null };
  nudgeOutbox();
}

export function nudgeOutbox(): void {
  const state = held.midfringeOutbox;
  if (!state) return;
  if (state.running) {
    state.again = true;
    return;
  }
  if (state.timer) clearTimeout(state.timer);
  state.running = true;
  sendDueMails(new Date())
    .catch((problem: unknown) => log().error({ problem: describe(problem) }, 'the outbox could not be read'))
    .finally(() => {
      state.running = false;
      state.timer = setTimeout(nudgeOutbox, state.again ? 0 : IDLE_MS);
      state.timer.unref();
      state.again = false;
    });
}

export interface NewMail {
  to: string;
  subject: string;
  text: string;
  /** A notice may wait for the person's daily mail; without it the mail goes at once. */
  notice?: boolean;
  /** While a mail of this cause is unsent, the same address gets no second one. */
  cause?: string;
}

/** Hour of the day (UTC) at which the daily mails go out. */
const DIGEST_HOUR = 5;

/** The next moment daily mails go out after this one. */
export function nextDigestAt(now: Date): Date {
  const at = new Date(now);
  at.setUTCHours(DIGEST_HOUR, 0, 0, 0);
  if (at <= now) at.setUTCDate(at.getUTCDate() + 1);
  return at;
}

/** Puts a mail in the outbox, in the transaction of what it tells. */
export async function postMail(
  { to, subject, text, notice = false, cause }: NewMail,
  at: Date,
  transaction: Transaction,
): Promise<void> {
  const { tables } = db();
  if (cause !== undefined) {
    const open = await tables.outbox.findOne({ where: { cause, toAddress: to, sentAt: null }, transaction });
    if (open) return;
  }
  const person = notice ? await tables.people.findOne({ where: { email: to }, transaction }) : null;
  const digest = person?.mailDaily ?? false;
  await tables.outbox.create(
    {
      toAddress: to,
      subject,
      bodyText: text,
      createdAt: at,
      nextTryAt: digest ? nextDigestAt(at) : at,
      digest,
      cause: cause ?? null,
    },
    { transaction },
  );
}

interface DueMail {
  id: number;
  tries: number;
  to_address: string;
  subject: string;
  body_text: string;
}

/**
 * Sends every mail that is due and answers how many went out. Each is claimed first by one conditional update; those
 * that wait for a person's daily mail are claimed together and go as one.
 */
export async function sendDueMails(now: Date): Promise<number> {
  const stale = new Date(now.getTime() - CLAIM_SECONDS * 1000);
  const free = 'sent_at IS NULL AND next_try_at <= :now AND (claimed_at IS NULL OR claimed_at < :stale)';
  let sent = 0;
  for (;;) {
    const [first] = await select<{ id: number; to_address: string; digest: number }>(
      `SELECT id, to_address, digest FROM outbox WHERE ${free} ORDER BY id LIMIT 1`,
      { now, stale },
    );
    if (!first) return sent;
    const mark = randomUUID();
    const which = first.digest ? 'digest AND to_address = :to' : 'id = :id';
    await change(
      `UPDATE outbox SET claimed_at = :now, claimed_by = :mark, tries = tries + 1 WHERE ${which} AND ${free}
       ORDER BY id LIMIT ${MOST_IN_DIGEST}`,
      { now, stale, mark, id: first.id, to: first.to_address },
    );
    const claimed = await select<DueMail>(
      'SELECT id, tries, to_address, subject, body_text FROM outbox WHERE claimed_by = :mark ORDER BY id',
      { mark },
    );
    if (claimed.length && (await deliver(claimed, now))) sent += 1;
  }
}

const MOST_IN_DIGEST = 100;

/** Several notices as one mail, each under its own subject. */
function together(mails: readonly DueMail[]): { subject: string; text: string } {
  if (mails.length === 1) return { subject: mails[0].subject, text: mails[0].body_text };
  const parts = mails.map(
    ({ subject, body_text: text }) => `${subject}\n${'-'.repeat(subject.length)}\n\n${text}`,
  );
  return { subject: `${mails.length} notices of the day`, text: parts.join('\n\n\n') };
}

async function deliver(mails: readonly DueMail[], now: Date): Promise<boolean> {
  const [{ id: first, to_address: to, tries }] = mails;
  const ids = mails.map(({ id }) => id);
  try {
    await sendMail({ id: `outbox-${first}`, to, ...together(mails) });
  } catch (problem) {
    const wait = WAIT_SECONDS[Math.min(tries - 1, WAIT_SECONDS.length - 1)];
    const { message } = describe(problem);
    log().warn({ mails: ids, tries, message }, 'a mail could not be sent; it is tried again');
    await change(
      'UPDATE outbox SET claimed_at = NULL, next_try_at = :next, last_error = :error WHERE id IN (:ids)',
      { ids, next: new Date(now.getTime() + wait * 1000), error: message.slice(0, 500) },
    );
    return false;
  }
  await change('UPDATE outbox SET sent_at = :now, last_error = NULL WHERE id IN (:ids)', { ids, now });
  return true;
}
