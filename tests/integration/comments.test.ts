import { addComment } from '@/lib/server/commands/add-comment';
import { changePerson } from '@/lib/server/commands/change-person';
import { sendReading } from '@/lib/server/commands/send-reading';
import { returnReading } from '@/lib/server/commands/return-reading';
import { commentsOf } from '@/lib/server/queries/comments';
import { frameRows } from '@/lib/server/queries/frame-rows';
import { framesPage, returnedTo } from '@/lib/server/queries/frames-page';
import { rows } from './support/database';
import { makeReading } from './support/readings';
import { NOW, as, closeWorld, makeWorld, type World } from './support/world';

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

test('a comment mails everyone named in it once, and not its writer', async () => {
  const { frameId, readingId } = await makeReading(world, as(world.people.technician));
  const words =
    '@Invented qa and @Invented reviewer2, see order 5. @Invented qa, once more. @Invented technician';
  const { mailed } = await addComment(as(world.people.technician), { readingId, words });
  expect(mailed.sort()).toEqual(['Invented qa', 'Invented reviewer2']);
  const mails = await rows<{ to_address: string; body_text: string }>(
    'SELECT to_address, body_text FROM outbox ORDER BY to_address',
  );
  expect(mails.map(({ to_address: to }) => to)).toEqual([
    world.people.qa.email,
    world.people.reviewer2.email,
  ]);
  for (const mail of mails) {
    expect(mail.body_text).toContain(words);
    expect(mail.body_text).toContain(`/frames/${frameId}?reading=${readingId}`);
  }
  expect(await commentsOf(frameId)).toMatchObject([
    { words, reading: 1, by: { name: 'Invented technician' } },
  ]);
});

test('someone who may no longer sign in is not mailed', async () => {
  const { readingId } = await makeReading(world, as(world.people.technician), 1);
  const off = { personId: world.people.both.id, roles: [], active: false };
  await changePerson(as(world.people.admin), off);
  const { mailed } = await addComment(as(world.people.qa), { readingId, words: '@Invented both' });
  expect(mailed).toEqual([]);
});

test('a returned reading stands on the list of who took and who sent it, with the reason', async () => {
  const { frameId, readingId } = await makeReading(world, as(world.people.technician), 2);
  await sendReading(as(world.people.technician2), { readingId, version: 0, note: '' });
  await returnReading(as(world.people.reviewer), {
    readingId,
    version: 1,
    reason: 'no-clean-region',
    words: 'A scratch.',
  });
  const [row] = await frameRows([frameId]);
  expect(row.returned).toEqual({ reason: 'no-clean-region', words: 'A scratch.' });
  const query = {
    state: 'returned',
    find: '',
    benchId: null,
    lotId: null,
    days: 0,
    mine: true,
    page: 1,
  } as const;
  for (const [person, many] of [
    [world.people.technician, 1],
    [world.people.technician2, 1],
    [world.people.reviewer, 0],
  ] as const) {
    expect(await returnedTo(person.id)).toBe(many);
    expect((await framesPage(query, person.id, NOW)).rows).toHaveLength(many);
  }
});
