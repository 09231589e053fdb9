import type { Metadata } from 'next';
import Link from 'next/link';
import { Mark } from '@/components/figures/marks';
import { buttonClass } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { ROLE_WORDS } from '@/lib/domain/roles';
import { requireMe } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Not open to you' };

export default async function NotAllowed() {
  const me = await requireMe();
  return (
    <div className="page py-8">
      <h1 className="only-heard">Not open to you</h1>
      <Notice
        stop
        mark={<Mark kind="check-stop" />}
        title="This page is not open to your roles"
        act={
          <Link className={buttonClass()} href="/">
            Go to your start
          </Link>
        }
      >
        You are signed in as {me.name},{' '}
        {me.roles.map((role) => ROLE_WORDS[role]).join(', ') || 'without a role'}. An admin can change roles
        under People.
      </Notice>
    </div>
  );
}
