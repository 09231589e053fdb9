'use server';

import { acceptSchema, outcomeSchema, returnSchema, sendSchema } from '@/lib/domain/schemas';
import { commentSchema } from '@/lib/domain/comment';
import { chooseReadingSchema } from '@/lib/domain/repeats';
import { keepFitSchema, sheetSchema } from '@/lib/domain/review-schemas';
import { answerWithdrawalSchema, askWithdrawalSchema } from '@/lib/domain/withdrawal';
import { addComment as addCommentCommand } from '@/lib/server/commands/add-comment';
import {
  acceptReading as acceptReadingCommand,
  acceptSheet as acceptSheetCommand,
} from '@/lib/server/commands/accept-reading';
import { keepFit as keepFitCommand } from '@/lib/server/commands/keep-fit';
import { returnReading as returnReadingCommand } from '@/lib/server/commands/return-reading';
import { sendReadings } from '@/lib/server/commands/send-reading';
import { setOutcome as setOutcomeCommand } from '@/lib/server/commands/set-outcome';
import {
  answerWithdrawal as answerWithdrawalCommand,
  askWithdrawal as askWithdrawalCommand,
} from '@/lib/server/commands/withdraw-reading';
import { chooseReading as chooseReadingCommand } from '@/lib/server/commands/choose-reading';
import { defineAction } from '@/lib/server/define-action';

export const keepFit = defineAction({
  name: 'keepFit',
  permission: 'readings.fit',
  schema: keepFitSchema,
  run: ({ input, context }) => keepFitCommand(context, input),
});

export const sendToReview = defineAction({
  name: 'sendToReview',
  permission: 'readings.send',
  schema: sendSchema,
  run: ({ input, context }) => sendReadings(context, input.readings),
});

export const acceptReading = defineAction({
  name: 'acceptReading',
  permission: 'readings.accept',
  schema: acceptSchema,
  run: ({ input, context }) => acceptReadingCommand(context, input),
});

export const returnReading = defineAction({
  name: 'returnReading',
  permission: 'readings.return',
  schema: returnSchema,
  run: ({ input, context }) => returnReadingCommand(context, input),
});

export const setOutcome = defineAction({
  name: 'setOutcome',
  permission: 'outcomes.set',
  schema: outcomeSchema,
  run: ({ input, context }) => setOutcomeCommand(context, input),
});

export const askWithdrawal = defineAction({
  name: 'askWithdrawal',
  permission: 'readings.withdraw',
  schema: askWithdrawalSchema,
  run: ({ input, context }) => askWithdrawalCommand(context, input),
});

export const answerWithdrawal = defineAction({
  name: 'answerWithdrawal',
  permission: 'readings.withdraw',
  schema: answerWithdrawalSchema,
  run: ({ input, context }) => answerWithdrawalCommand(context, input),
});

export const addComment = defineAction({
  name: 'addComment',
  permission: 'comments.add',
  schema: commentSchema,
  rate: { burst: 20, perMinute: 20 },
  run: ({ input, context }) => addCommentCommand(context, input),
});

export const acceptSheet = defineAction({
  name: 'acceptSheet',
  permission: 'readings.accept',
  schema: sheetSchema,
  rate: { burst: 10, perMinute: 10 },
  run: ({ input, context }) => acceptSheetCommand(context, input),
});

export const chooseReading = defineAction({
  name: 'chooseReading',
  permission: 'readings.choose',
  schema: chooseReadingSchema,
  run: ({ input, context }) => chooseReadingCommand(context, input),
});
