import { migrate } from '@/scripts/migrate';
import { acceptReading } from '@/lib/server/commands/accept-reading';
import { enterBenchConditions } from '@/lib/server/commands/enter-conditions';
import { releaseBench, setBenchRule } from '@/lib/server/commands/release-bench';
import { sendReading } from '@/lib/server/commands/send-reading';
import { verifyChain } from '@/lib/server/audit';
import { db } from '@/lib/server/db';
import type { ValueIn } from '@/lib/quantity/value-in';
import { digestOf } from '@/lib/server/commands/store-reading';
import { ownerDatabase, rows } from './support/database';
import { inventedResult, makeReading } from './support/readings';
import { acceptReference } from './support/references';
import { PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

let world: World;

beforeAll(async () => {
  world = await makeWorld();
  const { readingId } = await makeReading(world, as(world.people.technician));
  await sendReading(as(world.people.technician), { readingId, version: 0, note: '' });
  await acceptReading(as(world.people.reviewer), { readingId, version: 1, password: PASSWORD, answers: [] });
  await db().tables.unitOutcomes.create({
    unitId: world.unitIds[0],
    outcome: 'passed-on',
    reason: '',
    setBy: world.people.qa.id,
    setAt: new Date(),
  });
  await db().tables.returns.create({
    readingId,
    reason: 'another',
    words: 'invented',
    returnedBy: world.people.reviewer.id,
    returnedAt: new Date(),
  });
  await acceptReference(world, 9);
  await acceptReference(world, 9);
  const [{ id: stopId }] = await rows<{ id: number }>('SELECT id FROM bench_stops');
  await releaseBench(as(world.people.qa), { stopId, reason: 'invented' });
  await setBenchRule(as(world.people.qa), {
    benchId: world.benchId,
    limitNm: 1,
    method: 'absolute',
    why: 'invented',
  });
  await enterBenchConditions(as(world.people.technician), {
    benchId: world.benchId,
    airTemperatureC: { value: 21, half: 0.5 },
    pressurePa: { value: 101_000, half: 100 },
    humidityPercent: null,
    co2Ppm: null,
    sourceTemperatureC: null,
  });
  await db().tables.lookAnswers.create({
    readingId,
    checkName: 'dim',
    answer: 'accept-as-is',
    reason: 'x',
    answeredBy: world.people.reviewer.id,
    answeredAt: new Date(),
  });
});
afterAll(closeWorld);

const IMMUTABLE: [table: string, column: string][] = [
  ['setups', 'plate'],
  ['readings', 'value_nm'],
  ['reading_results', 'result_json'],
  ['signatures', 'person_name'],
  ['returns', 'words'],
  ['look_answers', 'reason'],
  ['unit_outcomes', 'reason'],
  ['audit_rows', 'who'],
  ['reading_values', 'value_json'],
  ['conditions', 'pressure_pa'],
  ['reference_checks', 'deviation_nm'],
  ['bench_stops', 'check_id'],
  ['bench_releases', 'reason'],
  ['bench_rules', 'why'],
];

describe.each(IMMUTABLE)('%s', (table, column) => {
  const attempts = [
    `UPDATE ${table} SET ${column} = ${column}`,
    `DELETE FROM ${table}`,
    `TRUNCATE TABLE ${table}`,
  ];

  test('has a row to try on', async () => {
    const [{ many }] = await rows<{ many: number }>(`SELECT COUNT(*) AS many FROM ${table}`);
    expect(Number(many)).toBeGreaterThan(0);
  });

  test.each(attempts)("the application's account may not: %s", async (sql) => {
    await expect(db().sequelize.query(sql)).rejects.toThrow(/denied/);
  });

  test.each(attempts.slice(0, 2))("the owner's account is stopped by the trigger: %s", async (sql) => {
    await expect(ownerDatabase().query(sql)).rejects.toThrow(`Rows of ${table} are never changed or deleted`);
  });

  test("the application's account may not take the trigger away", async () => {
    await expect(db().sequelize.query(`DROP TRIGGER ${table}_no_update`)).rejects.toThrow(/denied/);
  });
});

test('migrations run a second time without a change, even from the very first one', async () => {
  const url = process.env.DATABASE_OWNER_URL ?? '';
  const before = await rows(
    'SELECT TABLE_NAME, COLUMN_NAME, COLUMN_TYPE FROM information_schema.COLUMNS WHERE TABLE_SCHEMA = DATABASE() ORDER BY 1, 2',
  );
  expect((await migrate(url, url)).applied).toEqual([]);
  await ownerDatabase().query('DELETE FROM migrations');
  expect((await migrate(url, url)).applied.length).toBeGreaterThan(5);
  const after = await rows(
    'SELECT TABLE_NAME, COLUMN_NAME, COLUMN_TYPE FROM information_schema.COLUMNS WHERE TABLE_SCHEMA = DATABASE() ORDER BY 1, 2',
  );
  expect(after).toEqual(before);
});

test("a signature's digest is that of the stored reading", async () => {
  const [stored] = await rows<Record<string, string>>(
    `SELECT s.digest, r.frame_sha256, r.setup_json, r.specification_json, r.options_json, rr.result_json,
       rv.value_json
     FROM signatures s JOIN readings r ON r.id = s.reading_id JOIN reading_results rr ON rr.reading_id = r.id
     JOIN reading_values rv ON rv.reading_id = r.id`,
  );
  const content = {
    frameSha256: stored.frame_sha256,
    result: JSON.parse(stored.result_json) as ReturnType<typeof inventedResult>,
    setup: JSON.parse(stored.setup_json) as object,
    specification: JSON.parse(stored.specification_json) as null,
    options: JSON.parse(stored.options_json) as object,
    value: JSON.parse(stored.value_json) as Omit<ValueIn, 'judgement'>,
  };
  expect(digestOf(content)).toBe(stored.digest);
  expect(digestOf({ ...content, result: { ...content.result, wavelengthNm: 635.1 } })).not.toBe(
    stored.digest,
  );
  expect(digestOf({ ...content, value: { ...content.value, valueNm: 635.1 } })).not.toBe(stored.digest);
});

describe('the log is a chain', () => {
  test('that holds', async () => {
    const answer = await verifyChain();
    expect(answer).toMatchObject({ whole: true });
    expect(answer.rows).toBeGreaterThan(10);
  });

  const tampering: [what: string, sql: string][] = [
    ['a word changed', "UPDATE audit_rows SET who = 'Somebody else' WHERE id = 3"],
    ['a row taken out', 'DELETE FROM audit_rows WHERE id = 5'],
    ['the end cut off', 'DELETE FROM audit_rows ORDER BY id DESC LIMIT 1'],
  ];

  test.each(tampering)('and shows %s', async (_what, sql) => {
    const owner = ownerDatabase();
    await owner.query('DROP TABLE IF EXISTS audit_copy');
    await owner.query('CREATE TABLE audit_copy AS SELECT * FROM audit_rows');
    await owner.query('DROP TRIGGER audit_rows_no_update');
    await owner.query('DROP TRIGGER audit_rows_no_delete');
    try {
      await owner.query(sql);
      expect(await verifyChain()).toMatchObject({ whole: false });
    } finally {
      await owner.query('DELETE FROM audit_rows');
      await owner.query('INSERT INTO audit_rows SELECT * FROM audit_copy');
      await owner.query('DROP TABLE audit_copy');
      const { up } = await import('@/migrations/0008-immutable-tables');
      await up({ context: (statement) => owner.query(statement) });
    }
    expect(await verifyChain()).toMatchObject({ whole: true });
  });
});
