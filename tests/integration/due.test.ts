import { addPerson } from '@/lib/server/commands/add-person';
import { addPlate } from '@/lib/server/commands/add-plate';
import { addSource } from '@/lib/server/commands/add-source';
import { changePerson } from '@/lib/server/commands/change-person';
import { mailDue } from '@/lib/server/commands/mail-due';
import { plateSchema } from '@/lib/domain/setup-schemas';
import { sourceSchema } from '@/lib/domain/source-schemas';
import { PRODUCT } from '@/lib/server/context';
import { sendDueMails } from '@/lib/server/outbox';
import { listBenchChoices } from '@/lib/server/queries/benches';
import { listDue } from '@/lib/server/queries/due';
import { listFakeMails } from '@/lib/server/queries/mail';
import { rows } from './support/database';
import { PASSWORD, PLATE, SETUP, as, closeWorld, makeWorld, putInForce, type World } from './support/world';

/** Dates of invented certificates: the distance runs out on 24 December, the rest much later. */
const DUE = '2026-12-24';
const day = (date: string, time = '08:00') => new Date(`${date}T${time}:00.000Z`);

// A world is made anew for each test, and hashing its people's passwords takes its time on a busy machine.
jest.setTimeout(60_000);

let world: World;
beforeEach(async () => {
  world = await makeWorld();
  const distanceMm = { ...SETUP.distanceMm, due: DUE };
  await putInForce(world.people, {
    ...SETUP,
    ...world.plate,
    benchId: world.benchId,
    afterNumber: 1,
    distanceMm,
  });
});
afterAll(closeWorld);

const told = (at: Date) => mailDue({ actor: PRODUCT, at });
const mails = () =>
  rows<{ to_address: string; subject: string; body_text: string }>(
    "SELECT to_address, subject, body_text FROM outbox WHERE subject LIKE '%due%' ORDER BY id",
  );

test('nothing is said while nothing is due within 14 days', async () => {
  expect(await told(day('2026-12-09'))).toBe(0);
  expect(await mails()).toEqual([]);
  expect(await listDue(day('2026-12-09'))).toEqual([]);
  expect((await listBenchChoices(day('2026-12-09')))[0].fitness.word).toBe('clear');
  expect((await listBenchChoices(day('2026-12-10')))[0].fitness).toEqual({
    word: 'look',
    text: 'due in 14 days',
  });
});

test('from the fourteenth day before on, admin and QA are told once a day each, whatever restarts', async () => {
  expect(await told(day('2026-12-10'))).toBe(2);
  expect(await told(day('2026-12-10', '23:59'))).toBe(0);
  expect(await told(day('2026-12-11', '00:01'))).toBe(2);
  const sent = await mails();
  expect(sent.map(({ to_address }) => to_address)).toEqual([
    world.people.admin.email,
    world.people.qa.email,
    world.people.admin.email,
    world.people.qa.email,
  ]);
  expect(sent[0]).toMatchObject({ subject: '1 due within 14 days' });
  expect(sent[0].body_text).toContain('- Bench T, setup 2: distance due 24 Dec 2026, in 14 days');
});

test('of many at once each person is told once', async () => {
  const answers = await Promise.all(Array.from({ length: 5 }, () => told(day('2026-12-20'))));
  expect(answers.reduce((sum, many) => sum + many, 0)).toBe(2);
  expect(await mails()).toHaveLength(2);
});

test('whoever joins is told the same day, whoever is switched off is not', async () => {
  await told(day('2026-12-20'));
  await addPerson(
    { actor: PRODUCT, at: day('2026-12-20') },
    { name: 'Invented QA 2', email: 'qa2@test.example', roles: ['qa'], password: PASSWORD },
  );
  await changePerson(as(world.people.admin, day('2026-12-20')), {
    personId: world.people.qa.id,
    roles: ['qa'],
    active: false,
  });
  expect(await told(day('2026-12-20', '12:00'))).toBe(1);
  expect(await told(day('2026-12-21'))).toBe(2);
  expect((await mails()).slice(2).map(({ to_address }) => to_address)).toEqual([
    'qa2@test.example',
    world.people.admin.email,
    'qa2@test.example',
  ]);
});

test('plates on no bench and references count, products and what is not due do not; the most urgent is first', async () => {
  await addPlate(as(world.people.admin), plateSchema.parse({ ...PLATE, name: 'P-8', due: '2026-12-19' }));
  const lamp = { kind: 'lamp-line', vacuumNm: 546.2268, uNm: 0.001, due: '2026-12-22' } as const;
  await addSource(as(world.people.admin), sourceSchema.parse({ ...lamp, name: 'Lamp L-1' }));
  await addSource(
    as(world.people.admin),
    sourceSchema.parse({ ...lamp, name: 'Lamp L-2', isReference: false }),
  );
  await addSource(as(world.people.admin), sourceSchema.parse({ ...lamp, name: 'Lamp L-3', due: null }));
  expect((await listDue(day('2026-12-20'))).map(({ what, when }) => `${what} ${when}`)).toEqual([
    'Plate P-8: certificate overdue since 19 Dec 2026',
    'Lamp L-1: certificate due 22 Dec 2026, in 2 days',
    'Bench T, setup 2: distance due 24 Dec 2026, in 4 days',
  ]);
});

test('the mail goes out through the mail server', async () => {
  await told(day('2026-12-25'));
  await sendDueMails(day('2026-12-25', '08:01'));
  const mail = (await listFakeMails())?.find(
    ({ to, text }) => to === world.people.qa.email && text.includes('distance overdue since 24 Dec 2026'),
  );
  expect(mail).toMatchObject({ subject: '1 overdue, 0 due within 14 days' });
});
