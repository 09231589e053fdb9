import { redirect } from 'next/navigation';
import { homeOf } from '@/components/bar/places';
import { requireMe } from '@/lib/server/session';

/** Each role starts where its work is. */
export default async function Home() {
  redirect(homeOf(await requireMe()));
}
