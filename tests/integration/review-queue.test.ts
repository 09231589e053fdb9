import { acceptReading, acceptSheet } from '@/lib/server/commands/accept-reading';
import { openLot, addUnits } from '@/lib/server/commands/open-lot';
import { sendReading } from '@/lib/server/commands/send-reading';
import { db } from '@/lib/server/db';
import { GONE_MS, lookAt } from '@/lib/server/presence';
import { contactSheet } from '@/lib/server/queries/contact-sheet';
import { queuePage, reviewQueue } from '@/lib/server/queries/review-queue';
import { WHOLE_QUEUE } from '@/lib/domain/review-queue';
import type { ReadingResult } from '@/lib/domain/reading-result';
import type { Me } from '@/lib/domain/views';
import { rows } from './support/database';
import { finding, inventedResult, makeReading } from './support/readings';
import { NOW, PASSWORD, as, closeWorld, makeWorld, type Person, type World } from './support/world';

let world: World;
let me: Me;

async function inReview(
  change: Partial<ReadingResult> = {},
  minutes = 0,
  uploader: Person = world.people.technician,
  where: World = world,
) {
  const made = await makeReading(where, as(uploader), 0, inventedResult(change));
  const at = new Date(NOW.getTime() + minutes * 60_000);
  await sendReading(as(world.people.technician, at), { readingId: made.readingId, version: 0, note: '' });
  return made.readingId;
}

const OUTSIDE = { wavelengthNm: 645, wavelengthVacuumNm: 645.2 };
const GUARD = { wavelengthNm: 639.6, wavelengthVacuumNm: 639.8 };

let ids: Record<'stop' | 'outside' | 'guard' | 'look' | 'young' | 'old' | 'own', number>;
let newLot: World;

beforeAll(async () => {
  world = await makeWorld();
  me = { ...world.people.reviewer };
  // An accepted reading makes the first lot's supplier a known one: of another lot, so that it counts.
  const { lotId } = await openLot(as(world.people.admin), {
    number: '0932',
    specificationId: world.specificationId,
    supplier: 'Invented Ltd',
  });
  await addUnits(as(world.people.admin), { lotId, serials: ['B1'] });
  const [unit] = await db().tables.units.findAll({ where: { lotId } });
  const known = await makeReading({ ...world, lotId, unitIds: [unit.id] }, as(world.people.technician));
  await sendReading(as(world.people.technician), { readingId: known.readingId, version: 0, note: '' });
  await acceptReading(as(world.people.reviewer), {
    readingId: known.readingId,
    version: 1,
    password: PASSWORD,
    answers: [],
  });
  const opened = await openLot(as(world.people.admin), {
    number: '0940',
    specificationId: world.specificationId,
    supplier: 'Newcomer Ltd',
  });
  await addUnits(as(world.people.admin), { lotId: opened.lotId, serials: ['N1'] });
  const [newUnit] = await db().tables.units.findAll({ where: { lotId: opened.lotId } });
  newLot = { ...world, lotId: opened.lotId, unitIds: [newUnit.id] };
  ids = {
    old: await inReview({}, 1),
    young: await inReview({}, 9),
    own: await inReview({}, 10, world.people.both),
    look: await inReview({ findings: [finding('dim', 'look')] }, 3),
    guard: await inReview(GUARD, 4),
    outside: await inReview(OUTSIDE, 5),
    stop: await inReview({ findings: [finding('clipping', 'stop')] }, 6),
  };
});
afterAll(closeWorld);

test('the queue runs from the gravest to the calm, then by who waits longest, and says why', async () => {
  const fresh = await inReview({}, 0, world.people.technician, newLot);
  const queue = await reviewQueue();
  expect(queue.map(({ readingId }) => readingId)).toEqual([
    ids.stop,
    ids.outside,
    ids.guard,
    ids.look,
    fresh,
    ids.old,
    ids.young,
    ids.own,
  ]);
  expect(queue.map(({ risk }) => risk)).toEqual([
    'stop',
    'limit',
    'limit',
    'look',
    'new-supplier',
    'rest',
    'rest',
    'rest',
  ]);
  expect(queue[2].because).toBe('The interval reaches into the guard band.');
});

test('a page of it counts every group and tells how old the oldest is', async () => {
  const page = await queuePage({ ...WHOLE_QUEUE, risk: 'limit' }, 1);
  expect(page.rows.map(({ readingId }) => readingId)).toEqual([ids.outside, ids.guard]);
  expect(page.counts).toEqual({ stop: 1, limit: 2, moved: 0, look: 1, 'new-supplier': 1, rest: 3 });
  expect(page.oldestAt).toBe(NOW.toISOString());
  expect((await queuePage({ ...WHOLE_QUEUE, find: 'invented-' }, 1)).total).toBe(8);
  expect((await queuePage({ ...WHOLE_QUEUE, find: 'invented-9999' }, 1)).total).toBe(0);
  expect(await reviewQueue({ ...WHOLE_QUEUE, benchId: world.benchId + 1 })).toEqual([]);
});

test('a contact sheet shows only what is clean and open to this person, and signs each by itself', async () => {
  const forBoth = await contactSheet({ ...world.people.both }, WHOLE_QUEUE);
  expect(forBoth.barred).toBe(1);
  const sheet = await contactSheet(me, WHOLE_QUEUE);
  const shown = sheet.rows.map(({ readingId }) => readingId);
  expect(shown).toHaveLength(4);
  for (const id of [ids.stop, ids.outside, ids.guard, ids.look]) expect(shown).not.toContain(id);

  // Somebody is faster with one of them; others are slipped in that do not belong on a sheet.
  const answers = { password: PASSWORD, answers: [] };
  await acceptReading(as(world.people.reviewer2), { readingId: ids.young, version: 1, ...answers });
  const wanted = [...shown, ids.stop, ids.outside, ids.look, 999_999];
  const { accepted, refused } = await acceptSheet(as(world.people.reviewer), {
    readings: wanted.map((readingId) => ({ readingId, version: 1 })),
    password: PASSWORD,
  });
  expect(accepted).toBe(3);
  expect(refused.map(({ readingId }) => readingId)).toEqual([
    ids.young,
    ids.stop,
    ids.outside,
    ids.look,
    999_999,
  ]);
  expect(refused[0]).toMatchObject({
    name: expect.stringMatching(/^invented-\d+\.png, reading 1$/) as string,
    message: expect.stringContaining('Invented reviewer2 accepted this reading') as string,
  });
  const signed = await rows<{ reading_id: number }>(
    'SELECT reading_id FROM signatures WHERE person_id = :id AND reading_id IN (:wanted)',
    { id: world.people.reviewer.id, wanted },
  );
  expect(signed).toHaveLength(3);
  const logged = await rows(
    `SELECT id FROM audit_rows WHERE action = 'reading.accept' AND subject_id IN (:wanted)`,
    { wanted },
  );
  expect(logged).toHaveLength(4);
});

test('a sheet is not signed with a wrong password, and not by who had a hand in a reading', async () => {
  const one = await inReview({}, 20, world.people.both);
  const sheet = { readings: [{ readingId: one, version: 1 }], password: 'not the password' };
  await expect(acceptSheet(as(world.people.reviewer), sheet)).rejects.toMatchObject({
    code: 'WRONG_PASSWORD',
  });
  const { accepted, refused } = await acceptSheet(as(world.people.both), { ...sheet, password: PASSWORD });
  expect([accepted, refused.length]).toEqual([0, 1]);
  expect(await rows('SELECT id FROM signatures WHERE reading_id = :one', { one })).toHaveLength(0);
});

test('who else looks is named while they look, and not themselves', () => {
  const at = (ms: number) => new Date(NOW.getTime() + ms);
  const [one, two] = [world.people.reviewer, world.people.reviewer2];
  expect(lookAt(1, one, at(0))).toEqual([]);
  expect(lookAt(1, two, at(5000))).toEqual([one.name]);
  expect(lookAt(1, one, at(10_000))).toEqual([two.name]);
  expect(lookAt(2, one, at(10_000))).toEqual([]);
  expect(lookAt(1, one, at(5000 + GONE_MS + 1))).toEqual([]);
});
