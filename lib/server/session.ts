import 'server-only';
import { cache } from 'react';
import { cookies, headers } from 'next/headers';
import { redirect } from 'next/navigation';
import { decode } from 'next-auth/jwt';
import { can, type Action } from '@/lib/domain/permissions';
import type { Role } from '@/lib/domain/roles';
import type { Me } from '@/lib/domain/views';
import { select } from './db';
import { env } from './env';
import { log } from './log';

/** A working day: after that people sign in again. */
export const SESSION_SECONDS = 12 * 3600;
export const BENCH_COOKIE = 'bench';

/** Over https the name carries the prefix that makes browsers refuse it from anywhere else. */
export function sessionCookie(): { name: string; secure: boolean } {
  const secure = env().NEXTAUTH_URL.startsWith('https://');
  return { name: secure ? '__Secure-midfringe.session' : 'midfringe.session', secure };
}

/**
 * Who a session token belongs to, or null. The token only names a person and a session version: whether they are
 * still active, and which roles they hold, is read from the database each time.
 */
export async function personOfToken(token: string | undefined): Promise<Me | null> {
  if (!token) return null;
  const claims = await readToken(token);
  if (!claims) return null;
  const rows = await select<{ id: number; name: string; email: string; role: Role | null }>(
    `SELECT p.id, p.name, p.email, r.role FROM people p LEFT JOIN person_roles r ON r.person_id = p.id
     WHERE p.id = :id AND p.active AND p.session_version = :version
       AND (p.access_until IS NULL OR p.access_until > :now)`,
    { ...claims, now: new Date() },
  );
  if (!rows.length) return null;
  const { id, name, email } = rows[0];
  return { id, name, email, roles: rows.flatMap(({ role }) => (role ? [role] : [])) };
}

async function readToken(
  token: string,
): Promise<{ id: number; version: number; sessionId: string | null } | null> {
  try {
    const claims = await decode({ token, secret: env().NEXTAUTH_SECRET });
    if (!claims?.sub || claims.sessionVersion === undefined) return null;
    return {
      id: Number(claims.sub),
      version: claims.sessionVersion,
      sessionId: claims.sessionId ?? null,
    };
  } catch (problem) {
    // Out of date, made with another secret, or tampered with: nobody is signed in.
    log().debug({ name: problem instanceof Error ? problem.name : 'unknown' }, 'a session token was refused');
    return null;
  }
}

/** The signed-in person, or null. Read once per request. */
export const getMe = cache(async (): Promise<Me | null> => {
  const jar = await cookies();
  return personOfToken(jar.get(sessionCookie().name)?.value);
});

/** Which sign-in of the person this is; null for a token that does not say. */
export const getSessionId = cache(async (): Promise<string | null> => {
  const token = (await cookies()).get(sessionCookie().name)?.value;
  return token ? ((await readToken(token))?.sessionId ?? null) : null;
});

/** The sign-in page, told which page was asked for. */
async function doorFor(): Promise<string> {
  const asked = (await headers()).get('x-asked') ?? '/';
  return asked === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(asked)}`;
}

/** For pages: the signed-in person, who may do this; anyone else is led to the right door. */
export async function requireMe(action?: Action): Promise<Me> {
  const me = await getMe();
  if (!me) redirect(await doorFor());
  if (action && !can(me, action)) redirect('/not-allowed');
  return me;
}

/** The bench this person works at, kept in a cookie of the browser. */
export async function benchInUse(): Promise<number | null> {
  const jar = await cookies();
  const id = Number(jar.get(BENCH_COOKIE)?.value);
  return Number.isInteger(id) && id > 0 ? id : null;
}

/** Where a call comes from, for throttling: the last hop named is the one the server itself saw or its proxy vouches for. */
export function addressOf(forwardedFor: string | null): string {
  return (forwardedFor?.split(',').at(-1)?.trim() || 'unknown').slice(0, 64);
}

export async function addressOfRequest(): Promise<string> {
  return addressOf((await headers()).get('x-forwarded-for'));
}
