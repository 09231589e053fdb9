import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import type { renewSourceSchema, sourceSchema } from '@/lib/domain/source-schemas';
import type { CommandContext } from '../context';
import { db } from '../db';
import { requireCertificate } from '../queries/certificates';
import { inTransaction, type Work } from '../transaction';

type NewSource = z.output<typeof sourceSchema>;
type Certified = Pick<NewSource, 'vacuumNm' | 'uNm' | 'certificate' | 'file' | 'due'>;

export async function addSource(context: CommandContext, source: NewSource): Promise<{ sourceId: number }> {
  return inTransaction(context, async (work) => {
    await requireCertificate(source.file, 'file', work.transaction);
    try {
      const { id } = await db().tables.sources.create(
        { ...source, createdBy: context.actor.id, createdAt: context.at },
        { transaction: work.transaction },
      );
      await keepRevision(work, context, id, 1, source);
      work.audit({
        action: 'source.add',
        subject: { kind: 'source', id, text: source.name },
        before: null,
        after: source,
      });
      return { sourceId: id };
    } catch (problem) {
      if (!(problem instanceof UniqueConstraintError)) throw problem;
      throw new AppError('ALREADY_THERE', 'There is a source of this name.', {
        name: 'There is a source of this name.',
      });
    }
  });
}

/** A new certificate of a source. The earlier ones, and the checks made with them, stay as they are. */
export async function renewSource(
  context: CommandContext,
  { sourceId, afterNumber, ...certified }: z.output<typeof renewSourceSchema>,
): Promise<{ number: number }> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const source = await tables.sources.findByPk(sourceId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!source) throw new AppError('NOT_FOUND', 'There is no such source.');
    const newest = await tables.sourceCertificates.findOne({
      where: { sourceId },
      order: [['number', 'DESC']],
      transaction,
      rejectOnEmpty: true,
    });
    if (newest.number !== afterNumber) {
      throw new AppError(
        'CHANGED_MEANWHILE',
        'Somebody entered another certificate of this source meanwhile. Look at it before you enter yours.',
      );
    }
    await requireCertificate(certified.file, 'file', transaction);
    const { vacuumNm, uNm, certificate, file, due } = source;
    await keepRevision(work, context, sourceId, newest.number + 1, certified);
    await source.update(certified, { transaction });
    work.audit({
      action: 'source.renew',
      subject: { kind: 'source', id: sourceId, text: source.name },
      before: { vacuumNm, uNm, certificate, file, due },
      after: certified,
    });
    return { number: newest.number + 1 };
  });
}

async function keepRevision(
  work: Work,
  context: CommandContext,
  sourceId: number,
  number: number,
  { vacuumNm, uNm, certificate, file, due }: Certified,
): Promise<void> {
  await db().tables.sourceCertificates.create(
    {
      sourceId,
      number,
      vacuumNm,
      uNm,
      certificate,
      file,
      due,
      enteredBy: context.actor.id,
      enteredAt: context.at,
    },
    { transaction: work.transaction },
  );
}
