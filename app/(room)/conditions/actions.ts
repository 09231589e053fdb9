'use server';

import { benchConditionsSchema, frameConditionsSchema } from '@/lib/domain/conditions';
import {
  enterBenchConditions as enterBenchConditionsCommand,
  enterFrameConditions as enterFrameConditionsCommand,
} from '@/lib/server/commands/enter-conditions';
import { defineAction } from '@/lib/server/define-action';

export const enterBenchConditions = defineAction({
  name: 'enterBenchConditions',
  permission: 'conditions.enter',
  schema: benchConditionsSchema,
  run: ({ input, context }) => enterBenchConditionsCommand(context, input),
});

export const enterFrameConditions = defineAction({
  name: 'enterFrameConditions',
  permission: 'readings.send',
  schema: frameConditionsSchema,
  run: ({ input, context }) => enterFrameConditionsCommand(context, input),
});
