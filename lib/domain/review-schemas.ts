/** What comes in from the review stage: regions tried, and a change that is kept with them. */
import { z } from 'zod';
import { LIMITS } from './limits';
import { refitSchema, regionChangeSchema } from './schemas';

const id = z.number().int().positive();
const DAY_MS = 86_400_000;

/** A region the person stopped at, with what their page showed for it. */
export const trialSchema = regionChangeSchema.extend({
  valueNm: z.number().nullable(),
  expandedNm: z.number().nullable(),
  problem: z.string().max(1000).nullable(),
  /** How long ago it was tried when it was sent. */
  agoMs: z.number().int().min(0).max(DAY_MS),
});
export type Trial = z.output<typeof trialSchema>;

export const trialsSchema = z.array(trialSchema).max(LIMITS.trialsAtOnce);

/** For a change that was dropped or left. */
export const trialBatchSchema = z.object({
  id: z.coerce.number<string>().int().positive(),
  readingId: id.nullable(),
  trials: trialsSchema.min(1),
});

export const keepFitSchema = refitSchema.extend({
  trials: trialsSchema.default([]),
  /** Why the value moves; '' for none yet. */
  moveReason: z.string().trim().max(LIMITS.wordsLength).default(''),
});

/** Clean readings signed together. */
export const sheetSchema = z.object({
  readings: z
    .array(z.object({ readingId: id, version: z.number().int().min(0) }))
    .min(1, 'Nothing is chosen.')
    .max(LIMITS.sheetReadings),
  password: z.string().max(LIMITS.passwordLongest).default(''),
});

export const lookingSchema = z.object({ id: z.coerce.number<string>().int().positive() });

export const mailTimingSchema = z.object({ daily: z.boolean() });
