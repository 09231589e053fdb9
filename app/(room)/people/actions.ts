'use server';

import { newPersonSchema, personChangeSchema } from '@/lib/domain/schemas';
import { addPerson as addPersonCommand } from '@/lib/server/commands/add-person';
import { changePerson as changePersonCommand } from '@/lib/server/commands/change-person';
import { defineAction } from '@/lib/server/define-action';

export const addPerson = defineAction({
  name: 'addPerson',
  permission: 'people.change',
  schema: newPersonSchema,
  run: ({ input, context }) => addPersonCommand(context, input),
});

export const changePerson = defineAction({
  name: 'changePerson',
  permission: 'people.change',
  schema: personChangeSchema,
  run: ({ input, context }) => changePersonCommand(context, input),
});
