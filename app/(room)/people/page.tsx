import type { Metadata } from 'next';
import { listPeople } from '@/lib/server/queries/people';
import { requireMe } from '@/lib/server/session';
import { AddPerson } from './_components/add-person';
import { PersonLine } from './_components/person-line';
import { addPerson, changePerson } from './actions';

export const metadata: Metadata = { title: 'People' };

export default async function People() {
  const me = await requireMe('people.see');
  const people = await listPeople();
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>People</h1>
          <span className="text-ink-2">by name, those switched off last</span>
        </div>
      </div>
      <AddPerson addPerson={addPerson} />
      <div className="plain-list" role="list">
        {people.map((person) => (
          <PersonLine
            key={person.id}
            person={person}
            isMe={person.id === me.id}
            changePerson={changePerson}
          />
        ))}
      </div>
      <p className="lead mt-4 text-small">
        A person may hold several roles. A change ends that person’s sessions. Holding several roles never
        lets anyone accept a reading they had a hand in.
      </p>
    </div>
  );
}
