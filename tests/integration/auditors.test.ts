import * as people from '@/app/(room)/people/actions';
import { addPerson } from '@/lib/server/commands/add-person';
import { checkPassword } from '@/lib/server/commands/check-password';
import { framesPage } from '@/lib/server/queries/frames-page';
import { personOfToken } from '@/lib/server/session';
import { rows } from './support/database';
import { makeReading } from './support/readings';
import { actAs, tokenOf } from './support/session';
import { NOW, PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

const DAY_MS = 86_400_000;
const dayFrom = (days: number) => new Date(Date.now() + days * DAY_MS).toISOString().slice(0, 10);

async function auditor(email: string, lastDay: string) {
  const person = { name: 'Invented visitor', email, roles: ['auditor' as const] };
  const { personId } = await addPerson(as(world.people.admin), { ...person, password: PASSWORD, lastDay });
  return { ...person, roles: [...person.roles], id: personId };
}

test('an auditor signs in until the end of the last day, and not after', async () => {
  const person = await auditor('visitor@test.example', '2026-11-20');
  const knock = (at: string) =>
    checkPassword({ email: person.email, password: PASSWORD, address: 'test', at: new Date(at) });
  await expect(knock('2026-11-20T23:59:59Z')).resolves.toMatchObject({ id: person.id });
  await expect(knock('2026-11-21T00:00:00Z')).rejects.toMatchObject({ code: 'WRONG_PASSWORD' });
});

test('a session ends with the pass', async () => {
  const valid = await auditor('valid@test.example', dayFrom(2));
  const over = await auditor('over@test.example', dayFrom(-2));
  expect(await personOfToken(await tokenOf(valid))).toMatchObject({ id: valid.id, roles: ['auditor'] });
  expect(await personOfToken(await tokenOf(over))).toBeNull();
});

test.each([
  ['without a last day', { roles: ['auditor'], lastDay: null }],
  ['beside another role', { roles: ['auditor', 'qa'], lastDay: '2027-01-31' }],
] as const)('a pass %s is refused', async (_what, { roles, lastDay }) => {
  await actAs(world.people.admin);
  const before = await rows('SELECT COUNT(*) AS many FROM people');
  const answer = await people.addPerson({
    name: 'Invented',
    email: 'wrong@test.example',
    password: PASSWORD,
    roles: [...roles],
    lastDay,
  });
  expect(answer).toMatchObject({
    ok: false,
    code: 'BAD_INPUT',
    fields: { roles: expect.any(String) as string },
  });
  expect(await rows('SELECT COUNT(*) AS many FROM people')).toEqual(before);
});

test('a frame is found by serial, file name and the beginning of its fingerprint or of a digest', async () => {
  const { frameId, readingId } = await makeReading(world, as(world.people.technician));
  const [{ sha256, digest, name }] = await rows<{ sha256: string; digest: string; name: string }>(
    `SELECT f.sha256, r.digest, f.file_name AS name FROM frames f JOIN readings r ON r.frame_id = f.id
     WHERE r.id = :readingId`,
    { readingId },
  );
  await makeReading(world, as(world.people.technician), 1);
  const found = async (find: string) => {
    const query = { state: '' as const, find, benchId: null, lotId: null, days: 0, mine: false, page: 1 };
    return (await framesPage(query, 0, NOW)).rows.map(({ id }) => id);
  };
  expect(await found(name)).toEqual([frameId]);
  expect(await found(sha256)).toEqual([frameId]);
  expect(await found(digest.slice(0, 12).toUpperCase())).toEqual([frameId]);
  expect(await found('00000000ffffffff')).toEqual([]);
});
