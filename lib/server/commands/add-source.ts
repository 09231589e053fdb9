import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { CommandContext } from '../context';
import { db } from '../db';
import { inTransaction } from '../transaction';

export async function addSource(
  context: CommandContext,
  source: { name: string; vacuumNm: number; uNm: number; note: string },
): Promise<{ sourceId: number }> {
  return inTransaction(context, async (work) => {
    try {
      const { id } = await db().tables.sources.create(
        { ...source, createdBy: context.actor.id, createdAt: context.at },
        { transaction: work.transaction },
      );
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
