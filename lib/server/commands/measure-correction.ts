import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { FitOptions } from '@/lib/domain/reading-result';
import type { ScanOptions } from '@/lib/domain/scan-result';
import { valueIn } from '@/lib/quantity/value-in';
import { canonicalJson } from '../canonical';
import type { CommandContext } from '../context';
import { correctedReadings, correctedTime } from '../corrections';
import { db, select } from '../db';
import { fitFacts, loadFrame } from '../frame-facts';
import { fitInPool, isScan } from '../scan-frames';
import { originalKey, readObject } from '../storage';

/**
 * Measures one more reading with the values of a correction that waits for QA, and keeps what came of it. Answers false
 * when nothing is left to measure.
 */
export async function measureCorrection(context: CommandContext): Promise<boolean> {
  const waiting = await select<{ id: number }>(
    `SELECT s.id FROM setups s LEFT JOIN setup_decisions d ON d.setup_id = s.id
     WHERE s.corrects AND d.setup_id IS NULL ORDER BY s.id`,
  );
  for (const { id } of waiting) {
    const time = await correctedTime(id);
    const open = time ? (await correctedReadings(time)).find(({ isMeasured }) => !isMeasured) : undefined;
    if (!open) continue;
    await measure(context, id, open);
    return true;
  }
  return false;
}

async function measure(
  context: CommandContext,
  setupId: number,
  { readingId, frameId }: { readingId: number; frameId: number },
): Promise<void> {
  const { tables } = db();
  const frame = await loadFrame(frameId);
  const reading = await tables.readings.findByPk(readingId, { rejectOnEmpty: true });
  const facts = await fitFacts({ ...frame.get({ plain: true }), setupId });
  const kept = JSON.parse(reading.optionsJson) as FitOptions & ScanOptions;
  // The person's region and choices stay; the tone is the setup's, and bands are cut anew.
  const { stack: _bands, ...choices } = kept;
  const options: FitOptions | ScanOptions = isScan(frame) ? kept : { ...choices, tone: facts.tone };
  const bytes = await readObject(originalKey(frame.sha256));
  const answer = bytes ? await fitInPool(bytes, facts.setup, options) : null;
  const row = { setupId, readingId, madeAt: context.at };
  const nothing = { valueNm: null, expandedNm: null, verdict: null, optionsJson: null, resultJson: null };
  const value = answer?.ok ? valueIn(answer, facts) : null;
  await tables.correctionFits
    .create(
      answer?.ok
        ? {
            ...row,
            message: null,
            valueNm: value?.valueNm ?? null,
            expandedNm: value?.expandedNm ?? null,
            verdict: value?.judgement?.verdict ?? null,
            optionsJson: canonicalJson(options),
            resultJson: canonicalJson(answer),
          }
        : {
            ...row,
            ...nothing,
            message: (answer?.message ?? 'The stored bytes of this frame are gone.').slice(0, 1000),
          },
    )
    .catch((problem: unknown) => {
      // Another server of the product was faster; both measured the same.
      if (!(problem instanceof UniqueConstraintError)) throw problem;
    });
}
