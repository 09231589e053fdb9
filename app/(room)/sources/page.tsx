import type { Metadata } from 'next';
import { Quantity } from '@/components/figures/quantity';
import { Empty } from '@/components/states/empty';
import { can } from '@/lib/domain/permissions';
import { formatNumber, placesFor } from '@/lib/quantity/format';
import { listSources } from '@/lib/server/queries/lots';
import { requireMe } from '@/lib/server/session';
import { addSource } from '../lots/actions';
import { AddSource } from './_components/add-source';

export const metadata: Metadata = { title: 'Reference sources' };

export default async function Sources() {
  const me = await requireMe('charts.see');
  const list = await listSources();
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>Reference sources</h1>
          <span className="text-ink-2">by name</span>
        </div>
      </div>
      <p className="lead mb-4">
        A source with a published or certified wavelength. Frames of it tell whether a bench agrees; their
        accepted readings stand under Over time.
      </p>
      {can(me, 'sources.add') ? <AddSource addSource={addSource} /> : null}
      {list.length ? (
        <div className="plain-list" role="list">
          {list.map((source) => (
            <div key={source.id} className="list-row bench-card" role="listitem">
              <div className="name">{source.name}</div>
              <div className="sub">{source.note || 'no note'}</div>
              <div>
                <Quantity value={source.vacuumNm} expanded={2 * source.uNm} medium="vacuum" />
                <div className="sub text-right">
                  k = 2, u {formatNumber(source.uNm, placesFor(source.uNm))} nm
                </div>
              </div>
            </div>
          ))}
        </div>
      ) : (
        <Empty title="No reference source yet">With one, a bench can be checked between calibrations.</Empty>
      )}
    </div>
  );
}
