import { execFile } from 'node:child_process';
import { createHash } from 'node:crypto';
import { migrate } from '@/scripts/migrate';
import { anchorLog } from '@/lib/server/commands/anchor-log';
import { acceptReading } from '@/lib/server/commands/accept-reading';
import { enterBenchConditions } from '@/lib/server/commands/enter-conditions';
import { releaseBench, setBenchRule } from '@/lib/server/commands/release-bench';
import { sendReading } from '@/lib/server/commands/send-reading';
import { verifyChain } from '@/lib/server/audit';
import { PRODUCT } from '@/lib/server/context';
import { db } from '@/lib/server/db';
import type { ValueIn } from '@/lib/quantity/value-in';
import { digestOf } from '@/lib/server/commands/store-reading';
import { ownerDatabase, rows } from './support/database';
import { inventedResult, makeReading } from './support/readings';
import { acceptReference } from './support/references';
import { PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

// The command is started as a process of its own, and so is compiled, for each kind of tampering.
jest.setTimeout(60_000);

let world: World;

beforeAll(async () => {
  world = await makeWorld();
  const { frameId, readingId } = await makeReading(world, as(world.people.technician));
  await sendReading(as(world.people.technician), { readingId, version: 0, note: '' });
  await acceptReading(as(world.people.reviewer), { readingId, version: 1, password: PASSWORD, answers: [] });
  await db().tables.certificateFiles.create({
    sha256: 'c'.repeat(64),
    fileName: 'invented.pdf',
    mediaType: 'application/pdf',
    bytes: 10,
    addedBy: world.people.admin.id,
    addedAt: new Date(),
  });
  await db().tables.correctionFits.create({
    setupId: world.setupId,
    readingId,
    message: 'invented',
    valueNm: null,
    expandedNm: null,
    verdict: null,
    optionsJson: null,
    resultJson: null,
    madeAt: new Date(),
  });
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
  await db().tables.regionTrials.create({
    frameId,
    fromReadingId: readingId,
    keptReadingId: null,
    changeJson: '{}',
    valueNm: 634.8,
    expandedNm: 0.7,
    problem: null,
    triedBy: world.people.reviewer.id,
    triedAt: new Date(),
  });
  const by = { proposedBy: world.people.reviewer.id, proposedAt: new Date() };
  const { id: proposalId } = await db().tables.withdrawalProposals.create({ readingId, reason: 'x', ...by });
  const answered = { answeredBy: world.people.qa.id, answeredAt: new Date() };
  await db().tables.withdrawalAnswers.create({ proposalId, answer: 'declined', words: 'x', ...answered });
  const said = { madeBy: world.people.qa.id, madeAt: new Date() };
  const { id: commentId } = await db().tables.comments.create({ readingId, words: 'invented', ...said });
  await db().tables.commentMentions.create({ commentId, personId: world.people.admin.id });
  const anchor = { day: '2026-11-19', lastId: 1, hash: '', madeAt: new Date() };
  const [first] = await rows<{ hash: string }>('SELECT hash FROM audit_rows WHERE id = 1');
  await db().tables.auditAnchors.create({ ...anchor, hash: first.hash });
  const choice = { unitId: world.unitIds[0], readingId, reason: 'x', chosenBy: world.people.qa.id };
  await db().tables.reportableChoices.create({ ...choice, chosenAt: new Date() });
  await db().tables.moveReasons.create({
    readingId,
    words: 'invented',
    givenBy: world.people.reviewer.id,
    givenAt: new Date(),
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
  ['setup_decisions', 'reason'],
  ['certificate_files', 'file_name'],
  ['source_certificates', 'certificate'],
  ['plate_certificates', 'certificate'],
  ['setup_plates', 'plate_id'],
  ['correction_fits', 'message'],
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
  ['region_trials', 'change_json'],
  ['move_reasons', 'words'],
  ['withdrawal_proposals', 'reason'],
  ['withdrawal_answers', 'words'],
  ['comments', 'words'],
  ['comment_mentions', 'person_id'],
  ['audit_anchors', 'hash'],
  ['reportable_choices', 'reason'],
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

  test('with one anchor a day, mailed to everyone in QA once', async () => {
    const at = (time: string) => ({ actor: PRODUCT, at: new Date(time) });
    const anchors = await Promise.all([
      anchorLog(at('2026-11-21T00:00:01Z')),
      anchorLog(at('2026-11-21T00:00:02Z')),
    ]);
    expect(anchors.filter(Boolean)).toHaveLength(1);
    expect(await anchorLog(at('2026-11-21T23:59:59Z'))).toBe(false);
    expect(await anchorLog(at('2026-11-22T00:00:00Z'))).toBe(true);
    const mails = await rows<{ to_address: string; body_text: string }>(
      `SELECT to_address, body_text FROM outbox WHERE subject LIKE 'The log on %' ORDER BY id`,
    );
    expect(mails.map(({ to_address: to }) => to)).toEqual([world.people.qa.email, world.people.qa.email]);
    const [head] = await rows<{ hash: string }>('SELECT hash FROM audit_head');
    expect(mails[0].body_text).toContain(head.hash);
    expect(await verifyChain()).toMatchObject({ whole: true });
  });

  const tampering: [what: string, sql: string][] = [
    ['a word changed', "UPDATE audit_rows SET who = 'Somebody else' WHERE id = 3"],
    ['a row taken out', 'DELETE FROM audit_rows WHERE id = 5'],
    ['the end cut off', 'DELETE FROM audit_rows ORDER BY id DESC LIMIT 1'],
    [
      'a row added at the end',
      `INSERT INTO audit_rows SELECT id + 1, at, person_id, who, action, subject_kind, subject_id, subject, before_json,
       after_json, hash, REPEAT('e', 64) FROM audit_rows ORDER BY id DESC LIMIT 1`,
    ],
    [
      'a row added in between',
      'UPDATE audit_rows SET id = id + 1 WHERE id > 7 ORDER BY id DESC; INSERT INTO audit_rows SELECT 8, at, person_id, who, action, subject_kind, subject_id, subject, before_json, after_json, previous_hash, hash FROM audit_rows WHERE id = 7',
    ],
  ];

  test.each(tampering)('and shows %s', async (_what, sql) => {
    const owner = ownerDatabase();
    await owner.query('DROP TABLE IF EXISTS audit_copy');
    await owner.query('CREATE TABLE audit_copy AS SELECT * FROM audit_rows');
    await owner.query('DROP TRIGGER audit_rows_no_update');
    await owner.query('DROP TRIGGER audit_rows_no_delete');
    try {
      for (const statement of sql.split('; ')) await owner.query(statement);
      expect(await verifyChain()).toMatchObject({ whole: false });
      expect(await auditVerify()).toEqual({
        code: 1,
        said: expect.stringMatching(/^The log is broken at row \d+: /) as string,
      });
    } finally {
      await owner.query('DELETE FROM audit_rows');
      await owner.query('INSERT INTO audit_rows SELECT * FROM audit_copy');
      await owner.query('DROP TABLE audit_copy');
      const { up } = await import('@/migrations/0008-immutable-tables');
      await up({ context: (statement) => owner.query(statement) });
    }
    expect(await verifyChain()).toMatchObject({ whole: true });
    expect(await auditVerify()).toEqual({
      code: 0,
      said: expect.stringMatching(/^The log is whole: \d+ rows, 3 daily anchors\.$/) as string,
    });
  });

  test('and shows a log that was written anew from its start with right hashes', async () => {
    const owner = ownerDatabase();
    const kept = await rows<StoredRow>('SELECT * FROM audit_rows ORDER BY id');
    const [head] = await rows<{ last_id: number; hash: string }>('SELECT last_id, hash FROM audit_head');
    const write = async (row: StoredRow) =>
      owner.query(
        'UPDATE audit_rows SET who = :who, previous_hash = :previous_hash, hash = :hash WHERE id = :id',
        { replacements: { ...row } },
      );
    await owner.query('DROP TRIGGER audit_rows_no_update');
    try {
      let previous_hash = '0'.repeat(64);
      for (const row of kept) {
        const forged = { ...row, who: row.id === 3 ? 'Somebody else' : row.who, previous_hash };
        previous_hash = hashOfRow(forged);
        await write({ ...forged, hash: previous_hash });
      }
      await owner.query('UPDATE audit_head SET hash = :hash', { replacements: { hash: previous_hash } });
      expect(await verifyChain()).toMatchObject({
        whole: false,
        because: expect.stringMatching(/on 2026-11-(19|21|22), when/) as string,
      });
    } finally {
      for (const row of kept) await write(row);
      await owner.query('UPDATE audit_head SET hash = :hash', { replacements: { hash: head.hash } });
      const { up } = await import('@/migrations/0008-immutable-tables');
      await up({ context: (statement) => owner.query(statement) });
    }
    expect(await verifyChain()).toMatchObject({ whole: true });
  });
});

interface StoredRow {
  id: number;
  at: Date;
  person_id: number | null;
  who: string;
  action: string;
  subject_kind: string;
  subject_id: number | null;
  subject: string;
  before_json: string;
  after_json: string;
  previous_hash: string;
  hash: string;
}

/** The hash of a row, worked out here once more from what is written about it. */
function hashOfRow(row: StoredRow): string {
  const content = [
    row.id,
    row.at.toISOString(),
    row.person_id,
    row.who,
    row.action,
    row.subject_kind,
    row.subject_id,
    row.subject,
    row.before_json,
    row.after_json,
    row.previous_hash,
  ];
  return createHash('sha256').update(JSON.stringify(content)).digest('hex');
}

/** The command as a person runs it. */
async function auditVerify(): Promise<{ code: number; said: string }> {
  const args = ['--conditions=react-server', '--import', 'tsx', 'scripts/audit-verify.ts'];
  return new Promise((resolve) => {
    execFile(process.execPath, args, { env: process.env }, (problem, stdout) =>
      resolve({ code: typeof problem?.code === 'number' ? problem.code : 0, said: stdout.trim() }),
    );
  });
}
