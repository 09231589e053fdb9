import 'server-only';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import type { SetupDecision } from '@/lib/domain/setup';
import type { decideSetupSchema } from '@/lib/domain/setup-schemas';
import type { Setup } from '@/models/setup';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { mailText } from '../people-mail';
import { inTransaction, type Work } from '../transaction';

const DID: Record<SetupDecision, string> = {
  approved: 'approved',
  declined: 'declined',
  'taken-back': 'took back',
};
const ACTION: Record<SetupDecision, string> = {
  approved: 'setup.approve',
  declined: 'setup.decline',
  'taken-back': 'setup.take-back',
};

interface Decided {
  number: number;
  inForceFrom: Date | null;
}

/**
 * QA approves or declines a proposed setup, never whoever entered it. An approved one comes into force at the moment it
 * was entered for, or now where that has passed: frames taken before the approval keep what they were measured with.
 */
export async function decideSetup(
  context: CommandContext,
  { setupId, decision, reason }: z.output<typeof decideSetupSchema>,
): Promise<Decided> {
  return inTransaction(context, async (work) => {
    const { bench, setup } = await takeWaiting(work, setupId);
    if (setup.enteredBy === context.actor.id) {
      throw new AppError('NOT_ALLOWED', 'You entered this setup, so somebody else of QA must decide on it.');
    }
    const passed = setup.wantedFrom === null || setup.wantedFrom < context.at;
    const inForceFrom = decision === 'approved' ? (passed ? context.at : setup.wantedFrom) : null;
    await keep(work, context, bench, setup, { decision, inForceFrom, reason });
    await tellAdmin(work, context, bench, setup, { decision, inForceFrom, reason });
    return { number: setup.number, inForceFrom };
  });
}

/** Whoever entered a setup takes it back while nobody has decided on it. */
export async function takeBackSetup(
  context: CommandContext,
  { setupId }: { setupId: number },
): Promise<Decided> {
  return inTransaction(context, async (work) => {
    const { bench, setup } = await takeWaiting(work, setupId);
    if (setup.enteredBy !== context.actor.id) {
      throw new AppError(
        'NOT_ALLOWED',
        'Only whoever entered this setup can take it back; QA can decline it.',
      );
    }
    await keep(work, context, bench, setup, { decision: 'taken-back', inForceFrom: null, reason: '' });
    return { number: setup.number, inForceFrom: null };
  });
}

interface Bench {
  id: number;
  name: string;
}

/** The proposal, with its bench locked so that of two decisions one is told about the other. */
async function takeWaiting(work: Work, setupId: number): Promise<{ bench: Bench; setup: Setup }> {
  const { tables } = db();
  const { transaction } = work;
  // Read outside the transaction: its picture of the decisions begins with the lock, not before it.
  const setup = await tables.setups.findByPk(setupId);
  if (!setup) throw new AppError('NOT_FOUND', 'There is no such setup.');
  const bench = await tables.benches.findByPk(setup.benchId, {
    transaction,
    lock: transaction.LOCK.UPDATE,
    rejectOnEmpty: true,
  });
  if (!setup.needsApproval) {
    throw new AppError('WRONG_STATE', 'This setup was entered before approval was asked for.');
  }
  const [decided] = await select<{ decision: SetupDecision; name: string; at: Date }>(
    `SELECT d.decision, p.name, d.decided_at AS at FROM setup_decisions d JOIN people p ON p.id = d.decided_by
     WHERE d.setup_id = :setupId`,
    { setupId },
    transaction,
  );
  if (decided) {
    throw new AppError(
      'CHANGED_MEANWHILE',
      `${decided.name} ${DID[decided.decision]} this setup at ${decided.at.toISOString().slice(11, 16)} UTC. Load the page to see where it stands.`,
    );
  }
  return { bench, setup };
}

interface Answer {
  decision: SetupDecision;
  inForceFrom: Date | null;
  reason: string;
}

async function keep(work: Work, context: CommandContext, bench: Bench, setup: Setup, answer: Answer) {
  await db().tables.setupDecisions.create(
    { setupId: setup.id, ...answer, decidedBy: context.actor.id, decidedAt: context.at },
    { transaction: work.transaction },
  );
  work.audit({
    action: ACTION[answer.decision],
    subject: { kind: 'setup', id: setup.id, text: `${bench.name}, setup ${setup.number}` },
    before: { decision: 'waiting', enteredBy: setup.enteredBy, wantedFrom: setup.wantedFrom },
    after: answer,
  });
}

async function tellAdmin(
  work: Work,
  context: CommandContext,
  bench: Bench,
  setup: Setup,
  { decision, inForceFrom, reason }: Answer,
): Promise<void> {
  const admin = await db().tables.people.findByPk(setup.enteredBy, {
    transaction: work.transaction,
    rejectOnEmpty: true,
  });
  if (!admin.active) return;
  const says = inForceFrom
    ? `${context.actor.name} approved setup ${setup.number} of ${bench.name}. It is in force from ${inForceFrom.toISOString().slice(0, 16).replace('T', ' ')} UTC on.`
    : `${context.actor.name} declined setup ${setup.number} of ${bench.name}. Nothing has changed on the bench.`;
  await work.mail({
    to: admin.email,
    subject: `${bench.name}: setup ${setup.number} ${DID[decision]}`,
    text: mailText(admin.name, [says, ...(reason ? [`Why: ${reason}`] : [])], `/benches/${bench.id}`),
  });
}
