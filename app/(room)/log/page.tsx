import type { Metadata } from 'next';
import Form from 'next/form';
import Link from 'next/link';
import { When } from '@/components/figures/when';
import { Empty } from '@/components/states/empty';
import { ListFoot } from '@/components/states/list-foot';
import { buttonClass } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { addressOf, idParam, textParam, type SearchParams } from '@/lib/client/address';
import { LIMITS } from '@/lib/domain/limits';
import type { LogRow } from '@/lib/domain/views';
import { listLog } from '@/lib/server/queries/log';
import { requireMe } from '@/lib/server/session';
import { ActionSelect } from './_components/action-select';
import { actionWords } from './_components/action-words';
import { Change } from './_components/change';

export const metadata: Metadata = { title: 'Log' };

export default async function Log({ searchParams }: { searchParams: Promise<SearchParams> }) {
  await requireMe('log.see');
  const params = await searchParams;
  const find = textParam(params, 'find').trim();
  const action = textParam(params, 'action');
  const log = await listLog({ page: idParam(params, 'page') ?? 1, find, action });
  return (
    <div className="page">
      <div className="headline">
        <div className="l">
          <h1>Log</h1>
          <span className="text-ink-2">newest first; nothing in it can be changed</span>
        </div>
        <Form action="/log" role="search" className="acts">
          <div className="w-[190px]">
            <Field
              label="Person or subject"
              labelHidden
              name="find"
              type="search"
              placeholder="Person or subject"
              defaultValue={find}
            />
          </div>
          <ActionSelect actions={log.actions} action={action} />
        </Form>
      </div>
      {log.rows.length ? (
        <>
          <div className="plain-list" style={{ borderBottom: 0 }} role="list" aria-label="Log">
            {log.rows.map((row) => (
              <Row key={row.id} row={row} />
            ))}
          </div>
          <ListFoot
            page={log.page}
            pages={log.pages}
            total={log.total}
            perPage={LIMITS.pageRows}
            href={(page) => addressOf('/log', { find, action, page })}
          />
        </>
      ) : (
        <Empty
          searched
          title="Nothing in the log matches"
          acts={
            <Link className={buttonClass()} href="/log">
              Show the whole log
            </Link>
          }
        >
          Look for another person or subject.
        </Empty>
      )}
    </div>
  );
}

function Row({ row }: { row: LogRow }) {
  return (
    <div className="list-row log-row" role="listitem">
      <div className="sub">
        <When at={row.at} />
        <div className="text-ink-3" title={row.hash}>
          no. {row.id}, {row.hash.slice(0, 8)}
        </div>
      </div>
      <div>{row.who}</div>
      <div>
        <div className="font-medium">{actionWords(row.action)}</div>
        <div className="sub">
          {row.subjectHref ? (
            <Link className="link inline-block min-h-6" href={row.subjectHref} prefetch={false}>
              {row.subject}
            </Link>
          ) : (
            row.subject
          )}
        </div>
      </div>
      <Change before={row.before} after={row.after} />
    </div>
  );
}
