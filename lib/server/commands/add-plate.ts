import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import type { plateSchema, renewPlateSchema } from '@/lib/domain/setup-schemas';
import type { CommandContext } from '../context';
import { db } from '../db';
import { requireConfirmed } from '../plausible';
import { lockPlate } from '../plate-mounts';
import { requireCertificate } from '../queries/certificates';
import { inTransaction, type Work } from '../transaction';

type NewPlate = z.output<typeof plateSchema>;
type Certified = Omit<NewPlate, 'name' | 'note'>;

export async function addPlate(
  context: CommandContext,
  { name, note, ...certified }: NewPlate,
): Promise<{ plateId: number; certificateId: number }> {
  return inTransaction(context, async (work) => {
    try {
      const { id } = await db().tables.plates.create(
        { name, note, createdBy: context.actor.id, createdAt: context.at },
        { transaction: work.transaction },
      );
      const certificateId = await keepRevision(work, context, id, 1, certified, null);
      work.audit({
        action: 'plate.add',
        subject: { kind: 'plate', id, text: `Plate ${name}` },
        before: null,
        after: { name, note, ...certified },
      });
      return { plateId: id, certificateId };
    } catch (problem) {
      if (!(problem instanceof UniqueConstraintError)) throw problem;
      throw new AppError('ALREADY_THERE', 'There is a plate of this name.', {
        name: 'There is a plate of this name.',
      });
    }
  });
}

/** A new certificate of a plate. Setups keep the copy they took; a new setup takes the new values. */
export async function renewPlate(
  context: CommandContext,
  { plateId, afterNumber, ...certified }: z.output<typeof renewPlateSchema>,
): Promise<{ certificateId: number; number: number }> {
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const plate = await lockPlate(work, plateId);
    const newest = await db().tables.plateCertificates.findOne({
      where: { plateId },
      order: [['number', 'DESC']],
      transaction,
      rejectOnEmpty: true,
    });
    if (newest.number !== afterNumber) {
      throw new AppError(
        'CHANGED_MEANWHILE',
        'Somebody entered another certificate of this plate meanwhile. Look at it before you enter yours.',
      );
    }
    const certificateId = await keepRevision(work, context, plateId, newest.number + 1, certified, newest);
    work.audit({
      action: 'plate.renew',
      subject: { kind: 'plate', id: plateId, text: `Plate ${plate.name}` },
      before: newest.get({ plain: true }),
      after: certified,
    });
    return { certificateId, number: newest.number + 1 };
  });
}

async function keepRevision(
  work: Work,
  context: CommandContext,
  plateId: number,
  number: number,
  certified: Certified,
  before: { separationUm: number; widthUm: number } | null,
): Promise<number> {
  const { separationUm: separation, widthUm: width, certificate, file, due } = certified;
  await requireCertificate(file, 'file', work.transaction);
  const confirmed = requireConfirmed(
    (['separationUm', 'widthUm'] as const).map((key) => ({
      key,
      value: certified[key].value,
      before: before?.[key] ?? null,
      reason: certified.confirmed[key],
    })),
  );
  const row = await db().tables.plateCertificates.create(
    {
      plateId,
      number,
      separationUm: separation.value,
      separationStated: separation.stated,
      separationShape: separation.shape,
      separationK: separation.k,
      separationDof: separation.dof,
      widthUm: width.value,
      widthStated: width.stated,
      widthShape: width.shape,
      widthK: width.k,
      widthDof: width.dof,
      certificate,
      file,
      due,
      confirmedJson: JSON.stringify(confirmed),
      enteredBy: context.actor.id,
      enteredAt: context.at,
    },
    { transaction: work.transaction },
  );
  return row.id;
}
