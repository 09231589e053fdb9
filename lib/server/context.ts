import 'server-only';
import type { Role } from '@/lib/domain/roles';

/** Who does it and when. The clock is an argument: commands never ask for the time. */
export interface CommandContext {
  actor: { id: number; name: string; roles: readonly Role[] };
  at: Date;
  /** The session it is done in; absent where no browser asks. */
  sessionId?: string | null;
}

/** The product itself, where no person acts. */
export const PRODUCT: CommandContext['actor'] = { id: 0, name: 'Midfringe', roles: [] };
