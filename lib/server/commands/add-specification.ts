import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import type { specificationSchema } from '@/lib/domain/schemas';
import type { DecisionRule } from '@/lib/domain/specification';
import type { CommandContext } from '../context';
import { db } from '../db';
import { inTransaction } from '../transaction';

/** No verdict when U is more than this share of half the tolerance, where the specification says nothing else. */
const usualRatio = (rule: DecisionRule) => (rule === 'simple' ? 1 / 3 : 1);

type NewSpecification = Omit<z.output<typeof specificationSchema>, 'atTemperature' | 'method'> &
  Partial<Pick<z.output<typeof specificationSchema>, 'atTemperature' | 'method'>>;

export async function addSpecification(
  context: CommandContext,
  wanted: NewSpecification,
): Promise<{ specificationId: number }> {
  const { rule, lowerNm, upperNm, atTemperature, ...rest } = wanted;
  const half = lowerNm !== null && upperNm !== null ? (upperNm - lowerNm) / 2 : wanted.halfToleranceNm;
  if (half === null) throw new AppError('BAD_INPUT', 'With one limit only, state half the tolerance.');
  const values = {
    ...rest,
    lowerNm,
    upperNm,
    halfToleranceNm: half,
    ratio: wanted.ratio ?? usualRatio(rule),
  };
  return inTransaction(context, async (work) => {
    try {
      const { id } = await db().tables.specifications.create(
        {
          ...values,
          decisionRule: rule,
          atTemperatureC: atTemperature?.temperatureC ?? null,
          nmPerK: atTemperature?.nmPerK ?? null,
          uNmPerK: atTemperature?.uNmPerK ?? null,
          createdBy: context.actor.id,
          createdAt: context.at,
        },
        { transaction: work.transaction },
      );
      work.audit({
        action: 'specification.add',
        subject: { kind: 'specification', id, text: wanted.name },
        before: null,
        after: { ...values, rule, atTemperature },
      });
      return { specificationId: id };
    } catch (problem) {
      if (!(problem instanceof UniqueConstraintError)) throw problem;
      throw new AppError('ALREADY_THERE', 'There is a specification of this name.', {
        name: 'There is one of this name.',
      });
    }
  });
}

/** Lots keep their specification; a retired one is no longer offered for new lots. */
export async function retireSpecification(context: CommandContext, { id }: { id: number }): Promise<null> {
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const row = await db().tables.specifications.findByPk(id, { transaction, lock: transaction.LOCK.UPDATE });
    if (!row) throw new AppError('NOT_FOUND', 'There is no such specification.');
    if (row.retiredAt) throw new AppError('WRONG_STATE', 'This specification is retired already.');
    await row.update({ retiredAt: context.at }, { transaction });
    work.audit({
      action: 'specification.retire',
      subject: { kind: 'specification', id, text: row.name },
      before: { retired: false },
      after: { retired: true },
    });
    return null;
  });
}
