'use server';

import { firstAdminSchema, forgottenSchema, resetSchema } from '@/lib/domain/schemas';
import { createFirstAdmin as createFirstAdminCommand } from '@/lib/server/commands/add-person';
import { askReset as askResetCommand } from '@/lib/server/commands/ask-reset';
import { resetPassword as resetPasswordCommand } from '@/lib/server/commands/reset-password';
import { defineOpenAction } from '@/lib/server/define-action';
import { env } from '@/lib/server/env';

const AT_THE_DOOR = { burst: 10, perMinute: 10 };

export const askReset = defineOpenAction({
  name: 'askReset',
  schema: forgottenSchema,
  rate: AT_THE_DOOR,
  run: ({ input, context }) =>
    askResetCommand(context, { email: input.email, site: env().NEXTAUTH_URL.replace(/\/$/, '') }),
});

export const resetPassword = defineOpenAction({
  name: 'resetPassword',
  schema: resetSchema,
  rate: AT_THE_DOOR,
  run: ({ input, context }) => resetPasswordCommand(context, input),
});

export const createFirstAdmin = defineOpenAction({
  name: 'createFirstAdmin',
  schema: firstAdminSchema,
  rate: AT_THE_DOOR,
  run: ({ input, context }) => createFirstAdminCommand(context, input),
});
