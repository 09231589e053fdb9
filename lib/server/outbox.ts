import 'server-only';
import { change, select } from './db';
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

interface DueMail {
  id: number;
  tries: number;
  to_address: string;
  subject: string;
  body_text: string;
}

/** Sends every mail that is due and answers how many went out. Each is claimed by a conditional update first. */
export async function sendDueMails(now: Date): Promise<number> {
  const stale = new Date(now.getTime() - CLAIM_SECONDS * 1000);
  let sent = 0;
  for (;;) {
    const [mail] = await select<DueMail>(
      `SELECT id, tries, to_address, subject, body_text FROM outbox WHERE sent_at IS NULL AND next_try_at <= :now
       AND (claimed_at IS NULL OR claimed_at < :stale) ORDER BY id LIMIT 1`,
      { now, stale },
    );
    if (!mail) return sent;
    const claimed = await change(
      `UPDATE outbox SET claimed_at = :now, tries = tries + 1
       WHERE id = :id AND sent_at IS NULL AND (claimed_at IS NULL OR claimed_at < :stale)`,
      { now, stale, id: mail.id },
    );
    if (claimed === 1 && (await deliver(mail, now))) sent += 1;
  }
}

async function deliver(mail: DueMail, now: Date): Promise<boolean> {
  try {
    await sendMail({
      id: `outbox-${mail.id}`,
      to: mail.to_address,
      subject: mail.subject,
      text: mail.body_text,
    });
  } catch (problem) {
    const wait = WAIT_SECONDS[Math.min(mail.tries, WAIT_SECONDS.length - 1)];
    const { message } = describe(problem);
    log().warn(
      { mail: mail.id, tries: mail.tries + 1, message },
      'a mail could not be sent; it is tried again',
    );
    await change(
      'UPDATE outbox SET claimed_at = NULL, next_try_at = :next, last_error = :error WHERE id = :id',
      {
        id: mail.id,
        next: new Date(now.getTime() + wait * 1000),
        error: message.slice(0, 500),
      },
    );
    return false;
  }
  await change('UPDATE outbox SET sent_at = :now, last_error = NULL WHERE id = :id', { id: mail.id, now });
  return true;
}
