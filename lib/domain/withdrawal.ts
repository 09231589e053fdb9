/** Withdrawing an accepted reading: one person asks, another confirms or declines. */
import { z } from 'zod';
import { LIMITS } from './limits';
import type { Instant, PersonRef } from './refs';

export const WITHDRAWAL_ANSWERS = ['confirmed', 'declined'] as const;
export type WithdrawalAnswerWord = (typeof WITHDRAWAL_ANSWERS)[number];

const id = z.number().int().positive();

export const askWithdrawalSchema = z.object({
  readingId: id,
  version: z.number().int().min(0),
  reason: z
    .string()
    .trim()
    .min(1, 'Say why it is to be withdrawn.')
    .max(LIMITS.wordsLength, `The reason is longer than ${LIMITS.wordsLength} characters.`),
  password: z.string().max(LIMITS.passwordLongest).default(''),
});

export const answerWithdrawalSchema = z.object({
  proposalId: id,
  answer: z.enum(WITHDRAWAL_ANSWERS),
  words: z.string().trim().max(LIMITS.wordsLength).default(''),
  password: z.string().max(LIMITS.passwordLongest).default(''),
});

/** What was asked about one reading, and the answer where there is one. */
export interface WithdrawalView {
  id: number;
  reason: string;
  askedBy: PersonRef;
  askedAt: Instant;
  answer: { word: WithdrawalAnswerWord; words: string; by: PersonRef; at: Instant } | null;
}

/** One line of the page of withdrawals. */
export interface WithdrawalRow extends WithdrawalView {
  readingId: number;
  readingNumber: number;
  frameId: number;
  name: string;
}
