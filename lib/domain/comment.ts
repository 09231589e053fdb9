import { z } from 'zod';
import { LIMITS } from './limits';
import type { Instant, PersonRef } from './views';

export const commentSchema = z.object({
  readingId: z.number().int().positive(),
  words: z
    .string()
    .trim()
    .min(1, 'The comment is empty.')
    .max(LIMITS.wordsLength, `A comment has at most ${LIMITS.wordsLength} characters.`),
});

export interface CommentView {
  id: number;
  /** Number of the reading it was written on. */
  reading: number;
  words: string;
  by: PersonRef;
  at: Instant;
}

/**
 * Who is named in a comment: an @ before the whole name. Where one name begins another ("QA 1", "QA 12"), the longer
 * one is meant where it stands.
 */
export function mentionsIn<Person extends PersonRef>(words: string, people: readonly Person[]): Person[] {
  const byLength = [...people].sort((a, b) => b.name.length - a.name.length);
  const named = new Set<string>();
  let rest = words.toLowerCase();
  for (const { name } of byLength) {
    const mention = `@${name.toLowerCase()}`;
    if (!rest.includes(mention)) continue;
    named.add(name.toLowerCase());
    rest = rest.replaceAll(mention, '');
  }
  return people.filter(({ name }) => named.has(name.toLowerCase()));
}

/** What is being typed after an @ at the end of the text; null where no name is begun. */
export function begunMention(text: string): string | null {
  return /(?:^|\s)@([^@\n]{0,40})$/.exec(text)?.[1] ?? null;
}
