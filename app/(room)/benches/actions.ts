'use server';

import { benchSchema, setupSchema } from '@/lib/domain/schemas';
import { addBench as addBenchCommand } from '@/lib/server/commands/add-bench';
import { addSetup as addSetupCommand } from '@/lib/server/commands/add-setup';
import { defineAction } from '@/lib/server/define-action';

export const addBench = defineAction({
  name: 'addBench',
  permission: 'benches.add',
  schema: benchSchema,
  run: ({ input, context }) => addBenchCommand(context, input),
});

export const addSetup = defineAction({
  name: 'addSetup',
  permission: 'setups.add',
  schema: setupSchema,
  run: ({ input, context }) => addSetupCommand(context, input),
});
