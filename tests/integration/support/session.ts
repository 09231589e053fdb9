import { encode } from 'next-auth/jwt';
import { env } from '@/lib/server/env';
import { sessionCookie } from '@/lib/server/session';
import { testCookies } from '../../setup/next-headers';
import { rows } from './database';
import type { Person } from './world';

/** A session token as the sign-in makes it for this person now. */
export async function tokenOf(person: Person): Promise<string> {
  const [{ version }] = await rows<{ version: number }>(
    'SELECT session_version AS version FROM people WHERE id = :id',
    { id: person.id },
  );
  return encode({
    token: { sub: String(person.id), sessionVersion: version },
    secret: env().NEXTAUTH_SECRET,
  });
}

/** From here on server actions are called by this person; null is somebody without a session. */
export async function actAs(person: Person | null): Promise<void> {
  const jar = testCookies();
  jar.clear();
  if (person) jar.set(sessionCookie().name, await tokenOf(person));
}

interface Call {
  person?: Person | null;
  method?: string;
  body?: BodyInit;
  headers?: Record<string, string>;
  params?: Record<string, string>;
}

type Handler = (request: Request, route: { params: Promise<Record<string, string>> }) => Promise<Response>;

/** Calls a route handler as the browser of this person would. */
export async function callRoute(handler: Handler, address: string, call: Call = {}): Promise<Response> {
  const { person = null, method = 'GET', body, params = {} } = call;
  const headers = new Headers({ host: 'localhost', origin: 'http://localhost', ...call.headers });
  if (person) headers.set('cookie', `${sessionCookie().name}=${await tokenOf(person)}`);
  const request = new Request(`http://localhost${address}`, { method, body, headers });
  return handler(request, { params: Promise.resolve(params) });
}
