import 'server-only';
import type { Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { Specification } from '@/lib/domain/specification';
import type { FitFacts } from '@/lib/domain/views';
import { comparisonFacts } from './comparison-facts';
import { conditionValues, frameConditions } from './conditions';
import { db, select } from './db';
import {
  SPECIFICATION_COLUMNS,
  specificationOf,
  type SpecificationColumns,
} from './queries/specification-columns';
import { setupValues } from './setups';

export type { FitFacts };

/** What of a frame decides with what it is fitted and judged. */
interface FrameForFit {
  id: number;
  benchId: number;
  receivedAt: Date;
  mediaType: string;
  setupId: number;
  lotId: number | null;
}

export async function fitFacts(frame: FrameForFit, transaction?: Transaction): Promise<FitFacts> {
  const { tables } = db();
  const setup = await tables.setups.findByPk(frame.setupId, { transaction, rejectOnEmpty: true });
  const specification = frame.lotId === null ? null : await specificationOfLot(frame.lotId, transaction);
  return {
    setup: { ...setupValues(setup), ...conditionValues(await frameConditions(frame, transaction)) },
    tone: setup.tone,
    specification,
    comparison: specification && (await comparisonFacts(frame, specification, transaction)),
  };
}

async function specificationOfLot(lotId: number, transaction?: Transaction): Promise<Specification> {
  const [row] = await select<SpecificationColumns>(
    `SELECT ${SPECIFICATION_COLUMNS} FROM lots l JOIN specifications sp ON sp.id = l.specification_id WHERE l.id = :lotId`,
    { lotId },
    transaction,
  );
  return specificationOf(row);
}

export async function loadFrame(frameId: number, transaction?: Transaction) {
  const frame = await db().tables.frames.findByPk(frameId, { transaction });
  if (!frame) throw new AppError('NOT_FOUND', 'There is no such frame.');
  return frame;
}
