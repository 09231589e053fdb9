import 'server-only';
import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { describe, log } from './log';
import { isDatabaseDown } from './transaction';

/** Any failure as the one error class, with a sentence for the person. What nobody foresaw is logged under a mark. */
export function toAppError(problem: unknown, where: string): AppError {
  if (problem instanceof AppError) {
    if (problem.status >= 500)
      log().error({ where, code: problem.code, cause: describe(problem.cause) }, problem.message);
    return problem;
  }
  if (isDatabaseDown(problem)) {
    log().error({ where, problem: describe(problem) }, 'the database cannot be reached');
    return new AppError(
      'DATABASE_DOWN',
      'The database cannot be reached just now. Nothing is lost; try again in a minute.',
    );
  }
  const mark = randomUUID().slice(0, 8);
  log().error({ where, mark, problem: describe(problem) }, 'an unforeseen failure');
  return new AppError(
    'BROKEN',
    `Something went wrong on the server and nothing was changed. Its log has the details under ${mark}.`,
  );
}

/** Checks input once; what is wrong is said beside each field. */
export function parseInput<Schema extends z.ZodType>(schema: Schema, input: unknown): z.output<Schema> {
  const answer = schema.safeParse(input);
  if (answer.success) return answer.data;
  const fields: Record<string, string> = {};
  for (const issue of answer.error.issues) fields[issue.path.join('.')] ??= issue.message;
  const first = answer.error.issues[0];
  throw new AppError('BAD_INPUT', first.message, fields);
}
