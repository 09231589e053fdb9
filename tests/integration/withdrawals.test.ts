import { acceptReading } from '@/lib/server/commands/accept-reading';
import { answerWithdrawal, askWithdrawal } from '@/lib/server/commands/withdraw-reading';
import { sendReading } from '@/lib/server/commands/send-reading';
import { overTimeCsv } from '@/lib/server/over-time-csv';
import { findLot } from '@/lib/server/queries/lots';
import { overTime } from '@/lib/server/queries/over-time';
import { readingView } from '@/lib/server/queries/readings';
import { listWithdrawals } from '@/lib/server/queries/withdrawals';
import { findReading } from '@/lib/server/reading-facts';
import { rows } from './support/database';
import { makeReading } from './support/readings';
import { PASSWORD, as, closeWorld, makeWorld, type Person, type World } from './support/world';

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

async function accepted(unit = 0) {
  const made = await makeReading(world, as(world.people.technician), unit);
  await sendReading(as(world.people.technician), { readingId: made.readingId, version: 0, note: '' });
  await acceptReading(as(world.people.reviewer), {
    readingId: made.readingId,
    version: 1,
    password: PASSWORD,
    answers: [],
  });
  return made;
}

const ask = (who: Person, readingId: number, more: object = {}) =>
  askWithdrawal(as(who), { readingId, version: 2, reason: 'Wrong plate.', password: PASSWORD, ...more });
const answer = (who: Person, proposalId: number, more: object = {}) =>
  answerWithdrawal(as(who), { proposalId, answer: 'confirmed', words: '', password: PASSWORD, ...more });

test('takes two people; what was measured and signed stays as it was, and the sender is told', async () => {
  const { readingId, frameId } = await accepted();
  const recorded = async () => [
    await rows('SELECT * FROM readings WHERE id = :readingId', { readingId }),
    await rows('SELECT * FROM signatures WHERE reading_id = :readingId', { readingId }),
  ];
  const before = await recorded();
  const { proposalId } = await ask(world.people.reviewer2, readingId);
  expect(await findReading(readingId)).toMatchObject({ status: 'accepted', version: 2 });
  expect((await listWithdrawals())[0]).toMatchObject({ readingId, answer: null });
  await expect(answer(world.people.reviewer2, proposalId)).rejects.toMatchObject({ code: 'NOT_ALLOWED' });
  await answer(world.people.qa, proposalId);
  expect(await findReading(readingId)).toMatchObject({ status: 'withdrawn', version: 3 });
  expect(await recorded()).toEqual(before);
  expect((await readingView(readingId))?.withdrawal).toMatchObject({
    reason: 'Wrong plate.',
    askedBy: { name: 'Invented reviewer2' },
    answer: { word: 'confirmed', by: { name: 'Invented qa' } },
  });
  const mails = await rows<{ to_address: string; body_text: string }>(
    `SELECT to_address, body_text FROM outbox WHERE subject LIKE 'Withdrawn:%'`,
  );
  expect(mails).toHaveLength(1);
  expect(mails[0].to_address).toBe(world.people.technician.email);
  expect(mails[0].body_text).toContain('Wrong plate.');
  expect(mails[0].body_text).toContain(`/frames/${frameId}`);
  const logged = await rows<{ action: string }>(
    `SELECT action FROM audit_rows WHERE subject_kind = 'reading' AND subject_id = :readingId ORDER BY id DESC LIMIT 2`,
    { readingId },
  );
  expect(logged.map(({ action }) => action)).toEqual(['reading.withdraw', 'reading.ask-withdrawal']);
});

test('the point leaves the chart and its limits; the CSV and the lot tell what it is', async () => {
  const chart = () => overTime({ benchId: world.benchId, choice: `lot:${world.lotId}`, last: 0 });
  const { readingId } = await accepted(1);
  const points = (await chart()).points.length;
  const within = (await findLot(world.lotId, { page: 1, find: '' }))!.counts.within;
  const { proposalId } = await ask(world.people.reviewer2, readingId, { reason: 'The lamp was on.' });
  await answer(world.people.qa, proposalId);
  const after = await chart();
  expect(after.points).toHaveLength(points - 1);
  expect(after.points.some((point) => point.readingId === readingId)).toBe(false);
  expect(after.withdrawn[0]).toMatchObject({ readingId, reason: 'The lamp was on.' });
  const line = overTimeCsv(after)
    .split('\r\n')
    .find((text) => text.startsWith(`${readingId},`));
  expect(line).toMatch(/,withdrawn,The lamp was on\.$/);
  expect((await findLot(world.lotId, { page: 1, find: '' }))!.counts.within).toBe(within - 1);
});

test('declined, the reading stays accepted; the question can be asked again', async () => {
  const { readingId } = await accepted(2);
  const { proposalId } = await ask(world.people.reviewer, readingId);
  await expect(ask(world.people.reviewer2, readingId)).rejects.toMatchObject({ code: 'ALREADY_THERE' });
  await expect(answer(world.people.qa, proposalId, { answer: 'declined', words: '' })).rejects.toMatchObject({
    code: 'BAD_INPUT',
  });
  await answer(world.people.qa, proposalId, { answer: 'declined', words: 'The plate was right.' });
  expect(await findReading(readingId)).toMatchObject({ status: 'accepted', version: 2 });
  await expect(answer(world.people.qa, proposalId)).rejects.toMatchObject({ status: 409 });
  await expect(ask(world.people.reviewer2, readingId)).resolves.toBeDefined();
});

test('of two who confirm at once one wins, and one row is logged', async () => {
  const { readingId } = await accepted(3);
  const { proposalId } = await ask(world.people.reviewer, readingId);
  const answers = await Promise.allSettled([
    answer(world.people.qa, proposalId),
    answer(world.people.reviewer2, proposalId),
  ]);
  expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  const lost = answers.find((one) => one.status === 'rejected');
  expect(lost?.reason).toMatchObject({ status: 409 });
  expect(
    await rows(`SELECT id FROM audit_rows WHERE action = 'reading.withdraw' AND subject_id = :readingId`, {
      readingId,
    }),
  ).toHaveLength(1);
});

test('needs a right password on both halves, and an accepted reading', async () => {
  const { readingId } = await accepted(4);
  await expect(ask(world.people.reviewer, readingId, { password: 'wrong' })).rejects.toMatchObject({
    code: 'WRONG_PASSWORD',
  });
  const { proposalId } = await ask(world.people.reviewer, readingId);
  await expect(answer(world.people.qa, proposalId, { password: 'wrong' })).rejects.toMatchObject({
    code: 'WRONG_PASSWORD',
  });
  const draft = await makeReading(world, as(world.people.technician), 5);
  await expect(ask(world.people.reviewer, draft.readingId, { version: 0 })).rejects.toMatchObject({
    code: 'WRONG_STATE',
  });
});
