import 'server-only';
import type { Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import { FIRST_RULE, standingAfter, type BenchRule, type BenchStanding } from '@/lib/domain/references';
import type { Method } from '@/lib/domain/specification';
import type { BenchFitness } from '@/lib/domain/views';
import { airFromVacuum } from '@/lib/quantity/air-index';
import { formatQuantity, formatSigned, placesFor } from '@/lib/quantity/format';
import { explain, referenceCheck } from '@/lib/quantity/reference-check';
import type { CommandContext } from './context';
import { db, select } from './db';
import { env } from './env';
import { explanationText } from '@/lib/quantity/explanation-text';
import { fourValues } from './setups';
import type { Work } from './transaction';

export async function benchRule(benchId: number, transaction?: Transaction): Promise<BenchRule> {
  const [rule] = await select<{ limitNm: number | null; method: Method }>(
    'SELECT limit_nm AS limitNm, method FROM bench_rules WHERE bench_id = :benchId ORDER BY id DESC LIMIT 1',
    { benchId },
    transaction,
  );
  return rule ?? FIRST_RULE;
}

interface OpenStop {
  id: number;
  at: Date;
}

export async function openStop(benchId: number, transaction?: Transaction): Promise<OpenStop | null> {
  const [stop] = await select<OpenStop>(
    `SELECT s.id, s.stopped_at AS at FROM bench_stops s LEFT JOIN bench_releases r ON r.stop_id = s.id
     WHERE s.bench_id = :benchId AND r.stop_id IS NULL ORDER BY s.id DESC LIMIT 1`,
    { benchId },
    transaction,
  );
  return stop ?? null;
}

/** Checks of a bench since its last release, oldest first; as many as can matter. */
async function checksSinceRelease(benchId: number, transaction?: Transaction) {
  const rows = await select<{ setupId: number; inside: number }>(
    `SELECT setup_id AS setupId, inside FROM reference_checks WHERE bench_id = :benchId AND id > COALESCE(
       (SELECT MAX(r.after_check_id) FROM bench_releases r JOIN bench_stops s ON s.id = r.stop_id WHERE s.bench_id = :benchId), 0)
     ORDER BY id DESC LIMIT 10`,
    { benchId },
    transaction,
  );
  return rows.map(({ setupId, inside }) => ({ setupId, inside: Boolean(inside) })).reverse();
}

export async function standingOf(benchId: number): Promise<BenchStanding> {
  if (await openStop(benchId)) return 'stopped';
  const standing = standingAfter(await checksSinceRelease(benchId));
  // Two outside without a stop cannot be: the stop is written with the second. A release lies between.
  return standing === 'stop' ? 'repeat' : standing;
}

/** What the checks add to the fitness of a bench: a stop goes before everything, a repeat before what is calm. */
export function fitnessWithChecks(fitness: BenchFitness, standing: BenchStanding): BenchFitness {
  if (standing === 'stopped') return { word: 'stop', text: 'stopped by its checks: take, not accept' };
  if (standing === 'repeat' && fitness.word === 'clear')
    return { word: 'look', text: 'reference check outside: repeat it' };
  return fitness;
}

interface Checked {
  benchId: number;
  bench: string;
  setupId: number;
  sourceId: number | null;
  isReference: number;
  vacuumNm: number | null;
  uNm: number | null;
  valueNm: number | null;
  uValueNm: number | null;
  dof: number | null;
}

async function checkedReading(readingId: number, transaction?: Transaction): Promise<Checked> {
  const [row] = await select<Checked>(
    `SELECT r.bench_id AS benchId, b.name AS bench, r.setup_id AS setupId, r.source_id AS sourceId,
       COALESCE(so.is_reference, FALSE) AS isReference, so.vacuum_nm AS vacuumNm, so.u_nm AS uNm, r.value_nm AS valueNm, r.u_nm AS uValueNm, r.dof
     FROM readings r JOIN benches b ON b.id = r.bench_id LEFT JOIN sources so ON so.id = r.source_id WHERE r.id = :readingId`,
    { readingId },
    transaction,
  );
  if (!row) throw new AppError('NOT_FOUND', 'There is no such reading.');
  return row;
}

const isCheck = ({ isReference, vacuumNm }: Checked) => Boolean(isReference) && vacuumNm !== null;

/**
 * Why readings of this reading's bench cannot be accepted now, as a sentence; null when they can. Readings of a reference can
 * always be: they are what shows whether the bench agrees again.
 */
export async function whyBenchStopped(readingId: number, transaction?: Transaction): Promise<string | null> {
  const reading = await checkedReading(readingId, transaction);
  if (isCheck(reading) || !(await openStop(reading.benchId, transaction))) return null;
  return `${reading.bench} is stopped: its last reference checks lie outside their limit. Frames can be taken and fitted; readings are accepted once QA has released the bench, with a reason, on its page.`;
}

/** For the transaction that accepts: one at a time on a bench, so that no reading slips past a stop made beside it. */
export async function requireBenchOpen(work: Work, readingId: number): Promise<void> {
  const { transaction } = work;
  const { benchId } = await checkedReading(readingId, transaction);
  await db().tables.benches.findByPk(benchId, { transaction, lock: transaction.LOCK.UPDATE });
  const why = await whyBenchStopped(readingId, transaction);
  if (why) throw new AppError('WRONG_STATE', why);
}

/** An accepted reading of a reference is a check of its bench; the second in a row outside stops it. */
export async function recordReferenceCheck(
  work: Work,
  context: CommandContext,
  readingId: number,
): Promise<void> {
  const { transaction } = work;
  const reading = await checkedReading(readingId, transaction);
  const { sourceId, vacuumNm, uNm, valueNm, uValueNm } = reading;
  if (!isCheck(reading) || sourceId === null || vacuumNm === null) return;
  // Without an uncertainty of the bench there is nothing the deviation could be compared with.
  if (valueNm === null || uValueNm === null) return;
  const rule = await benchRule(reading.benchId, transaction);
  const publishedNm = airFromVacuum(vacuumNm);
  const result = referenceCheck({
    measuredNm: valueNm,
    uMeasuredNm: uValueNm,
    dof: reading.dof,
    publishedNm,
    uPublishedNm: uNm ?? 0,
    ownLimitNm: rule.limitNm,
  });
  const { tables } = db();
  const row = await tables.referenceChecks.create(
    {
      benchId: reading.benchId,
      setupId: reading.setupId,
      sourceId,
      readingId,
      publishedNm,
      uPublishedNm: uNm ?? 0,
      measuredNm: valueNm,
      uMeasuredNm: uValueNm,
      ...result,
      ownLimit: rule.limitNm !== null,
      madeAt: context.at,
    },
    { transaction },
  );
  work.audit({
    action: 'bench.check',
    subject: { kind: 'bench', id: reading.benchId, text: reading.bench },
    before: null,
    after: { readingId, publishedNm, measuredNm: valueNm, ...result },
  });
  const standing = standingAfter(await checksSinceRelease(reading.benchId, transaction));
  if (standing === 'stop' && !(await openStop(reading.benchId, transaction)))
    await stop(work, context, reading, row.id);
}

async function stop(work: Work, context: CommandContext, reading: Checked, checkId: number): Promise<void> {
  const { transaction } = work;
  const { benchId, bench } = reading;
  await db().tables.benchStops.create({ benchId, checkId, stoppedAt: context.at }, { transaction });
  work.audit({
    action: 'bench.stop',
    subject: { kind: 'bench', id: benchId, text: bench },
    before: null,
    after: { checkId },
  });
  const text = await stopText(reading, checkId, transaction);
  const people = await select<{ name: string; email: string }>(
    `SELECT DISTINCT p.id, p.name, p.email FROM people p JOIN person_roles r ON r.person_id = p.id
     WHERE p.active AND r.role IN ('qa', 'admin') ORDER BY p.id`,
    {},
    transaction,
  );
  for (const { name, email } of people) {
    await work.mail({
      to: email,
      subject: `${bench} is stopped: two reference checks outside`,
      text: [`Hello ${name},`, '', ...text].join('\n'),
    });
  }
}

async function stopText(
  { benchId, bench, setupId }: Checked,
  checkId: number,
  transaction: Transaction,
): Promise<string[]> {
  const { tables } = db();
  const checks = await tables.referenceChecks.findAll({
    where: { benchId },
    order: [['id', 'DESC']],
    limit: 2,
    transaction,
  });
  const setup = await tables.setups.findByPk(setupId, { transaction, rejectOnEmpty: true });
  const newest = checks.find(({ id }) => id === checkId) ?? checks[0];
  const lines = checks.reverse().map((check) => {
    const places = placesFor(check.expandedNm);
    const { value, uncertainty } = formatQuantity(check.measuredNm, check.expandedNm);
    return `${value} ± ${uncertainty} nm (air), ${formatSigned(check.deviationNm, places)} nm from the published value; limit ± ${formatQuantity(0, check.limitNm).uncertainty} nm`;
  });
  const [first] = explain(newest.deviationNm, newest.publishedNm, fourValues(setup));
  return [
    `${bench} is stopped for accepting. Two reference checks in a row lie outside:`,
    '',
    ...lines,
    '',
    explanationText(first),
    '',
    'Frames can still be taken and fitted. QA releases the bench with a reason:',
    `${env().NEXTAUTH_URL.replace(/\/$/, '')}/benches/${benchId}`,
  ];
}
