import 'server-only';
import { daysUntil } from '@/lib/domain/due';
import { SETUP_VALUES } from '@/lib/domain/setup';
import { formatCalendarDate } from '@/lib/quantity/format';
import { db, select } from './db';
import { isMounted } from './plate-mounts';
import { fourValues } from './setups';
import { EVER_IN_FORCE } from './setup-timeline';

interface Facts {
  bench_id: number;
  bench: string;
  received_at: Date;
  source: string | null;
  source_due: string | null;
  is_approved: number;
}

/**
 * What the bench's own records say against accepting a reading: a certificate that has run out (of the setup's values,
 * the plate's among them, or of the reference source), a setup nobody approved, a plate that was not on the bench when
 * the frame was taken. One sentence, or null.
 */
export async function whyNotAcceptable(
  { frameId, setupId }: { frameId: number; setupId: number },
  at: Date,
): Promise<string | null> {
  const [facts] = await select<Facts>(
    `SELECT f.bench_id, b.name AS bench, f.received_at, so.name AS source,
       DATE_FORMAT(so.due, '%Y-%m-%d') AS source_due,
       EXISTS (SELECT 1 FROM setups s LEFT JOIN setup_decisions d ON d.setup_id = s.id
         WHERE s.id = :setupId AND ${EVER_IN_FORCE}) AS is_approved
     FROM frames f JOIN benches b ON b.id = f.bench_id LEFT JOIN sources so ON so.id = f.source_id
     WHERE f.id = :frameId`,
    { frameId, setupId },
  );
  const setup = await db().tables.setups.findByPk(setupId, { rejectOnEmpty: true });
  if (!facts.is_approved)
    return `Setup ${setup.number} has not been approved, so its readings cannot be accepted. QA decides on it under Benches.`;
  const four = fourValues(setup);
  for (const { key, name } of SETUP_VALUES) {
    const { due } = four[key];
    if (due !== null && daysUntil(due, at) < 0)
      return `${name} of setup ${setup.number} is overdue since ${formatCalendarDate(due)}, so its readings cannot be accepted. An admin enters a setup with the new certificate.`;
  }
  const { source, source_due: sourceDue } = facts;
  if (source !== null && sourceDue !== null && daysUntil(sourceDue, at) < 0)
    return `The certificate of ${source} is overdue since ${formatCalendarDate(sourceDue)}, so its readings cannot be accepted. Renew it under Sources.`;
  if (!(await isMounted(facts.bench_id, setupId, facts.received_at)))
    return `Plate ${setup.plate} was not on ${facts.bench} when this frame was taken, so its reading cannot be accepted. Put the plate on the bench under Plates and take the frame again.`;
  return null;
}
