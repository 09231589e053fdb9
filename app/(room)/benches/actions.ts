'use server';

import { benchSchema } from '@/lib/domain/schemas';
import { decideSetupSchema, setupSchema, takeBackSetupSchema } from '@/lib/domain/setup-schemas';
import { addBench as addBenchCommand } from '@/lib/server/commands/add-bench';
import { addSetup as addSetupCommand } from '@/lib/server/commands/add-setup';
import {
  decideSetup as decideSetupCommand,
  takeBackSetup as takeBackSetupCommand,
} from '@/lib/server/commands/decide-setup';
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

export const decideSetup = defineAction({
  name: 'decideSetup',
  permission: 'setups.decide',
  schema: decideSetupSchema,
  run: ({ input, context }) => decideSetupCommand(context, input),
});

export const takeBackSetup = defineAction({
  name: 'takeBackSetup',
  permission: 'setups.add',
  schema: takeBackSetupSchema,
  run: ({ input, context }) => takeBackSetupCommand(context, input),
});
