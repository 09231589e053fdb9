import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { Door } from '@/components/door/door';
import { anyPeople } from '@/lib/server/queries/people';
import { createFirstAdmin } from '../actions';
import { FirstAdminForm } from './_components/first-admin-form';

export const metadata: Metadata = { title: 'First admin' };

/** Open only while nobody is there: the first person to come makes the first admin. */
export default async function FirstAdmin() {
  if (await anyPeople()) redirect('/sign-in');
  return (
    <Door heading="First admin">
      <FirstAdminForm createFirstAdmin={createFirstAdmin} />
    </Door>
  );
}
