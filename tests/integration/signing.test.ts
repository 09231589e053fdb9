import { acceptReading } from '@/lib/server/commands/accept-reading';
import { addPerson } from '@/lib/server/commands/add-person';
import { logTrials } from '@/lib/server/commands/log-trials';
import { sendReading } from '@/lib/server/commands/send-reading';
import { storeReading } from '@/lib/server/commands/store-reading';
import type { CommandContext } from '@/lib/server/context';
import { db } from '@/lib/server/db';
import { fitFacts, loadFrame } from '@/lib/server/frame-facts';
import { keepMoveReason } from '@/lib/server/move-reasons';
import { findReading, stepReading } from '@/lib/server/reading-facts';
import { inTransaction } from '@/lib/server/transaction';
import { rows } from './support/database';
import { inventedResult, makeReading } from './support/readings';
import { NOW, PASSWORD, as, closeWorld, makeWorld, type Person, type World } from './support/world';

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

async function inReview() {
  const made = await makeReading(world, as(world.people.technician));
  await sendReading(as(world.people.technician), { readingId: made.readingId, version: 0, note: '' });
  return made;
}

/** A reviewer's re-fit that gives this value, as keeping it stores it; u of the first fit is 0.35 nm. */
async function refitTo(who: Person, from: { frameId: number; readingId: number }, wavelengthNm: number) {
  const frame = await loadFrame(from.frameId);
  const before = await findReading(from.readingId);
  const { setup, specification } = await fitFacts(frame);
  return inTransaction(as(who), async (work) => {
    await stepReading(work, NOW, before, before.version, 'replace');
    const reading = await storeReading(
      {
        frame,
        result: inventedResult({ wavelengthNm, wavelengthVacuumNm: wavelengthNm + 0.1755 }),
        setup,
        specification,
        options: {},
        madeBy: who.id,
        madeInReview: true,
        replacesId: before.readingId,
        at: NOW,
        state: { status: 'review', sentBy: before.sentBy, sentAt: before.sentAt, note: '' },
      },
      work.transaction,
    );
    await db().tables.frames.update(
      { readingId: reading.id },
      { where: { id: frame.id }, transaction: work.transaction },
    );
    return { frameId: frame.id, readingId: reading.id };
  });
}

const sign = (context: CommandContext, readingId: number, version: number, more: object = {}) =>
  acceptReading(context, { readingId, version, password: PASSWORD, answers: [], ...more });

async function signatureOf(readingId: number) {
  const [signature] = await rows<{ signed_at: Date; password_at: Date | null }>(
    'SELECT signed_at, password_at FROM signatures WHERE reading_id = :readingId',
    { readingId },
  );
  return signature ?? null;
}

describe('a moved value', () => {
  test('of more than 0.3 u is not signed without a reason, and nothing changes', async () => {
    const moved = await refitTo(world.people.reviewer2, await inReview(), 634.92);
    await expect(sign(as(world.people.reviewer), moved.readingId, 0)).rejects.toMatchObject({
      code: 'BAD_INPUT',
      fields: { moveReason: expect.any(String) as string },
    });
    expect(await findReading(moved.readingId)).toMatchObject({ status: 'review', version: 0 });
    expect(await signatureOf(moved.readingId)).toBeNull();
    await sign(as(world.people.reviewer), moved.readingId, 0, { moveReason: 'Dust at the left edge.' });
    const kept = await rows('SELECT words, given_by FROM move_reasons WHERE reading_id = :readingId', moved);
    expect(kept).toEqual([{ words: 'Dust at the left edge.', given_by: world.people.reviewer.id }]);
  });

  test('adds up over several small steps', async () => {
    const once = await refitTo(world.people.reviewer2, await inReview(), 634.88);
    const twice = await refitTo(world.people.reviewer2, once, 634.96);
    await expect(sign(as(world.people.reviewer), twice.readingId, 0)).rejects.toMatchObject({
      code: 'BAD_INPUT',
    });
  });

  test('of less needs none', async () => {
    const moved = await refitTo(world.people.reviewer2, await inReview(), 634.88);
    await expect(sign(as(world.people.reviewer), moved.readingId, 0)).resolves.toBeDefined();
  });

  test('whose reason was given when it was kept needs no other', async () => {
    const moved = await refitTo(world.people.reviewer2, await inReview(), 634.95);
    await inTransaction(as(world.people.reviewer2), (work) =>
      keepMoveReason(work, as(world.people.reviewer2), moved.readingId, 'A scratch.'),
    );
    await expect(sign(as(world.people.reviewer), moved.readingId, 0)).resolves.toBeDefined();
    const [logged] = await rows<{ after_json: string }>(
      `SELECT after_json FROM audit_rows WHERE action = 'reading.accept' AND subject_id = :readingId`,
      moved,
    );
    expect(JSON.parse(logged.after_json)).toMatchObject({ moveReason: 'A scratch.' });
  });
});

describe('a password typed to sign', () => {
  const SESSION = '0f0e0d0c-0b0a-4908-8706-050403020100';
  const at = (minutes: number, sessionId: string | null = SESSION): CommandContext => ({
    actor: world.people.reviewer,
    at: new Date(NOW.getTime() + minutes * 60_000),
    sessionId,
  });

  test('counts for five minutes in the same session, and the signature says when it was typed', async () => {
    const [first, second, third] = [await inReview(), await inReview(), await inReview()];
    await sign(at(0), first.readingId, 1);
    await sign(at(4.9), second.readingId, 1, { password: '' });
    expect(await signatureOf(second.readingId)).toEqual({ signed_at: at(4.9).at, password_at: NOW });
    await expect(sign(at(5), third.readingId, 1, { password: '' })).rejects.toMatchObject({
      code: 'WRONG_PASSWORD',
    });
    expect(await signatureOf(third.readingId)).toBeNull();
  });

  test('does not count in another session, without a session, or for another person', async () => {
    const { readingId } = await inReview();
    await sign(at(10), (await inReview()).readingId, 1);
    const other = 'ffffffff-0b0a-4908-8706-050403020100';
    for (const context of [
      at(11, other),
      at(11, null),
      { ...at(11), actor: world.people.reviewer2 },
    ] as CommandContext[])
      await expect(sign(context, readingId, 1, { password: '' })).rejects.toMatchObject({
        code: 'WRONG_PASSWORD',
      });
    expect(await signatureOf(readingId)).toBeNull();
  });

  test('is not made longer by signing with it', async () => {
    const made = [await inReview(), await inReview(), await inReview()];
    await sign(at(20), made[0].readingId, 1);
    await sign(at(24), made[1].readingId, 1, { password: '' });
    await expect(sign(at(26), made[2].readingId, 1, { password: '' })).rejects.toMatchObject({
      code: 'WRONG_PASSWORD',
    });
  });

  test('that is wrong gives nothing to go on', async () => {
    const { readingId } = await inReview();
    await expect(sign(at(40), readingId, 1, { password: 'not it at all' })).rejects.toMatchObject({
      code: 'WRONG_PASSWORD',
    });
    await expect(sign(at(41), readingId, 1, { password: '' })).rejects.toMatchObject({
      code: 'WRONG_PASSWORD',
    });
  });
});

test('twenty accept at once: one wins, nineteen are told, one signature and one row in the log', async () => {
  const { readingId } = await inReview();
  const people: Person[] = [];
  for (let i = 0; i < 20; i += 1) {
    const person = { name: `Invented ${i}`, email: `r${i}@test.example`, roles: ['reviewer' as const] };
    const { personId } = await addPerson(as(world.people.admin), { ...person, password: PASSWORD });
    people.push({ ...person, roles: [...person.roles], id: personId });
  }
  const answers = await Promise.allSettled(people.map((person) => sign(as(person), readingId, 1)));
  expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  const lost = answers.flatMap((answer) => (answer.status === 'rejected' ? [answer.reason as unknown] : []));
  expect(lost).toHaveLength(19);
  for (const reason of lost) expect(reason).toMatchObject({ status: 409 });
  expect(await rows('SELECT id FROM signatures WHERE reading_id = :readingId', { readingId })).toHaveLength(
    1,
  );
  expect(
    await rows(`SELECT id FROM audit_rows WHERE action = 'reading.accept' AND subject_id = :readingId`, {
      readingId,
    }),
  ).toHaveLength(1);
  expect(await findReading(readingId)).toMatchObject({ status: 'accepted', version: 2 });
});

test('regions that were tried are logged with their values and who tried them, whether kept or not', async () => {
  const { frameId, readingId } = await inReview();
  const region = { cxPx: 400, cyPx: 300, lengthPx: 500, heightPx: 80, angleDeg: 0 };
  const trial = { region, leaveOut: [2], zeroShift: 0, expandedNm: 0.7, problem: null };
  await logTrials(as(world.people.reviewer), {
    frameId,
    readingId,
    trials: [
      { ...trial, valueNm: 634.7, agoMs: 9000 },
      { ...trial, valueNm: null, expandedNm: null, problem: 'Too few fringes.', agoMs: 1000 },
    ],
  });
  const kept = await rows<{ change_json: string }>(
    `SELECT value_nm, problem, tried_by, tried_at, kept_reading_id, change_json FROM region_trials
     WHERE frame_id = :frameId ORDER BY id`,
    { frameId },
  );
  expect(kept).toMatchObject([
    {
      value_nm: 634.7,
      problem: null,
      tried_by: world.people.reviewer.id,
      tried_at: new Date(NOW.getTime() - 9000),
      kept_reading_id: null,
    },
    { value_nm: null, problem: 'Too few fringes.' },
  ]);
  expect(JSON.parse(kept[0].change_json)).toEqual({ region, leaveOut: [2], zeroShift: 0 });
  const logged = await rows(
    `SELECT id FROM audit_rows WHERE action = 'reading.try' AND subject_id = :readingId`,
    { readingId },
  );
  expect(logged).toHaveLength(1);
});

test('regions tried cannot be logged on the reading of another frame', async () => {
  const [one, other] = [await inReview(), await inReview()];
  const region = { cxPx: 400, cyPx: 300, lengthPx: 500, heightPx: 80, angleDeg: 0 };
  await expect(
    logTrials(as(world.people.reviewer), {
      frameId: one.frameId,
      readingId: other.readingId,
      trials: [{ region, leaveOut: [], zeroShift: 0, valueNm: 1, expandedNm: null, problem: null, agoMs: 0 }],
    }),
  ).rejects.toMatchObject({ code: 'BAD_INPUT' });
});
