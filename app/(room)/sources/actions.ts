'use server';

import { renewSourceSchema, sourceSchema } from '@/lib/domain/source-schemas';
import {
  addSource as addSourceCommand,
  renewSource as renewSourceCommand,
} from '@/lib/server/commands/add-source';
import { defineAction } from '@/lib/server/define-action';

export const addSource = defineAction({
  name: 'addSource',
  permission: 'sources.add',
  schema: sourceSchema,
  run: ({ input, context }) => addSourceCommand(context, input),
});

export const renewSource = defineAction({
  name: 'renewSource',
  permission: 'sources.add',
  schema: renewSourceSchema,
  run: ({ input, context }) => renewSourceCommand(context, input),
});
