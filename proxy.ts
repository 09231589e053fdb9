import { NextResponse, type NextRequest } from 'next/server';

/** Path and query as the person sees them; what the framework adds for its own requests is left out. */
function askedAddress(url: NextRequest['nextUrl']): string {
  const query = new URLSearchParams(url.search);
  query.delete('_rsc');
  return query.size ? `${url.pathname}?${query}` : url.pathname;
}

/**
 * Headers of every page: a content policy with a fresh nonce, and what browsers need to be told beside it.
 * Routes under /api are left out: matched here, a body over 10 MB would be cut without an error. They set their own.
 */
export function proxy(request: NextRequest): NextResponse {
  const nonce = Buffer.from(crypto.randomUUID()).toString('base64');
  const secure =
    request.nextUrl.protocol === 'https:' || request.headers.get('x-forwarded-proto') === 'https';
  const policy = [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic'`,
    "style-src 'self' 'unsafe-inline'",
    "img-src 'self' blob: data:",
    "font-src 'self'",
    "connect-src 'self'",
    "worker-src 'self' blob:",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
    ...(secure ? ['upgrade-insecure-requests'] : []),
  ].join('; ');
  const headers = new Headers(request.headers);
  headers.set('x-nonce', nonce);
  // Where the person wanted to go, so that signing in can lead there.
  headers.set('x-asked', askedAddress(request.nextUrl));
  // Next reads the nonce for its own scripts from the policy of the request.
  headers.set('content-security-policy', policy);
  const response = NextResponse.next({ request: { headers } });
  response.headers.set('content-security-policy', policy);
  response.headers.set('x-content-type-options', 'nosniff');
  response.headers.set('referrer-policy', 'same-origin');
  response.headers.set('permissions-policy', 'camera=(self), microphone=(), geolocation=()');
  response.headers.set('cross-origin-opener-policy', 'same-origin');
  if (secure) response.headers.set('strict-transport-security', 'max-age=31536000');
  return response;
}

export const config = { matcher: ['/((?!api/|_next/static|_next/image|favicon.ico).*)'] };
