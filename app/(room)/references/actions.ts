'use server';

import { benchRuleSchema, releaseBenchSchema } from '@/lib/domain/references';
import {
  releaseBench as releaseBenchCommand,
  setBenchRule as setBenchRuleCommand,
} from '@/lib/server/commands/release-bench';
import { defineAction } from '@/lib/server/define-action';

export const releaseBench = defineAction({
  name: 'releaseBench',
  permission: 'benches.release',
  schema: releaseBenchSchema,
  run: ({ input, context }) => releaseBenchCommand(context, input),
});

export const setBenchRule = defineAction({
  name: 'setBenchRule',
  permission: 'benches.release',
  schema: benchRuleSchema,
  run: ({ input, context }) => setBenchRuleCommand(context, input),
});
