import 'server-only';

interface Looker {
  name: string;
  atMs: number;
}

/** Who has which reading open, as this process has heard; forgotten with it, since it is true for seconds only. */
const held = globalThis as { midfringeLookers?: Map<number, Map<number, Looker>> };

/** A page says every ten seconds that it is open; twice missed, and nobody is there. */
export const GONE_MS = 25_000;
const MOST_READINGS = 5000;

/** Notes that a person has the reading open and answers who else has, by name. */
export function lookAt(readingId: number, person: { id: number; name: string }, now: Date): string[] {
  const lookers = (held.midfringeLookers ??= new Map<number, Map<number, Looker>>());
  if (lookers.size > MOST_READINGS) lookers.clear();
  const here = lookers.get(readingId) ?? new Map<number, Looker>();
  lookers.set(readingId, here);
  here.set(person.id, { name: person.name, atMs: now.getTime() });
  for (const [id, { atMs }] of here) if (now.getTime() - atMs > GONE_MS) here.delete(id);
  return [...here].filter(([id]) => id !== person.id).map(([, { name }]) => name);
}
