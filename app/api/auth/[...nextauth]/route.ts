import type { NextRequest } from 'next/server';
import NextAuth from 'next-auth';
import { authOptions } from '@/lib/server/auth-options';

/** Sign-in and sign-out. The options are made at the first call: the build has no environment to make them from. */
function handler(
  request: NextRequest,
  context: { params: Promise<{ nextauth: string[] }> },
): Promise<Response> {
  return NextAuth(request, context, authOptions()) as Promise<Response>;
}

export { handler as GET, handler as POST };
