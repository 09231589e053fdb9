import type { Metadata } from 'next';
import Link from 'next/link';
import { Empty } from '@/components/states/empty';
import { buttonClass } from '@/components/ui/button';
import { can } from '@/lib/domain/permissions';
import { listPlates } from '@/lib/server/queries/plates';
import { requireMe } from '@/lib/server/session';
import { addPlate, putPlateBack, renewPlate, takePlateOff } from '../actions';
import { AddPlate, RenewPlate } from './_components/plate-form';
import { MovePlate } from './_components/move-plate';
import { PlateLine } from './_components/plate-line';

export const metadata: Metadata = { title: 'Slit plates' };

export default async function Plates() {
  const me = await requireMe('plates.see');
  const plates = await listPlates();
  const mayChange = can(me, 'plates.change');
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>Slit plates</h1>
          <span className="text-ink-2">by name</span>
        </div>
        <Link className={buttonClass('quiet')} href="/benches">
          Back to the benches
        </Link>
      </div>
      <p className="lead mb-4">
        A plate comes onto a bench with the setup that picks it, and is on one bench at a time. A new
        certificate is entered beside the older ones; setups keep the values they took.
      </p>
      {mayChange ? <AddPlate addPlate={addPlate} /> : null}
      {plates.length ? (
        <div className="plain-list" role="list">
          {plates.map((plate) => (
            <div key={plate.id} className="plate" role="listitem">
              <PlateLine plate={plate} />
              {mayChange ? (
                <div className="flex flex-wrap gap-3 pb-3">
                  <RenewPlate plate={plate} renewPlate={renewPlate} />
                  <MovePlate plate={plate} takePlateOff={takePlateOff} putPlateBack={putPlateBack} />
                </div>
              ) : null}
            </div>
          ))}
        </div>
      ) : (
        <Empty title="No slit plate yet">
          A plate states how far its slits are apart and how wide they are; a setup picks one.
        </Empty>
      )}
    </div>
  );
}
