import type { Metadata } from 'next';
import { Door } from '@/components/door/door';
import { askReset } from '../actions';
import { ForgottenForm } from './_components/forgotten-form';

export const metadata: Metadata = { title: 'Forgotten password' };

export default function Forgotten() {
  return (
    <Door heading="Forgotten password">
      <ForgottenForm askReset={askReset} />
    </Door>
  );
}
