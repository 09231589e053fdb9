import 'server-only';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { can, type Action } from '@/lib/domain/permissions';
import type { Me } from '@/lib/domain/views';
import type { CommandContext } from './context';
import { parseInput, toAppError } from './failure';
import { spendToken, type Rate } from './rate-limit';
import { personOfToken, sessionCookie } from './session';

const USUAL_RATE: Rate = { burst: 240, perMinute: 600 };

interface RouteOf<Schema extends z.ZodType> {
  name: string;
  permission: Action;
  /** Checks path parameters, query and (for JSON bodies) the body, merged. */
  schema: Schema;
  body?: 'json' | 'stream';
  rate?: Rate;
  run: (call: {
    input: z.output<Schema>;
    me: Me;
    context: CommandContext;
    request: Request;
  }) => Promise<Response>;
}

interface RouteContext {
  params: Promise<Record<string, string>>;
}

type Handler = (request: Request, route: RouteContext) => Promise<Response>;

/** Every route handler goes through here: origin, session, permission, rate, schema, errors as problem+json. */
export function defineRoute<Schema extends z.ZodType>(route: RouteOf<Schema>): Handler {
  return async (request, { params }) => {
    try {
      requireSameOrigin(request);
      const me = await personOfToken(cookieOf(request, sessionCookie().name));
      if (!me) throw new AppError('NOT_SIGNED_IN', 'Your session has ended. Sign in again.');
      if (!can(me, route.permission)) throw new AppError('NOT_ALLOWED', 'Your roles do not allow this.');
      const at = new Date();
      spendToken(route.name, String(me.id), route.rate ?? USUAL_RATE, at);
      const input = parseInput(route.schema, {
        ...Object.fromEntries(new URL(request.url).searchParams),
        ...(route.body === 'json' ? await jsonOf(request) : {}),
        ...(await params),
      });
      return guarded(await route.run({ input, me, context: { actor: me, at }, request }));
    } catch (problem) {
      return problemJson(toAppError(problem, route.name));
    }
  };
}

/** A route anyone may ask, without a session: it tells nothing about data. */
export function defineOpenRoute(route: {
  name: string;
  run: () => Promise<Response>;
}): () => Promise<Response> {
  return async () => {
    try {
      return guarded(await route.run());
    } catch (problem) {
      return problemJson(toAppError(problem, route.name));
    }
  };
}

/** RFC 9457: the sentence is the title, the stable code beside it. */
function problemJson(problem: AppError): Response {
  const { status, code, message, fields } = problem;
  return guarded(
    new Response(
      JSON.stringify({ type: 'about:blank', title: message, status, code, ...(fields ? { fields } : {}) }),
      {
        status,
        headers: { 'content-type': 'application/problem+json' },
      },
    ),
  );
}

function guarded(response: Response): Response {
  response.headers.set('x-content-type-options', 'nosniff');
  response.headers.set('referrer-policy', 'same-origin');
  response.headers.set('content-security-policy', "default-src 'none'; frame-ancestors 'none'; sandbox");
  if (!response.headers.has('cache-control')) response.headers.set('cache-control', 'no-store');
  return response;
}

/** A page of another site may not make the browser change anything here. */
function requireSameOrigin(request: Request): void {
  if (request.method === 'GET' || request.method === 'HEAD') return;
  const origin = request.headers.get('origin');
  const host = request.headers.get('x-forwarded-host') ?? request.headers.get('host');
  if (!origin || !host || !URL.canParse(origin) || new URL(origin).host !== host) {
    throw new AppError('NOT_ALLOWED', 'This call did not come from a page of this site.');
  }
}

function cookieOf(request: Request, name: string): string | undefined {
  for (const part of (request.headers.get('cookie') ?? '').split(';')) {
    const [key, ...value] = part.trim().split('=');
    if (key === name) return decodeURIComponent(value.join('='));
  }
  return undefined;
}

async function jsonOf(request: Request): Promise<Record<string, unknown>> {
  const body: unknown = await request.json().catch(() => {
    throw new AppError('BAD_INPUT', 'The body is not JSON.');
  });
  if (body === null || typeof body !== 'object' || Array.isArray(body)) {
    throw new AppError('BAD_INPUT', 'The body must be a JSON object.');
  }
  return { ...body };
}
