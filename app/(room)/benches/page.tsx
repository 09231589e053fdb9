import type { Metadata } from 'next';
import Link from 'next/link';
import { SaidCheck } from '@/components/figures/marks';
import { Empty } from '@/components/states/empty';
import { can } from '@/lib/domain/permissions';
import { listBenchChoices } from '@/lib/server/queries/benches';
import { requireMe } from '@/lib/server/session';
import { addBench } from './actions';
import { AddBench } from './_components/add-bench';

export const metadata: Metadata = { title: 'Benches' };

export default async function Benches() {
  const me = await requireMe('benches.see');
  const benches = await listBenchChoices();
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>Benches</h1>
          <span className="text-ink-2">fit for use today?</span>
        </div>
      </div>
      {can(me, 'benches.add') ? <AddBench addBench={addBench} /> : null}
      {benches.length ? (
        <div className="plain-list">
          {benches.map((bench) => (
            <Link key={bench.id} className="list-row bench-card" href={`/benches/${bench.id}`}>
              <div className="name">{bench.name}</div>
              <div className="text-ink-2">
                {bench.setupNumber === null ? '' : `setup ${bench.setupNumber} in force, `}
                {bench.fitness.text}
                {bench.waitingNumber === null ? null : <b>. Setup {bench.waitingNumber} waits for QA</b>}
              </div>
              <SaidCheck word={bench.fitness.word} />
            </Link>
          ))}
        </div>
      ) : (
        <div className="mt-4">
          <Empty title="No bench yet">
            A bench is a source mount, a slit plate, a distance and a camera; its first setup states their
            values.
          </Empty>
        </div>
      )}
    </div>
  );
}
