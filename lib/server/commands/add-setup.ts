import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { SETUP_VALUES, type ConfirmedValue } from '@/lib/domain/setup';
import { oddness } from '@/lib/domain/setup-plausibility';
import type { setupSchema } from '@/lib/domain/setup-schemas';
import type { CommandContext } from '../context';
import { db } from '../db';
import { mailText, peopleWith } from '../people-mail';
import { requireCertificate } from '../queries/certificates';
import { changeBetween, type SetupConstants, type StatedColumns } from '../setups';
import { setupAt, waitingNumber } from '../setup-timeline';
import { inTransaction, type Work } from '../transaction';

type NewSetup = z.output<typeof setupSchema>;

/**
 * Proposes a setup. It comes into force when somebody else approves it; earlier ones, and the readings made with them,
 * stay as they are. One proposal of a bench waits at a time, so that what it changes stays what it said.
 */
export async function addSetup(
  context: CommandContext,
  setup: NewSetup,
): Promise<{ setupId: number; number: number }> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const bench = await tables.benches.findByPk(setup.benchId, {
      transaction,
      lock: transaction.LOCK.UPDATE,
    });
    if (!bench) throw new AppError('NOT_FOUND', 'There is no such bench.');
    const newest = await tables.setups.findOne({
      where: { benchId: bench.id },
      order: [['number', 'DESC']],
      transaction,
    });
    if ((newest?.number ?? 0) !== setup.afterNumber) throw someoneWasFaster(newest?.number ?? 0);
    const waiting = await waitingNumber(bench.id, transaction);
    if (waiting !== null) {
      throw new AppError(
        'WRONG_STATE',
        `Setup ${waiting} of ${bench.name} waits for QA already. It is decided on, or taken back, before another is entered.`,
      );
    }
    requireFuture(context, setup.inForceFrom);
    const inForce = await setupAt(bench.id, context.at, transaction);
    const before = inForce ? await tables.setups.findByPk(inForce.id, { transaction }) : null;
    const confirmed = requireConfirmed(setup, before);
    for (const { key } of SETUP_VALUES) await requireCertificate(setup[key].file, `${key}.file`, transaction);
    try {
      const row = await tables.setups.create(rowOf(context, setup, confirmed), { transaction });
      work.audit({
        action: 'setup.add',
        subject: { kind: 'setup', id: row.id, text: `${bench.name}, setup ${row.number}` },
        before: before?.get({ plain: true }) ?? null,
        after: row.get({ plain: true }),
      });
      await tellQa(work, context, bench, row.number, changeBetween(before, row).change, setup.why);
      return { setupId: row.id, number: row.number };
    } catch (problem) {
      if (problem instanceof UniqueConstraintError) throw someoneWasFaster(setup.afterNumber + 1);
      throw problem;
    }
  });
}

function someoneWasFaster(newest: number): AppError {
  return new AppError(
    'CHANGED_MEANWHILE',
    `Somebody entered setup ${newest} meanwhile. Look at it before you enter yours.`,
  );
}

function requireFuture(context: CommandContext, wanted: string | null): void {
  if (wanted === null || new Date(wanted) > context.at) return;
  const message =
    'This moment has passed: frames taken since have been measured with the setup that was in force. Choose a later one, or “as soon as it is approved”.';
  throw new AppError('BAD_INPUT', message, { inForceFrom: message });
}

/** What looks odd needs a reason; what does not, keeps none. */
function requireConfirmed(setup: NewSetup, before: SetupConstants | null): ConfirmedValue[] {
  const open: Record<string, string> = {};
  const confirmed = SETUP_VALUES.flatMap(({ key }): ConfirmedValue[] => {
    // Another plate has another separation and width by right.
    const isOfPlate = key === 'separationUm' || key === 'widthUm';
    const comparable = before && !(isOfPlate && before.plate !== setup.plate) ? before[key] : null;
    const seen = oddness(key, setup[key].value, comparable);
    if (!seen) return [];
    const reason = setup.confirmed[key];
    if (!reason) open[`confirmed.${key}`] = `${seen} If it is right, say why.`;
    return [{ key, seen, reason }];
  });
  const [first] = Object.values(open);
  if (first) throw new AppError('BAD_INPUT', first, open);
  return confirmed;
}

async function tellQa(
  work: Work,
  context: CommandContext,
  bench: { id: number; name: string },
  number: number,
  change: string,
  why: string,
): Promise<void> {
  for (const person of await peopleWith(['qa'], work.transaction)) {
    if (person.id === context.actor.id) continue;
    await work.mail({
      to: person.email,
      subject: `${bench.name}: setup ${number} waits for QA`,
      text: mailText(
        person.name,
        [
          `${context.actor.name} entered setup ${number} of ${bench.name}. It comes into force when QA approves it.`,
          `What changes: ${change || 'it is the first setup of this bench'}.`,
          `Why: ${why}`,
        ],
        `/benches/${bench.id}`,
      ),
    });
  }
}

function columnsOf<Name extends string>(name: Name, stated: Omit<StatedColumns, 'value'>) {
  const { stated: plusMinus, shape, k, dof, certificate, file, due } = stated;
  return {
    [`${name}Stated`]: plusMinus,
    [`${name}Shape`]: shape,
    [`${name}K`]: k,
    [`${name}Dof`]: dof,
    [`${name}Certificate`]: certificate,
    [`${name}File`]: file,
    [`${name}Due`]: due,
  } as {
    [Part in Exclude<keyof StatedColumns, 'value'> as `${Name}${Capitalize<Part>}`]: StatedColumns[Part];
  };
}

function rowOf(context: CommandContext, setup: NewSetup, confirmed: ConfirmedValue[]) {
  return {
    benchId: setup.benchId,
    number: setup.afterNumber + 1,
    plate: setup.plate,
    scaleUmPerPx: setup.scaleUmPerPx.value,
    ...columnsOf('scale', setup.scaleUmPerPx),
    separationUm: setup.separationUm.value,
    ...columnsOf('separation', setup.separationUm),
    widthUm: setup.widthUm.value,
    ...columnsOf('width', setup.widthUm),
    distanceMm: setup.distanceMm.value,
    ...columnsOf('distance', setup.distanceMm),
    remountUNm: setup.remountNm?.u ?? null,
    remountDof: setup.remountNm?.dof ?? null,
    tone: setup.tone,
    cameraModel: setup.camera.model,
    cameraSerial: setup.camera.serial,
    cameraBits: setup.camera.bits,
    why: setup.why,
    confirmedJson: JSON.stringify(confirmed),
    needsApproval: true,
    wantedFrom: setup.inForceFrom === null ? null : new Date(setup.inForceFrom),
    enteredBy: context.actor.id,
    enteredAt: context.at,
  };
}
