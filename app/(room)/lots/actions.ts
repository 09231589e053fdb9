'use server';

import { lotSchema, retireSchema, specificationSchema, unitsSchema } from '@/lib/domain/schemas';
import {
  addSpecification as addSpecificationCommand,
  retireSpecification as retireSpecificationCommand,
} from '@/lib/server/commands/add-specification';
import { addUnits as addUnitsCommand, openLot as openLotCommand } from '@/lib/server/commands/open-lot';
import { defineAction } from '@/lib/server/define-action';

export const addSpecification = defineAction({
  name: 'addSpecification',
  permission: 'specifications.add',
  schema: specificationSchema,
  run: ({ input, context }) => addSpecificationCommand(context, input),
});

export const retireSpecification = defineAction({
  name: 'retireSpecification',
  permission: 'specifications.add',
  schema: retireSchema,
  run: ({ input, context }) => retireSpecificationCommand(context, input),
});

export const openLot = defineAction({
  name: 'openLot',
  permission: 'lots.open',
  schema: lotSchema,
  run: ({ input, context }) => openLotCommand(context, input),
});

export const addUnits = defineAction({
  name: 'addUnits',
  permission: 'units.add',
  schema: unitsSchema,
  run: ({ input, context }) => addUnitsCommand(context, input),
});
