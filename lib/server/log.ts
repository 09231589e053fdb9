import 'server-only';
import pino from 'pino';
import { env } from './env';

const held = globalThis as { midfringeLog?: pino.Logger };

/** Lines of JSON to stderr, or to LOG_FILE. Never give it a request body, a cookie, a password or a token. */
export function log(): pino.Logger {
  if (!held.midfringeLog) {
    const { LOG_FILE, LOG_LEVEL } = env();
    const target = pino.destination(
      LOG_FILE ? { dest: LOG_FILE, mkdir: true, sync: true } : { dest: 2, sync: true },
    );
    held.midfringeLog = pino(
      { level: LOG_LEVEL, base: undefined, timestamp: pino.stdTimeFunctions.isoTime },
      target,
    );
  }
  return held.midfringeLog;
}

/** What may be written about a failure: its class, message and stack, not its parameters. */
export function describe(problem: unknown): { name: string; message: string; stack?: string } {
  if (problem instanceof Error) return { name: problem.name, message: problem.message, stack: problem.stack };
  return { name: 'unknown', message: String(problem) };
}
