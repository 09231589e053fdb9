import 'server-only';
import { randomUUID } from 'node:crypto';
import type { NextAuthOptions } from 'next-auth';
import Credentials from 'next-auth/providers/credentials';
import { checkPassword } from './commands/check-password';
import { env } from './env';
import { SESSION_SECONDS, addressOf, sessionCookie } from './session';

/**
 * Sign-in with e-mail and password. A refusal's sentence reaches the sign-in form as the `error` of
 * `signIn('credentials', { redirect: false })`.
 */
export function authOptions(): NextAuthOptions {
  const { name, secure } = sessionCookie();
  return {
    secret: env().NEXTAUTH_SECRET,
    session: { strategy: 'jwt', maxAge: SESSION_SECONDS },
    pages: { signIn: '/sign-in', error: '/sign-in' },
    cookies: { sessionToken: { name, options: { httpOnly: true, sameSite: 'lax', path: '/', secure } } },
    providers: [
      Credentials({
        name: 'E-mail and password',
        credentials: { email: { label: 'E-mail' }, password: { label: 'Password', type: 'password' } },
        async authorize(credentials, request) {
          const forwarded: unknown = request.headers?.['x-forwarded-for'];
          const person = await checkPassword({
            email: String(credentials?.email ?? '')
              .trim()
              .toLowerCase(),
            password: String(credentials?.password ?? ''),
            address: addressOf(typeof forwarded === 'string' ? forwarded : null),
            at: new Date(),
          });
          return { id: String(person.id), name: person.name, sessionVersion: person.sessionVersion };
        },
      }),
    ],
    callbacks: {
      jwt({ token, user }) {
        // The token carries an id and a version, nothing a person could read about another.
        if (user) return { sub: user.id, sessionVersion: user.sessionVersion, sessionId: randomUUID() };
        return token;
      },
      session({ session }) {
        return { expires: session.expires };
      },
    },
  };
}
