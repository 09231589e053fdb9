import type { Metadata } from 'next';
import Form from 'next/form';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import { LotRisk } from '@/components/budget/lot-risk';
import { SaidVerdict } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { Empty } from '@/components/states/empty';
import { ListFoot } from '@/components/states/list-foot';
import { buttonClass } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { addressOf, idParam, textParam, type SearchParams } from '@/lib/client/address';
import { MEDIUM_WORDS, nominalText, RULE_WORDS } from '@/lib/client/words';
import { LIMITS } from '@/lib/domain/limits';
import { can } from '@/lib/domain/permissions';
import { VERDICTS } from '@/lib/domain/specification';
import { findLot } from '@/lib/server/queries/lots';
import { requireMe } from '@/lib/server/session';
import { setOutcome } from '../../readings/actions';
import { addUnits } from '../actions';
import { AddUnits } from './_components/add-units';
import { UnitLine } from './_components/unit-line';

interface Props {
  params: Promise<{ id: string }>;
  searchParams: Promise<SearchParams>;
}

export const metadata: Metadata = { title: 'Lot' };

export default async function Lot({ params, searchParams }: Props) {
  const me = await requireMe('lots.see');
  const id = Number((await params).id);
  if (!Number.isInteger(id) || id < 1) notFound();
  const query = await searchParams;
  const find = textParam(query, 'find').trim();
  const lot = (await findLot(id, { page: idParam(query, 'page') ?? 1, find })) ?? notFound();
  const pages = Math.max(1, Math.ceil(lot.totalRows / LIMITS.pageRows));
  return (
    <div className="page">
      <div className="headline">
        <div className="l">
          <h1>Lot {lot.number}</h1>
          <span className="text-ink-2">
            {nominalText(lot.specification)}, {RULE_WORDS[lot.specification.rule]}
            {lot.supplier ? ` · ${lot.supplier}` : ''} · opened <When at={lot.openedAt} dayOnly />
          </span>
        </div>
        <div className="acts">
          <Form action={`/lots/${id}`} role="search" className="w-[190px]">
            <Field
              label="Serial"
              labelHidden
              name="find"
              type="search"
              placeholder="Serial"
              defaultValue={find}
            />
          </Form>
          <Link className={buttonClass()} href={`/frames?lot=${id}&days=all&bench=all`}>
            Its frames
          </Link>
        </div>
      </div>
      <div className="tally" role="group" aria-label="Units by verdict">
        {[...VERDICTS, null].map((verdict) => (
          <span key={verdict ?? 'none'}>
            <SaidVerdict verdict={verdict} />
            <b>{lot.counts[verdict ?? 'none']}</b>
          </span>
        ))}
      </div>
      {lot.rows.length ? <LotRisk risk={lot.risk} medium={MEDIUM_WORDS[lot.specification.medium]} /> : null}
      {can(me, 'units.add') && !lot.closedAt ? <AddUnits lotId={id} addUnits={addUnits} /> : null}
      {lot.rows.length ? (
        <>
          <div className="unit-row unit-heads" aria-hidden="true">
            <span>Serial</span>
            <span>
              Wavelength <span className="sym">λ</span>, k = 2
            </span>
            <span>Against tolerance</span>
            <span className="pl-2.5">Verdict</span>
            <span>Outcome of the unit</span>
          </div>
          <div
            className="plain-list"
            style={{ borderBottom: 0, marginTop: 0 }}
            role="list"
            aria-label="Units, by serial"
          >
            {lot.rows.map((unit) => (
              <UnitLine
                key={unit.id}
                unit={unit}
                specification={lot.specification}
                lotId={id}
                mayOutcome={can(me, 'outcomes.set')}
                setOutcome={setOutcome}
              />
            ))}
          </div>
          <ListFoot
            page={lot.page}
            pages={pages}
            total={lot.totalRows}
            perPage={LIMITS.pageRows}
            href={(page) => addressOf(`/lots/${id}`, { find, page })}
          />
        </>
      ) : (
        <div className="mt-4">
          <Empty
            searched={find !== ''}
            title={find ? `No unit matches “${find}”` : 'This lot has no units yet'}
          >
            {find
              ? 'Check the serial.'
              : 'Add the serials of the units; frames find their unit by the serial in the file name.'}
          </Empty>
        </div>
      )}
    </div>
  );
}
