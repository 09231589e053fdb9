'use server';

import { cookies } from 'next/headers';
import { mailTimingSchema } from '@/lib/domain/review-schemas';
import { chooseBenchSchema, nothingSchema } from '@/lib/domain/schemas';
import { setMailTiming as setMailTimingCommand } from '@/lib/server/commands/set-mail-timing';
import { endSessions } from '@/lib/server/commands/change-person';
import { emptyIntake as emptyIntakeCommand } from '@/lib/server/commands/empty-intake';
import { defineAction } from '@/lib/server/define-action';
import { BENCH_COOKIE, sessionCookie } from '@/lib/server/session';

const A_YEAR_SECONDS = 365 * 86_400;

export const chooseBench = defineAction({
  name: 'chooseBench',
  permission: 'benches.see',
  schema: chooseBenchSchema,
  run: async ({ input }) => {
    const jar = await cookies();
    const { secure } = sessionCookie();
    if (input.benchId === null) jar.delete(BENCH_COOKIE);
    else {
      const value = String(input.benchId);
      jar.set(BENCH_COOKIE, value, {
        httpOnly: true,
        sameSite: 'lax',
        secure,
        path: '/',
        maxAge: A_YEAR_SECONDS,
      });
    }
    return null;
  },
});

export const emptyIntake = defineAction({
  name: 'emptyIntake',
  permission: 'frames.upload',
  schema: nothingSchema,
  run: ({ me }) => emptyIntakeCommand(me.id),
});

export const signOutEverywhere = defineAction({
  name: 'signOutEverywhere',
  permission: 'signed-in',
  schema: nothingSchema,
  run: ({ me, context }) => endSessions(context, me.id),
});

export const setMailTiming = defineAction({
  name: 'setMailTiming',
  permission: 'signed-in',
  schema: mailTimingSchema,
  run: ({ input, context }) => setMailTimingCommand(context, input),
});
