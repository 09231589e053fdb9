import 'server-only';
import type { Trial } from '@/lib/domain/review-schemas';
import { canonicalJson } from './canonical';
import type { CommandContext } from './context';
import { db } from './db';
import type { Work } from './transaction';

interface Of {
  frameId: number;
  fromReadingId: number | null;
  /** The reading that came of them; null where the change was dropped or left. */
  keptReadingId: number | null;
}

/** Writes the regions a person tried, in the order they were tried. */
export async function storeTrials(
  work: Work,
  context: CommandContext,
  of: Of,
  trials: readonly Trial[],
): Promise<void> {
  await db().tables.regionTrials.bulkCreate(
    trials.map(({ valueNm, expandedNm, problem, agoMs, ...change }) => ({
      ...of,
      changeJson: canonicalJson(change),
      valueNm,
      expandedNm,
      problem: problem?.slice(0, 300) ?? null,
      triedBy: context.actor.id,
      triedAt: new Date(context.at.getTime() - agoMs),
    })),
    { transaction: work.transaction },
  );
}
