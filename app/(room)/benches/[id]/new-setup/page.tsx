import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound, redirect } from 'next/navigation';
import { LaserCautions } from '@/components/setups/laser-cautions';
import { buttonClass } from '@/components/ui/button';
import { findBench } from '@/lib/server/queries/benches';
import { listPlates } from '@/lib/server/queries/plates';
import { requireMe } from '@/lib/server/session';
import { addSetup } from '../../actions';
import { SetupForm } from './_components/setup-form';

interface Props {
  params: Promise<{ id: string }>;
}

export const metadata: Metadata = { title: 'New setup' };

export default async function NewSetup({ params }: Props) {
  await requireMe('setups.add');
  const id = Number((await params).id);
  if (!Number.isInteger(id) || id < 1) notFound();
  const bench = (await findBench(id)) ?? notFound();
  if (bench.waiting) redirect(`/benches/${id}`);
  const before = bench.inForce;
  const plates = await listPlates();
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>
            Setup {bench.lastNumber + 1} of {bench.name}
          </h1>
          <span className="text-ink-2">
            {before ? `starts from setup ${before.number}, in force` : 'the first'}
          </span>
        </div>
        <Link className={buttonClass('quiet')} href={`/benches/${id}`}>
          Back to the bench
        </Link>
      </div>
      <p className="lead mb-4">
        A setup comes into force when QA approves it. It is never changed, and readings made before it keep
        the values they were made with.
      </p>
      <SetupForm
        benchId={id}
        inForce={before}
        setups={bench.setups}
        lastNumber={bench.lastNumber}
        plates={plates}
        addSetup={addSetup}
      />
      <LaserCautions />
    </div>
  );
}
