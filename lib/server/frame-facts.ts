import 'server-only';
import type { Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { Specification } from '@/lib/domain/specification';
import type { FitFacts } from '@/lib/domain/views';
import { db } from './db';
import { setupValues } from './setups';

export type { FitFacts };

export async function fitFacts(
  frame: { setupId: number; lotId: number | null },
  transaction?: Transaction,
): Promise<FitFacts> {
  const { tables } = db();
  const setup = await tables.setups.findByPk(frame.setupId, { transaction, rejectOnEmpty: true });
  return {
    setup: setupValues(setup),
    tone: setup.tone,
    specification: frame.lotId === null ? null : await specificationOf(frame.lotId, transaction),
  };
}

async function specificationOf(lotId: number, transaction?: Transaction): Promise<Specification> {
  const { tables } = db();
  const lot = await tables.lots.findByPk(lotId, { transaction, rejectOnEmpty: true });
  const row = await tables.specifications.findByPk(lot.specificationId, { transaction, rejectOnEmpty: true });
  const { name, nominalNm, medium, lowerNm, upperNm, decisionRule, ownGuardNm, ratio, halfToleranceNm } = row;
  return {
    name,
    nominalNm,
    medium,
    lowerNm,
    upperNm,
    rule: decisionRule,
    ownGuardNm,
    ratio,
    halfToleranceNm,
  };
}

export async function loadFrame(frameId: number, transaction?: Transaction) {
  const frame = await db().tables.frames.findByPk(frameId, { transaction });
  if (!frame) throw new AppError('NOT_FOUND', 'There is no such frame.');
  return frame;
}
