import 'server-only';
import type { Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import { select } from './db';

/**
 * The setups of a bench that are ever in force, each from its moment on until the next one's: no gap and no overlap can
 * arise. Of two of the same moment the later number holds. Setups from before approval was asked for count from the
 * moment they were entered. Joins `setups s` with its decision `d`.
 */
export const IN_FORCE_FROM = 'COALESCE(d.in_force_from, s.entered_at)';
export const EVER_IN_FORCE = "(NOT s.needs_approval OR d.decision = 'approved')";

export interface InForce {
  id: number;
  number: number;
  from: Date;
}

/** The setup in force on a bench at a moment, or null. */
export async function setupAt(benchId: number, at: Date, transaction?: Transaction): Promise<InForce | null> {
  const [found] = await select<InForce>(
    `SELECT s.id, s.number, ${IN_FORCE_FROM} AS \`from\` FROM setups s LEFT JOIN setup_decisions d ON d.setup_id = s.id
     WHERE s.bench_id = :benchId AND ${EVER_IN_FORCE} AND ${IN_FORCE_FROM} <= :at
     ORDER BY ${IN_FORCE_FROM} DESC, s.number DESC LIMIT 1`,
    { benchId, at },
    transaction,
  );
  return found ?? null;
}

/** The number of the setup of a bench that waits for a decision, or null; there is never more than one. */
export async function waitingNumber(benchId: number, transaction?: Transaction): Promise<number | null> {
  const [found] = await select<{ number: number }>(
    `SELECT s.number FROM setups s LEFT JOIN setup_decisions d ON d.setup_id = s.id
     WHERE s.bench_id = :benchId AND s.needs_approval AND d.setup_id IS NULL ORDER BY s.number LIMIT 1`,
    { benchId },
    transaction,
  );
  return found?.number ?? null;
}

/** What is in force when a frame arrives stays with it. Throws the sentence why a bench takes no frames yet. */
export async function requireSetupAt(benchId: number, at: Date): Promise<InForce> {
  const [bench] = await select<{ name: string }>('SELECT name FROM benches WHERE id = :benchId', { benchId });
  if (!bench) throw new AppError('NOT_FOUND', 'There is no such bench.');
  const setup = await setupAt(benchId, at);
  if (setup) return setup;
  const waiting = await waitingNumber(benchId);
  throw new AppError(
    'BAD_INPUT',
    waiting === null
      ? `${bench.name} has no setup in force, so its frames give no wavelength. An admin enters one under Benches.`
      : `Setup ${waiting} of ${bench.name} waits for QA, so its frames give no wavelength yet. QA approves it under Benches.`,
  );
}
