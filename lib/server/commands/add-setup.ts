import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import type { setupSchema } from '@/lib/domain/schemas';
import type { CommandContext } from '../context';
import { db } from '../db';
import { inTransaction } from '../transaction';

type NewSetup = z.output<typeof setupSchema>;

/** A new setup comes into force at once. Earlier ones, and the readings made with them, stay as they are. */
export async function addSetup(
  context: CommandContext,
  setup: NewSetup,
): Promise<{ setupId: number; number: number }> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const bench = await tables.benches.findByPk(setup.benchId, {
      transaction,
      lock: transaction.LOCK.UPDATE,
    });
    if (!bench) throw new AppError('NOT_FOUND', 'There is no such bench.');
    const before = await tables.setups.findOne({
      where: { benchId: bench.id },
      order: [['number', 'DESC']],
      transaction,
    });
    if ((before?.number ?? 0) !== setup.afterNumber) throw someoneWasFaster(before?.number ?? 0);
    try {
      const row = await tables.setups.create(rowOf(context, setup), { transaction });
      work.audit({
        action: 'setup.add',
        subject: { kind: 'setup', id: row.id, text: `${bench.name}, setup ${row.number}` },
        before: before?.get({ plain: true }) ?? null,
        after: row.get({ plain: true }),
      });
      return { setupId: row.id, number: row.number };
    } catch (problem) {
      if (problem instanceof UniqueConstraintError) throw someoneWasFaster(setup.afterNumber + 1);
      throw problem;
    }
  });
}

function someoneWasFaster(newest: number): AppError {
  return new AppError(
    'CHANGED_MEANWHILE',
    `Somebody entered setup ${newest} meanwhile. Look at it before you enter yours.`,
  );
}

function rowOf(context: CommandContext, setup: NewSetup) {
  return {
    benchId: setup.benchId,
    number: setup.afterNumber + 1,
    plate: setup.plate,
    scaleUmPerPx: setup.scaleUmPerPx.value,
    scaleStated: setup.scaleUmPerPx.stated,
    scaleK: setup.scaleUmPerPx.k,
    scaleCertificate: setup.scaleUmPerPx.certificate,
    scaleDue: setup.scaleUmPerPx.due,
    separationUm: setup.separationUm.value,
    separationStated: setup.separationUm.stated,
    separationK: setup.separationUm.k,
    separationCertificate: setup.separationUm.certificate,
    separationDue: setup.separationUm.due,
    widthUm: setup.widthUm.value,
    widthStated: setup.widthUm.stated,
    widthK: setup.widthUm.k,
    widthCertificate: setup.widthUm.certificate,
    widthDue: setup.widthUm.due,
    distanceMm: setup.distanceMm.value,
    distanceStated: setup.distanceMm.stated,
    distanceK: setup.distanceMm.k,
    distanceCertificate: setup.distanceMm.certificate,
    distanceDue: setup.distanceMm.due,
    remountUNm: setup.remountNm?.u ?? null,
    remountDof: setup.remountNm?.dof ?? null,
    tone: setup.tone,
    why: setup.why,
    enteredBy: context.actor.id,
    enteredAt: context.at,
  };
}
