import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import type { ConfirmedValue } from '@/lib/domain/setup';
import type { setupSchema } from '@/lib/domain/setup-schemas';
import type { Plate } from '@/models/plate';
import type { PlateCertificate } from '@/models/plate-certificate';
import type { CommandContext } from '../context';
import { db } from '../db';
import { mailText, peopleWith } from '../people-mail';
import { requireConfirmed } from '../plausible';
import { requireCertificate } from '../queries/certificates';
import { changeBetween, type StatedColumns } from '../setups';
import { setupAt, waitingNumber } from '../setup-timeline';
import { inTransaction, type Work } from '../transaction';

type NewSetup = z.output<typeof setupSchema>;

/** What is entered with a setup; separation and width come from the plate's certificate. */
const OF_THE_BENCH = ['distanceMm', 'scaleUmPerPx'] as const;

/**
 * Proposes a setup. It comes into force when somebody else approves it; earlier ones, and the readings made with them,
 * stay as they are. One in force from a moment that has passed corrects the readings since. One proposal of a bench waits at a time, so that what it changes stays what it said.
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
    const wanted = setup.inForceFrom === null ? context.at : new Date(setup.inForceFrom);
    const corrects = wanted < context.at;
    const inForce = await setupAt(bench.id, corrects ? wanted : context.at, transaction);
    if (corrects && !inForce) throw nothingThen();
    const before = inForce ? await tables.setups.findByPk(inForce.id, { transaction }) : null;
    const confirmed = requireConfirmed(
      OF_THE_BENCH.map((key) => ({
        key,
        value: setup[key].value,
        before: before?.[key] ?? null,
        reason: setup.confirmed[key],
      })),
    );
    for (const key of OF_THE_BENCH) await requireCertificate(setup[key].file, `${key}.file`, transaction);
    const { plate, certificate } = await plateOf(setup, work);
    try {
      const row = await tables.setups.create(
        { ...rowOf(context, setup, confirmed), ...plateColumns(plate, certificate), corrects },
        { transaction },
      );
      await tables.setupPlates.create(
        { setupId: row.id, plateId: plate.id, certificateId: certificate.id },
        { transaction },
      );
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

function nothingThen(): AppError {
  const message =
    'No setup of this bench was in force at that moment, so there is nothing to correct. Choose a later one.';
  return new AppError('BAD_INPUT', message, { inForceFrom: message });
}

/** The plate with the newest of its certificates, which has to be the one the person saw. */
async function plateOf(
  setup: NewSetup,
  work: Work,
): Promise<{ plate: Plate; certificate: PlateCertificate }> {
  const { tables } = db();
  const { transaction } = work;
  const plate = await tables.plates.findByPk(setup.plateId, { transaction });
  const certificate = await tables.plateCertificates.findOne({
    where: { plateId: setup.plateId },
    order: [['number', 'DESC']],
    transaction,
  });
  if (!plate || !certificate) {
    throw new AppError('BAD_INPUT', 'Choose the slit plate.', { plateId: 'There is no such plate.' });
  }
  if (certificate.id !== setup.plateCertificateId) {
    throw new AppError(
      'CHANGED_MEANWHILE',
      `Somebody entered a new certificate of plate ${plate.name} meanwhile. Load the page to see its values.`,
    );
  }
  return { plate, certificate };
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

/** The copy of a plate's values that a setup keeps. */
function plateColumns(plate: Plate, row: PlateCertificate) {
  const { certificate, file, due } = row;
  const { separationStated, separationShape, separationK, separationDof } = row;
  const { widthStated, widthShape, widthK, widthDof } = row;
  return {
    plate: plate.name,
    separationUm: row.separationUm,
    ...{ separationStated, separationShape, separationK, separationDof },
    ...{ separationCertificate: certificate, separationFile: file, separationDue: due },
    widthUm: row.widthUm,
    ...{ widthStated, widthShape, widthK, widthDof },
    ...{ widthCertificate: certificate, widthFile: file, widthDue: due },
  };
}

function rowOf(context: CommandContext, setup: NewSetup, confirmed: ConfirmedValue[]) {
  return {
    benchId: setup.benchId,
    number: setup.afterNumber + 1,
    scaleUmPerPx: setup.scaleUmPerPx.value,
    ...columnsOf('scale', setup.scaleUmPerPx),
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
