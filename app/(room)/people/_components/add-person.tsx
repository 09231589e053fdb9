'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import type { z } from 'zod';
import { Disclosure } from '@/components/ui/disclosure';
import { Field } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import type { Role } from '@/lib/domain/roles';
import type { newPersonSchema } from '@/lib/domain/schemas';
import { LastDay } from './last-day';
import { RoleTicks } from './role-ticks';

interface Props {
  addPerson: (input: z.input<typeof newPersonSchema>) => Promise<ActionAnswer<unknown>>;
}

export function AddPerson({ addPerson }: Props) {
  return (
    <Disclosure word="Add a person…" title="Add a person" kind="main">
      {(close) => <PersonForm addPerson={addPerson} close={close} />}
    </Disclosure>
  );
}

function PersonForm({ addPerson, close }: Props & { close: () => void }) {
  const router = useRouter();
  const [name, setName] = useState('');
  const [email, setEmail] = useState('');
  const [password, setPassword] = useState('');
  const [roles, setRoles] = useState<Role[]>(['technician']);
  const [lastDay, setLastDay] = useState('');
  const submit = useSubmit<unknown>();
  return (
    <form
      className="grid gap-5"
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => addPerson({ name, email, password, roles, lastDay: lastDay || null }),
          () => {
            close();
            router.refresh();
          },
        );
      }}
    >
      <div className="form-grid">
        <Field
          label="Name"
          required
          value={name}
          error={submit.fields.name}
          onChange={(event) => setName(event.target.value)}
        />
        <Field
          label="E-mail"
          type="email"
          required
          autoComplete="off"
          value={email}
          error={submit.fields.email}
          onChange={(event) => setEmail(event.target.value)}
        />
        <Field
          label="First password"
          type="password"
          required
          autoComplete="new-password"
          value={password}
          error={submit.fields.password}
          help={`At least ${LIMITS.passwordShortest} characters. The person can change it with “Forgotten your password?”.`}
          onChange={(event) => setPassword(event.target.value)}
        />
      </div>
      <RoleTicks roles={roles} onChange={setRoles} error={submit.fields.roles} />
      <LastDay value={lastDay} onChange={setLastDay} error={submit.fields.lastDay} />
      <FormFoot word="Add the person" waiting={submit.waiting} message={submit.message} onBack={close} />
    </form>
  );
}
