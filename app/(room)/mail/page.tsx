import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { When } from '@/components/figures/when';
import { Empty } from '@/components/states/empty';
import { listFakeMails } from '@/lib/server/queries/mail';
import { requireMe } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Developer mail' };

/** For developers: what the local mail server has caught. With a real mail server this page does not exist. */
export default async function Mail() {
  await requireMe('benches.see');
  const mails = await listFakeMails();
  if (mails === null) notFound();
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>Developer mail</h1>
          <span className="text-ink-2">caught here, never sent on; newest first</span>
        </div>
      </div>
      {mails.length ? (
        <div className="plain-list">
          {mails.map((mail) => (
            <details key={mail.id} className="border-t border-line first:border-t-0">
              <summary className="grid min-h-[69px] grid-cols-[minmax(0,1fr)_minmax(0,1fr)_auto] items-center gap-6 max-[860px]:grid-cols-1">
                <span className="font-semibold">{mail.subject}</span>
                <span className="truncate text-small text-ink-2">{mail.to}</span>
                <span className="text-small text-ink-2">
                  <When at={mail.at} />
                </span>
              </summary>
              <pre className="pb-4 font-sans text-note whitespace-pre-wrap text-ink-2">{mail.text}</pre>
              {mail.links.map((link) => (
                <a
                  key={link}
                  className="link mb-2 inline-flex min-h-[44px] items-center break-all"
                  href={link}
                >
                  {link}
                </a>
              ))}
            </details>
          ))}
        </div>
      ) : (
        <Empty title="No mail yet">
          Mails about accounts and readings are caught here while the local mail server runs.
        </Empty>
      )}
    </div>
  );
}
