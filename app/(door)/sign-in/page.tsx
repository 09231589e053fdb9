import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { Door } from '@/components/door/door';
import { textParam, type SearchParams } from '@/lib/client/address';
import { anyPeople } from '@/lib/server/queries/people';
import { getMe } from '@/lib/server/session';
import { safeNext } from './_components/safe-next';
import { SignInForm } from './_components/sign-in-form';

export const metadata: Metadata = { title: 'Sign in' };

export default async function SignIn({ searchParams }: { searchParams: Promise<SearchParams> }) {
  const params = await searchParams;
  const next = safeNext(textParam(params, 'next') || textParam(params, 'callbackUrl'));
  if (await getMe()) redirect(next);
  if (!(await anyPeople())) redirect('/first-admin');
  return (
    <Door heading="Sign in">
      <SignInForm next={next} reset={textParam(params, 'reset') === '1'} asked={next !== '/'} />
    </Door>
  );
}
