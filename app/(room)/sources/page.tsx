import type { Metadata } from 'next';
import { SaidCheck } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { CertificateName } from '@/components/setups/certificate-file';
import { Empty } from '@/components/states/empty';
import { dueOf } from '@/lib/domain/due';
import { can } from '@/lib/domain/permissions';
import { SOURCE_KIND_WORDS } from '@/lib/domain/source';
import type { SourceView } from '@/lib/domain/views';
import { formatNumber, placesFor } from '@/lib/quantity/format';
import { listSources } from '@/lib/server/queries/sources';
import { requireMe } from '@/lib/server/session';
import { addSource, renewSource } from './actions';
import { AddSource } from './_components/add-source';
import { RenewSource } from './_components/renew-source';

export const metadata: Metadata = { title: 'Sources' };

export default async function Sources() {
  const me = await requireMe('charts.see');
  const list = await listSources();
  const mayChange = can(me, 'sources.add');
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>Sources</h1>
          <span className="text-ink-2">by name</span>
        </div>
      </div>
      <p className="lead mb-4">
        A source of known wavelength. Frames of a reference tell whether a bench agrees; their accepted
        readings stand under Over time.
      </p>
      {mayChange ? <AddSource addSource={addSource} /> : null}
      {list.length ? (
        <div className="plain-list" role="list">
          {list.map((source) => (
            <div key={source.id} role="listitem">
              <SourceLine source={source} />
              {mayChange ? (
                <div className="pb-3">
                  <RenewSource source={source} renewSource={renewSource} />
                </div>
              ) : null}
            </div>
          ))}
        </div>
      ) : (
        <Empty title="No source yet">With one, a bench can be checked between calibrations.</Empty>
      )}
    </div>
  );
}

function SourceLine({ source }: { source: SourceView }) {
  const due = dueOf(source.due, new Date());
  return (
    <div className="list-row source-row">
      <div>
        <div className="name">{source.name}</div>
        <div className="sub">
          {SOURCE_KIND_WORDS[source.kind]}
          {source.isReference ? ', reference' : ', no reference'}
        </div>
      </div>
      <div className="sub">
        {source.certificate || 'No certificate is named'}
        {source.revision > 1 ? `, revision ${source.revision}` : ''}.{' '}
        {source.file ? <CertificateName file={source.file} /> : null} {source.note}
      </div>
      <SaidCheck word={due.word}>{due.text}</SaidCheck>
      <div className="text-right max-[860px]:text-left">
        <Quantity value={source.vacuumNm} expanded={2 * source.uNm} medium="vacuum" />
        <div className="sub">k = 2, u {formatNumber(source.uNm, placesFor(source.uNm))} nm</div>
      </div>
    </div>
  );
}
