import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { CommandContext } from '../context';
import { db } from '../db';
import { inTransaction } from '../transaction';

export async function openLot(
  context: CommandContext,
  lot: { number: string; specificationId: number; supplier: string },
): Promise<{ lotId: number }> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const specification = await tables.specifications.findByPk(lot.specificationId, { transaction });
    if (!specification) throw new AppError('NOT_FOUND', 'There is no such specification.');
    if (specification.retiredAt)
      throw new AppError('WRONG_STATE', 'This specification is retired. Choose another one.');
    try {
      const { id } = await tables.lots.create(
        { ...lot, openedBy: context.actor.id, openedAt: context.at },
        { transaction },
      );
      work.audit({
        action: 'lot.open',
        subject: { kind: 'lot', id, text: `Lot ${lot.number}` },
        before: null,
        after: { ...lot, specification: specification.name },
      });
      return { lotId: id };
    } catch (problem) {
      if (!(problem instanceof UniqueConstraintError)) throw problem;
      throw new AppError('ALREADY_THERE', 'There is a lot of this number.', {
        number: 'There is a lot of this number.',
      });
    }
  });
}

/** Adds units by their serials; those the lot has already are left as they are. */
export async function addUnits(
  context: CommandContext,
  { lotId, serials }: { lotId: number; serials: string[] },
): Promise<{ added: number; already: number }> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const lot = await tables.lots.findByPk(lotId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!lot) throw new AppError('NOT_FOUND', 'There is no such lot.');
    if (lot.closedAt) throw new AppError('WRONG_STATE', 'This lot is closed.');
    const known = await tables.units.findAll({ where: { lotId }, attributes: ['serial'], transaction });
    // The database compares without case, so does this.
    const seen = new Set(known.map((unit) => unit.serial.toLowerCase()));
    const fresh = serials.filter(
      (serial) => !seen.has(serial.toLowerCase()) && Boolean(seen.add(serial.toLowerCase())),
    );
    await tables.units.bulkCreate(
      fresh.map((serial) => ({ lotId, serial, addedAt: context.at })),
      { transaction },
    );
    if (fresh.length) {
      work.audit({
        action: 'units.add',
        subject: { kind: 'lot', id: lotId, text: `Lot ${lot.number}` },
        before: { units: known.length },
        after: { units: known.length + fresh.length, added: fresh },
      });
    }
    return { added: fresh.length, already: serials.length - fresh.length };
  });
}
