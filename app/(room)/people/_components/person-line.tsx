'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { When } from '@/components/figures/when';
import { Button } from '@/components/ui/button';
import { Tick } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import { ROLE_WORDS, type Role } from '@/lib/domain/roles';
import type { PersonRow } from '@/lib/domain/views';
import { LastDay, lastDayOf } from './last-day';
import { RoleTicks } from './role-ticks';

interface Props {
  person: PersonRow;
  isMe: boolean;
  changePerson: (input: {
    personId: number;
    roles: Role[];
    active: boolean;
    lastDay: string | null;
  }) => Promise<ActionAnswer<unknown>>;
}

export function PersonLine({ person, isMe, changePerson }: Props) {
  const [open, setOpen] = useState(false);
  return (
    <div role="listitem">
      <div className="list-row person-row">
        <div>
          <div className={person.active ? 'name' : 'name text-ink-3'}>{person.name}</div>
          <div className="sub">
            {person.email}
            {isMe ? ', you' : ''}
          </div>
        </div>
        <div>
          {person.active ? (
            <>
              {person.roles.map((role) => ROLE_WORDS[role]).join(', ') || 'no role'}
              {person.accessUntil ? <div className="sub">until {lastDayOf(person.accessUntil)}</div> : null}
            </>
          ) : (
            <span className="text-ink-3">switched off</span>
          )}
        </div>
        <div className="sub">
          {person.lastSignInAt ? (
            <>
              last signed in <When at={person.lastSignInAt} />
            </>
          ) : (
            'has not signed in yet'
          )}
        </div>
        <Button
          kind="quiet"
          aria-expanded={open}
          aria-label={`Change ${person.name}`}
          onClick={() => setOpen(!open)}
        >
          Change…
        </Button>
      </div>
      {open ? (
        <ChangeForm person={person} isMe={isMe} changePerson={changePerson} close={() => setOpen(false)} />
      ) : null}
    </div>
  );
}

function ChangeForm({ person, isMe, changePerson, close }: Props & { close: () => void }) {
  const router = useRouter();
  const [roles, setRoles] = useState<Role[]>(person.roles);
  const [active, setActive] = useState(person.active);
  const [lastDay, setLastDay] = useState(lastDayOf(person.accessUntil));
  const submit = useSubmit<unknown>();
  return (
    <form
      className="pb-5"
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => changePerson({ personId: person.id, roles, active, lastDay: lastDay || null }),
          () => {
            close();
            router.refresh();
          },
        );
      }}
    >
      <RoleTicks roles={roles} onChange={setRoles} error={submit.fields.roles} />
      <LastDay value={lastDay} onChange={setLastDay} error={submit.fields.lastDay} />
      <Tick label="May sign in" checked={active} onChange={(event) => setActive(event.target.checked)} />
      <p className="text-small text-ink-2">
        {isMe
          ? 'This is you: a change ends this session too.'
          : `A change ends ${person.name}’s sessions at once.`}
      </p>
      <FormFoot
        word="Keep the change"
        waiting={submit.waiting}
        message={submit.message || submit.fields.active}
        onBack={close}
      />
    </form>
  );
}
