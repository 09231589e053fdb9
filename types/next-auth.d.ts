import 'next-auth';
import 'next-auth/jwt';

declare module 'next-auth' {
  interface User {
    /** The person's session version when they signed in; another one since ends the session. */
    sessionVersion: number;
  }
}

declare module 'next-auth/jwt' {
  interface JWT {
    sessionVersion?: number;
    /** Tells one sign-in of a person from another. */
    sessionId?: string;
  }
}
