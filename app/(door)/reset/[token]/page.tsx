import type { Metadata } from 'next';
import { Door } from '@/components/door/door';
import { resetPassword } from '../../actions';
import { ResetForm } from './_components/reset-form';

export const metadata: Metadata = { title: 'New password', referrer: 'no-referrer' };

export default async function Reset({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  return (
    <Door heading="New password">
      <ResetForm token={token} resetPassword={resetPassword} />
    </Door>
  );
}
