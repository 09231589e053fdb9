import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { CommandContext } from '../context';
import { db } from '../db';
import { inTransaction } from '../transaction';

export async function addBench(
  context: CommandContext,
  bench: { name: string; note: string },
): Promise<{ benchId: number }> {
  return inTransaction(context, async (work) => {
    try {
      const { id } = await db().tables.benches.create(
        { ...bench, createdBy: context.actor.id, createdAt: context.at },
        { transaction: work.transaction },
      );
      work.audit({
        action: 'bench.add',
        subject: { kind: 'bench', id, text: bench.name },
        before: null,
        after: bench,
      });
      return { benchId: id };
    } catch (problem) {
      if (!(problem instanceof UniqueConstraintError)) throw problem;
      throw new AppError('ALREADY_THERE', 'There is a bench of this name.', {
        name: 'There is a bench of this name.',
      });
    }
  });
}
