'use server';

import { benchSchema } from '@/lib/domain/schemas';
import {
  decideSetupSchema,
  plateSchema,
  putPlateBackSchema,
  renewPlateSchema,
  setupSchema,
  takeBackSetupSchema,
  takePlateOffSchema,
} from '@/lib/domain/setup-schemas';
import { addBench as addBenchCommand } from '@/lib/server/commands/add-bench';
import {
  addPlate as addPlateCommand,
  renewPlate as renewPlateCommand,
} from '@/lib/server/commands/add-plate';
import { addSetup as addSetupCommand } from '@/lib/server/commands/add-setup';
import {
  decideSetup as decideSetupCommand,
  takeBackSetup as takeBackSetupCommand,
} from '@/lib/server/commands/decide-setup';
import {
  putPlateBack as putPlateBackCommand,
  takePlateOff as takePlateOffCommand,
} from '@/lib/server/commands/move-plate';
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

export const addPlate = defineAction({
  name: 'addPlate',
  permission: 'plates.change',
  schema: plateSchema,
  run: ({ input, context }) => addPlateCommand(context, input),
});

export const renewPlate = defineAction({
  name: 'renewPlate',
  permission: 'plates.change',
  schema: renewPlateSchema,
  run: ({ input, context }) => renewPlateCommand(context, input),
});

export const takePlateOff = defineAction({
  name: 'takePlateOff',
  permission: 'plates.change',
  schema: takePlateOffSchema,
  run: ({ input, context }) => takePlateOffCommand(context, input),
});

export const putPlateBack = defineAction({
  name: 'putPlateBack',
  permission: 'plates.change',
  schema: putPlateBackSchema,
  run: ({ input, context }) => putPlateBackCommand(context, input),
});
