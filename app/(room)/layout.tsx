import type { ReactNode } from 'react';
import { TopBar } from '@/components/bar/top-bar';
import { listBenchChoices } from '@/lib/server/queries/benches';
import { listFakeMails } from '@/lib/server/queries/mail';
import { benchInUse, requireMe } from '@/lib/server/session';
import { chooseBench, signOutEverywhere } from './actions';

export default async function RoomLayout({ children }: { children: ReactNode }) {
  const me = await requireMe();
  const [benches, inUse, mails] = await Promise.all([listBenchChoices(), benchInUse(), listFakeMails()]);
  return (
    <>
      <a className="skip" href="#main">
        Skip to the page
      </a>
      <TopBar
        me={me}
        benches={benches}
        benchInUse={inUse}
        mailPage={mails !== null}
        chooseBench={chooseBench}
        signOutEverywhere={signOutEverywhere}
      />
      <main id="main" tabIndex={-1}>
        {children}
      </main>
    </>
  );
}
