import 'server-only';
import type { z } from 'zod';
import { AppError, type ActionAnswer } from '@/lib/domain/errors';
import { can, type Action } from '@/lib/domain/permissions';
import type { Me } from '@/lib/domain/views';
import { PRODUCT, type CommandContext } from './context';
import { parseInput, toAppError } from './failure';
import { spendToken, type Rate } from './rate-limit';
import { addressOfRequest, getMe, getSessionId } from './session';

const USUAL_RATE: Rate = { burst: 60, perMinute: 120 };

interface Call<Input, Who> {
  input: Input;
  me: Who;
  context: CommandContext;
}

interface ActionOf<Schema extends z.ZodType, T, Who> {
  name: string;
  schema: Schema;
  rate?: Rate;
  run: (call: Call<z.output<Schema>, Who>) => Promise<T>;
}

/**
 * Every server action goes through here: session, permission, rate, schema, and errors as answers. `permission`
 * 'signed-in' asks for a session only.
 */
export function defineAction<Schema extends z.ZodType, T>(
  action: ActionOf<Schema, T, Me> & { permission: Action | 'signed-in' },
): (input: z.input<Schema>) => Promise<ActionAnswer<T>> {
  return (input) =>
    answer(action.name, async () => {
      const me = await getMe();
      if (!me) throw new AppError('NOT_SIGNED_IN', 'Your session has ended. Sign in again.');
      if (action.permission !== 'signed-in' && !can(me, action.permission)) {
        throw new AppError('NOT_ALLOWED', 'Your roles do not allow this.');
      }
      const at = new Date();
      spendToken(action.name, String(me.id), action.rate ?? USUAL_RATE, at);
      return action.run({
        input: parseInput(action.schema, input),
        me,
        context: { actor: me, at, sessionId: await getSessionId() },
      });
    });
}

/** The few actions of the door, open to anyone; throttled by address. */
export function defineOpenAction<Schema extends z.ZodType, T>(
  action: ActionOf<Schema, T, null> & { rate: Rate },
): (input: z.input<Schema>) => Promise<ActionAnswer<T>> {
  return (input) =>
    answer(action.name, async () => {
      const at = new Date();
      spendToken(action.name, await addressOfRequest(), action.rate, at);
      return action.run({
        input: parseInput(action.schema, input),
        me: null,
        context: { actor: PRODUCT, at },
      });
    });
}

async function answer<T>(name: string, work: () => Promise<T>): Promise<ActionAnswer<T>> {
  try {
    return { ok: true, value: await work() };
  } catch (problem) {
    const { code, message, fields } = toAppError(problem, name);
    return { ok: false, code, message, ...(fields ? { fields } : {}) };
  }
}
