import { setupSchema } from '@/lib/domain/setup-schemas';
import { acceptReading } from '@/lib/server/commands/accept-reading';
import { addSetup } from '@/lib/server/commands/add-setup';
import { returnReading } from '@/lib/server/commands/return-reading';
import { sendReading, sendReadings } from '@/lib/server/commands/send-reading';
import { db } from '@/lib/server/db';
import { fitFacts, loadFrame } from '@/lib/server/frame-facts';
import { readingView } from '@/lib/server/queries/readings';
import { findReading, stepReading } from '@/lib/server/reading-facts';
import { inTransaction } from '@/lib/server/transaction';
import { storeReading } from '@/lib/server/commands/store-reading';
import { rows } from './support/database';
import { finding, inventedResult, makeReading } from './support/readings';
import { NOW, PASSWORD, SETUP, as, closeWorld, makeWorld, type Person, type World } from './support/world';

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

async function inReview(result = inventedResult(), uploader: Person = world.people.technician) {
  const made = await makeReading(world, as(uploader), 0, result);
  await sendReading(as(world.people.technician), { readingId: made.readingId, version: 0, note: '' });
  return made;
}

const accept = (who: Person, readingId: number, more: object = {}) =>
  acceptReading(as(who), { readingId, version: 1, password: PASSWORD, answers: [], ...more });

async function stateOf(readingId: number) {
  const { status, version } = await findReading(readingId);
  return { status, version };
}

describe('accepting', () => {
  test('signs with name, role, meaning, time and digest, and is logged in the same breath', async () => {
    const { readingId } = await inReview();
    await accept(world.people.reviewer, readingId);
    expect(await stateOf(readingId)).toEqual({ status: 'accepted', version: 2 });
    const [signature] = await rows<Record<string, unknown>>(
      'SELECT * FROM signatures WHERE reading_id = :readingId',
      { readingId },
    );
    const { digest } = await findReading(readingId);
    expect(signature).toMatchObject({
      person_name: 'Invented reviewer',
      role: 'reviewer',
      digest,
      signed_at: NOW,
    });
    const logged = await rows(
      `SELECT id FROM audit_rows WHERE action = 'reading.accept' AND subject_id = :readingId`,
      { readingId },
    );
    expect(logged).toHaveLength(1);
  });

  test('by two at once: exactly one wins, the other is told, one signature stands', async () => {
    for (let round = 0; round < 5; round += 1) {
      const { readingId } = await inReview();
      const answers = await Promise.allSettled([
        accept(world.people.reviewer, readingId),
        accept(world.people.reviewer2, readingId),
      ]);
      expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
      const [lost] = answers.filter((answer) => answer.status === 'rejected');
      expect(lost.reason).toMatchObject({ code: 'CHANGED_MEANWHILE', status: 409 });
      expect(
        await rows('SELECT id FROM signatures WHERE reading_id = :readingId', { readingId }),
      ).toHaveLength(1);
      expect(await stateOf(readingId)).toEqual({ status: 'accepted', version: 2 });
    }
  });

  test('and returning at once: exactly one wins', async () => {
    const { readingId } = await inReview();
    const answers = await Promise.allSettled([
      accept(world.people.reviewer, readingId),
      returnReading(as(world.people.reviewer2), { readingId, version: 1, reason: 'take-again', words: '' }),
    ]);
    expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    const signed = await rows('SELECT id FROM signatures WHERE reading_id = :readingId', { readingId });
    const returned = await rows('SELECT id FROM returns WHERE reading_id = :readingId', { readingId });
    expect(signed.length + returned.length).toBe(1);
  });

  test('is refused to who uploaded the frame, whatever other roles they hold', async () => {
    const { readingId } = await inReview(inventedResult(), world.people.both);
    await expect(accept(world.people.both, readingId)).rejects.toMatchObject({ code: 'NOT_ALLOWED' });
    expect(await stateOf(readingId)).toEqual({ status: 'review', version: 1 });
  });

  test('is refused to who sent the reading', async () => {
    const { readingId } = await makeReading(world, as(world.people.technician));
    await sendReading(as(world.people.both), { readingId, version: 0, note: '' });
    await expect(accept(world.people.both, readingId)).rejects.toMatchObject({ code: 'NOT_ALLOWED' });
  });

  test('is refused with a wrong password, and nothing changes', async () => {
    const { readingId } = await inReview();
    await expect(
      accept(world.people.reviewer, readingId, { password: 'not the password' }),
    ).rejects.toMatchObject({ code: 'WRONG_PASSWORD' });
    expect(await stateOf(readingId)).toEqual({ status: 'review', version: 1 });
    expect(await rows('SELECT id FROM signatures WHERE reading_id = :readingId', { readingId })).toHaveLength(
      0,
    );
  });

  test('is refused while a stop stands on the wavelength', async () => {
    const { readingId } = await inReview(inventedResult({ findings: [finding('clipping', 'stop')] }));
    await expect(accept(world.people.reviewer, readingId)).rejects.toMatchObject({ code: 'WRONG_STATE' });
  });

  test('a stop on the width alone does not hold it up', async () => {
    const { readingId } = await inReview(
      inventedResult({ findings: [{ ...finding('tone', 'clear'), width: 'stop' }] }),
    );
    await expect(accept(world.people.reviewer, readingId)).resolves.toMatchObject({ version: 2 });
  });

  test('needs a word on every look, and keeps it', async () => {
    const { readingId } = await inReview(
      inventedResult({ findings: [finding('dim', 'look'), finding('tilt', 'look')] }),
    );
    const dim = { check: 'dim', answer: 'accept-as-is', reason: 'Bright enough.' };
    await expect(accept(world.people.reviewer, readingId, { answers: [dim] })).rejects.toMatchObject({
      code: 'BAD_INPUT',
      fields: { tilt: expect.any(String) as string },
    });
    await accept(world.people.reviewer, readingId, { answers: [dim, { ...dim, check: 'tilt' }] });
    const kept = await rows(
      'SELECT check_name FROM look_answers WHERE reading_id = :readingId ORDER BY check_name',
      { readingId },
    );
    expect(kept).toEqual([{ check_name: 'dim' }, { check_name: 'tilt' }]);
  });

  test('is refused under an overdue setup, although the frame could be taken', async () => {
    const { readingId } = await inReview();
    const late = new Date('2027-06-02T08:00:00Z');
    const overdue = acceptReading(as(world.people.reviewer, late), {
      readingId,
      version: 1,
      password: PASSWORD,
      answers: [],
    });
    await expect(overdue).rejects.toMatchObject({
      code: 'WRONG_STATE',
      message: expect.stringContaining('overdue') as string,
    });
    const onTheDay = acceptReading(as(world.people.reviewer, new Date('2027-06-01T08:00:00Z')), {
      readingId,
      version: 1,
      password: PASSWORD,
      answers: [],
    });
    await expect(onTheDay).resolves.toMatchObject({ version: 2 });
  });
});

describe('re-fits', () => {
  /** What keepFit stores, without running the engine. */
  async function refit(
    who: Person,
    frameId: number,
    readingId: number,
    version: number,
    madeInReview: boolean,
    result = inventedResult(),
  ) {
    const frame = await loadFrame(frameId);
    const before = await findReading(readingId);
    const { setup, specification } = await fitFacts(frame);
    return inTransaction(as(who), async (work) => {
      await stepReading(work, NOW, before, version, 'replace');
      const state = madeInReview
        ? { status: 'review' as const, sentBy: before.sentBy, sentAt: before.sentAt, note: '' }
        : { status: 'draft' as const, sentBy: null, sentAt: null, note: '' };
      const reading = await storeReading(
        {
          frame,
          result,
          setup,
          specification,
          options: {},
          madeBy: who.id,
          madeInReview,
          replacesId: readingId,
          at: NOW,
          state,
        },
        work.transaction,
      );
      await db().tables.frames.update(
        { readingId: reading.id },
        { where: { id: frameId }, transaction: work.transaction },
      );
      return reading.id;
    });
  }

  test('made before sending bar their maker, even after somebody else sent it', async () => {
    const { frameId, readingId } = await makeReading(world, as(world.people.technician));
    const next = await refit(world.people.both, frameId, readingId, 0, false);
    await sendReading(as(world.people.technician), { readingId: next, version: 0, note: '' });
    await expect(accept(world.people.both, next)).rejects.toMatchObject({ code: 'NOT_ALLOWED' });
    await expect(accept(world.people.reviewer, next)).resolves.toBeDefined();
  });

  test('made in review do not bar the reviewer, unless they carry the value across a limit', async () => {
    const near = await inReview();
    const kept = await refit(world.people.reviewer, near.frameId, near.readingId, 1, true);
    await expect(accept(world.people.reviewer, kept, { version: 0 })).resolves.toBeDefined();
    const far = await inReview();
    const moved = await refit(
      world.people.reviewer,
      far.frameId,
      far.readingId,
      1,
      true,
      inventedResult({ wavelengthNm: 641.5, wavelengthVacuumNm: 641.7 }),
    );
    await expect(accept(world.people.reviewer, moved, { version: 0 })).rejects.toMatchObject({
      code: 'NOT_ALLOWED',
    });
    const moveReason = 'The first region lay on a reflection.';
    await expect(accept(world.people.reviewer2, moved, { version: 0, moveReason })).resolves.toBeDefined();
  });

  test('bar the first sender after a return as well', async () => {
    const { frameId, readingId } = await makeReading(world, as(world.people.technician));
    await sendReading(as(world.people.both), { readingId, version: 0, note: '' });
    await returnReading(as(world.people.reviewer), {
      readingId,
      version: 1,
      reason: 'no-clean-region',
      words: '',
    });
    const again = await refit(world.people.technician, frameId, readingId, 2, false);
    await sendReading(as(world.people.technician2), { readingId: again, version: 0, note: '' });
    await expect(accept(world.people.both, again)).rejects.toMatchObject({ code: 'NOT_ALLOWED' });
  });

  test('of an old version are refused', async () => {
    const { frameId, readingId } = await inReview();
    await expect(refit(world.people.reviewer, frameId, readingId, 0, true)).rejects.toMatchObject({
      code: 'CHANGED_MEANWHILE',
    });
    expect(await rows('SELECT id FROM readings WHERE frame_id = :frameId', { frameId })).toHaveLength(1);
  });
});

test('returning mails the reason to whoever sent it', async () => {
  const { frameId, readingId } = await inReview();
  const words = 'Nearer, and without the lamp.';
  await returnReading(as(world.people.reviewer), { readingId, version: 1, reason: 'take-again', words });
  const [mail] = await rows<{ to_address: string; body_text: string }>(
    'SELECT to_address, body_text FROM outbox ORDER BY id DESC LIMIT 1',
  );
  expect(mail.to_address).toBe(world.people.technician.email);
  expect(mail.body_text).toContain(`Take the frame again. ${words}`);
  expect(mail.body_text).toContain(`/frames/${frameId}`);
});

test('the note written when sending stands on the reading', async () => {
  const { readingId } = await makeReading(world, as(world.people.technician));
  await sendReading(as(world.people.technician), { readingId, version: 0, note: 'Dust on the screen.' });
  expect((await readingView(readingId))?.note).toBe('Dust on the screen.');
});

test('the second of two is told who was first', async () => {
  const { readingId } = await inReview();
  await accept(world.people.reviewer, readingId);
  await expect(accept(world.people.reviewer2, readingId)).rejects.toMatchObject({
    code: 'CHANGED_MEANWHILE',
    message: expect.stringMatching(/accepted this reading at \d\d:\d\d UTC/) as string,
  });
});

test('sending many: what cannot be sent is said and does not hold up the others', async () => {
  const draft = await makeReading(world, as(world.people.technician));
  const sent = await inReview();
  const answer = await sendReadings(as(world.people.technician), [
    { readingId: sent.readingId, version: 1, note: '' },
    { readingId: draft.readingId, version: 0, note: 'please' },
    { readingId: 999_999, version: 0, note: '' },
  ]);
  expect(answer.sent).toBe(1);
  expect(answer.problems).toHaveLength(2);
});

test('returning for another reason needs words', async () => {
  const { readingId } = await inReview();
  const silent = returnReading(as(world.people.reviewer), {
    readingId,
    version: 1,
    reason: 'another',
    words: '',
  });
  await expect(silent).rejects.toMatchObject({ code: 'BAD_INPUT' });
});

test('two admins entering a setup at once: one is told to look first', async () => {
  const setup = setupSchema.parse({ benchId: world.benchId, afterNumber: 1, ...SETUP, why: 'New scale.' });
  const answers = await Promise.allSettled([
    addSetup(as(world.people.admin), setup),
    addSetup(as(world.people.admin), setup),
  ]);
  expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  const [lost] = answers.filter((answer) => answer.status === 'rejected');
  expect(lost.reason).toMatchObject({ code: 'CHANGED_MEANWHILE' });
});
