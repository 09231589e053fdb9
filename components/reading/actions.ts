/** The server actions a reading's pages are given, as the components see them. */
import type { z } from 'zod';
import type { chooseReadingSchema } from '@/lib/domain/repeats';
import type { commentSchema } from '@/lib/domain/comment';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { answerWithdrawalSchema, askWithdrawalSchema } from '@/lib/domain/withdrawal';
import type { keepFitSchema, sheetSchema } from '@/lib/domain/review-schemas';
import type { acceptSchema, outcomeSchema, returnSchema, sendSchema } from '@/lib/domain/schemas';

export type KeepFit = (
  input: z.input<typeof keepFitSchema>,
) => Promise<ActionAnswer<{ readingId: number; version: number; differs: string | null }>>;
export type SendToReview = (
  input: z.input<typeof sendSchema>,
) => Promise<ActionAnswer<{ sent: number; problems: string[] }>>;
export type AcceptReading = (input: z.input<typeof acceptSchema>) => Promise<ActionAnswer<unknown>>;
export type ReturnReading = (input: z.input<typeof returnSchema>) => Promise<ActionAnswer<unknown>>;
export type SetOutcome = (input: z.input<typeof outcomeSchema>) => Promise<ActionAnswer<unknown>>;
export type AskWithdrawal = (input: z.input<typeof askWithdrawalSchema>) => Promise<ActionAnswer<unknown>>;
export type AnswerWithdrawal = (
  input: z.input<typeof answerWithdrawalSchema>,
) => Promise<ActionAnswer<unknown>>;
/** Everything the two halves of a withdrawal need. */
export interface WithdrawalActions {
  askWithdrawal: AskWithdrawal;
  answerWithdrawal: AnswerWithdrawal;
}
export type AddComment = (
  input: z.input<typeof commentSchema>,
) => Promise<ActionAnswer<{ commentId: number; mailed: string[] }>>;
export type AcceptSheet = (
  input: z.input<typeof sheetSchema>,
) => Promise<
  ActionAnswer<{ accepted: number; refused: { readingId: number; name: string; message: string }[] }>
>;
export type ChooseReading = (input: z.input<typeof chooseReadingSchema>) => Promise<ActionAnswer<unknown>>;
export type LookAnswer = z.input<typeof acceptSchema>['answers'] extends (infer A)[] | undefined ? A : never;
