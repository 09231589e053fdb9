import type { Metadata } from 'next';
import Form from 'next/form';
import Link from 'next/link';
import { When } from '@/components/figures/when';
import { Empty } from '@/components/states/empty';
import { ListFoot } from '@/components/states/list-foot';
import { buttonClass } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { addressOf, idParam, textParam, type SearchParams } from '@/lib/client/address';
import { nominalText } from '@/lib/client/words';
import { LIMITS } from '@/lib/domain/limits';
import { can } from '@/lib/domain/permissions';
import type { LotRow } from '@/lib/domain/views';
import { listLots, listSpecifications } from '@/lib/server/queries/lots';
import { requireMe } from '@/lib/server/session';
import { openLot } from '../actions';
import { OpenLot } from '../_components/open-lot';

export const metadata: Metadata = { title: 'Lots' };

export default async function Lots({ searchParams }: { searchParams: Promise<SearchParams> }) {
  const me = await requireMe('lots.see');
  const params = await searchParams;
  const find = textParam(params, 'find').trim();
  const [list, specifications] = await Promise.all([
    listLots({ find, page: idParam(params, 'page') ?? 1 }),
    listSpecifications(),
  ]);
  return (
    <div className="page">
      <div className="headline">
        <div className="l">
          <h1>Lots</h1>
          <span className="text-ink-2">newest first</span>
        </div>
        <div className="acts">
          <Form action="/lots" role="search" className="w-[220px]">
            <Field
              label="Number, supplier or specification"
              labelHidden
              name="find"
              type="search"
              placeholder="Number or supplier"
              defaultValue={find}
            />
          </Form>
        </div>
      </div>
      {can(me, 'lots.open') ? (
        <OpenLot specifications={specifications.filter((s) => !s.retired)} openLot={openLot} />
      ) : null}
      {list.rows.length ? (
        <>
          <div className="plain-list" style={{ borderBottom: 0 }}>
            {list.rows.map((lot) => (
              <Row key={lot.id} lot={lot} />
            ))}
          </div>
          <ListFoot
            page={list.page}
            pages={list.pages}
            total={list.total}
            perPage={LIMITS.pageRows}
            href={(page) => addressOf('/lots', { find, page })}
          />
        </>
      ) : (
        <div className="mt-4">
          <Empty
            searched={find !== ''}
            title={find ? `No lot matches “${find}”` : 'No lot is open yet'}
            acts={
              find ? (
                <Link className={buttonClass()} href="/lots">
                  Show all lots
                </Link>
              ) : null
            }
          >
            {find
              ? 'Check the number, or look for the supplier.'
              : 'A lot holds units with serials, made to one specification.'}
          </Empty>
        </div>
      )}
    </div>
  );
}

function Row({ lot }: { lot: LotRow }) {
  return (
    <Link className="list-row lot-row" href={`/lots/${lot.id}`}>
      <div>
        <div className="name">Lot {lot.number}</div>
        <div className="sub">{lot.supplier || 'no supplier stated'}</div>
      </div>
      <div>
        <div>{lot.specification.name}</div>
        <div className="sub">{nominalText(lot.specification)}</div>
      </div>
      <div>
        <div className="sub">
          {lot.unitsTaken} of {lot.units} units taken
        </div>
        <span className="share-bar" aria-hidden="true">
          <i style={{ width: `${lot.units ? (100 * lot.unitsTaken) / lot.units : 0}%` }} />
        </span>
      </div>
      <div className="sub">
        {lot.closedAt ? 'closed' : 'opened'} <When at={lot.closedAt ?? lot.openedAt} dayOnly />,{' '}
        {lot.openedBy.name}
      </div>
    </Link>
  );
}
