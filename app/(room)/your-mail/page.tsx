import type { Metadata } from 'next';
import { hasDailyMail } from '@/lib/server/queries/people';
import { requireMe } from '@/lib/server/session';
import { setMailTiming } from '../actions';
import { MailTiming } from './_components/mail-timing';

export const metadata: Metadata = { title: 'Your mail' };

/** When a person's notices reach them. */
export default async function YourMail() {
  const me = await requireMe();
  return (
    <div className="page pb-10">
      <div className="headline">
        <div className="l">
          <h1>Your mail</h1>
          <span className="text-ink-2">to {me.email}</span>
        </div>
      </div>
      <p className="lead mb-4">
        You get a mail when a reading of yours comes back or is withdrawn, and when somebody names you in a
        comment.
      </p>
      <MailTiming daily={await hasDailyMail(me.id)} setMailTiming={setMailTiming} />
    </div>
  );
}
