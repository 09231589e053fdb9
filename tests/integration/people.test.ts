import { addPerson, createFirstAdmin } from '@/lib/server/commands/add-person';
import { askReset } from '@/lib/server/commands/ask-reset';
import { changePerson, endSessions } from '@/lib/server/commands/change-person';
import { checkOwnPassword, checkPassword } from '@/lib/server/commands/check-password';
import { resetPassword } from '@/lib/server/commands/reset-password';
import { PRODUCT } from '@/lib/server/context';
import { sendDueMails } from '@/lib/server/outbox';
import { listFakeMails } from '@/lib/server/queries/mail';
import { anyPeople } from '@/lib/server/queries/people';
import { WRONG_PER_EMAIL } from '@/lib/server/attempts';
import { personOfToken } from '@/lib/server/session';
import { emptyDatabase, rows } from './support/database';
import { tokenOf } from './support/session';
import { NOW, PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

let world: World;
beforeEach(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

const minutesLater = (minutes: number) => new Date(NOW.getTime() + minutes * 60_000);
const knock = (email: string, password: string, at = NOW, address = '192.0.2.1') =>
  checkPassword({ email, password, address, at });

describe('the door', () => {
  test('opens for the right password and tells wrong ones and unknown e-mails apart from nothing', async () => {
    await expect(knock(world.people.qa.email, PASSWORD)).resolves.toMatchObject({ id: world.people.qa.id });
    const wrong = await knock(world.people.qa.email, 'wrong').catch((problem: Error) => problem.message);
    const unknown = await knock('stranger@test.example', 'wrong').catch((problem: Error) => problem.message);
    expect(wrong).toBe(unknown);
  });

  test('shuts after too many wrong passwords for one e-mail, says how long, and opens again', async () => {
    const { email } = world.people.technician;
    for (let i = 0; i < WRONG_PER_EMAIL; i += 1)
      await expect(knock(email, 'wrong')).rejects.toMatchObject({ code: 'WRONG_PASSWORD' });
    await expect(knock(email, PASSWORD, minutesLater(5))).rejects.toMatchObject({
      code: 'TOO_MANY',
      message: expect.stringContaining('10 minutes') as string,
    });
    await expect(knock(world.people.qa.email, PASSWORD)).resolves.toBeDefined();
    await expect(knock(email, PASSWORD, minutesLater(16))).resolves.toBeDefined();
  });

  test('many wrong passwords at once count as many', async () => {
    const { email } = world.people.technician;
    const answers = await Promise.allSettled(Array.from({ length: 12 }, () => knock(email, 'wrong')));
    const codes = answers.map((answer) =>
      answer.status === 'rejected' ? (answer.reason as { code: string }).code : 'IN',
    );
    expect(codes.filter((code) => code === 'WRONG_PASSWORD').length).toBeLessThanOrEqual(WRONG_PER_EMAIL);
    expect(codes).not.toContain('IN');
  });

  test('shuts for an address that tries many e-mails', async () => {
    for (let i = 0; i < 30; i += 1)
      await expect(knock(`stranger${i}@test.example`, 'wrong')).rejects.toBeDefined();
    await expect(knock(world.people.qa.email, PASSWORD)).rejects.toMatchObject({ code: 'TOO_MANY' });
    await expect(knock(world.people.qa.email, PASSWORD, NOW, '192.0.2.2')).resolves.toBeDefined();
  });

  test('signing again is throttled too', async () => {
    const { id } = world.people.reviewer;
    for (let i = 0; i < WRONG_PER_EMAIL; i += 1)
      await expect(checkOwnPassword(id, 'wrong', NOW)).rejects.toMatchObject({ code: 'WRONG_PASSWORD' });
    await expect(checkOwnPassword(id, PASSWORD, NOW)).rejects.toMatchObject({ code: 'TOO_MANY' });
  });
});

describe('sessions', () => {
  test('end at once when an admin switches the person off', async () => {
    const token = await tokenOf(world.people.technician);
    expect(await personOfToken(token)).toMatchObject({
      id: world.people.technician.id,
      roles: ['technician'],
    });
    await changePerson(as(world.people.admin), {
      personId: world.people.technician.id,
      roles: ['technician'],
      active: false,
    });
    expect(await personOfToken(token)).toBeNull();
    await expect(knock(world.people.technician.email, PASSWORD)).rejects.toMatchObject({
      code: 'WRONG_PASSWORD',
    });
  });

  test('end at once when roles change, and when the person ends them', async () => {
    const token = await tokenOf(world.people.technician);
    await changePerson(as(world.people.admin), {
      personId: world.people.technician.id,
      roles: ['qa'],
      active: true,
    });
    expect(await personOfToken(token)).toBeNull();
    const fresh = await tokenOf(world.people.technician);
    expect(await personOfToken(fresh)).toMatchObject({ roles: ['qa'] });
    await endSessions(as(world.people.technician), world.people.technician.id);
    expect(await personOfToken(fresh)).toBeNull();
  });

  test('are not made from a token that was tampered with', async () => {
    const token = await tokenOf(world.people.technician);
    expect(await personOfToken(`${token.slice(0, -4)}AAAA`)).toBeNull();
    expect(await personOfToken('nonsense')).toBeNull();
  });

  test('the last active admin can not be switched off or lose the role', async () => {
    const { id } = world.people.admin;
    await expect(
      changePerson(as(world.people.admin), { personId: id, roles: ['admin'], active: false }),
    ).rejects.toMatchObject({ code: 'WRONG_STATE' });
    await expect(
      changePerson(as(world.people.admin), { personId: id, roles: ['qa'], active: true }),
    ).rejects.toMatchObject({ code: 'WRONG_STATE' });
  });

  test('two admins switching each other off at once: one stays', async () => {
    const { personId } = await addPerson(
      { actor: PRODUCT, at: NOW },
      { name: 'Second', email: 'second@test.example', roles: ['admin'], password: PASSWORD },
    );
    await Promise.allSettled([
      changePerson(as(world.people.admin), { personId, roles: ['admin'], active: false }),
      changePerson(as({ ...world.people.admin, id: personId }), {
        personId: world.people.admin.id,
        roles: ['admin'],
        active: false,
      }),
    ]);
    const left = await rows(
      "SELECT p.id FROM people p JOIN person_roles r ON r.person_id = p.id AND r.role = 'admin' WHERE p.active",
    );
    expect(left.length).toBe(1);
  });
});

describe('a new password by mail', () => {
  const site = 'http://localhost:3000';

  async function linkFor(email: string): Promise<string> {
    await askReset(as(world.people.technician), { email, site });
    expect(await sendDueMails(NOW)).toBe(1);
    const [mail] = (await listFakeMails()) ?? [];
    expect(mail).toMatchObject({ to: email, subject: 'Set a new Midfringe password' });
    expect(mail.links).toHaveLength(1);
    return mail.links[0].split('/reset/')[1];
  }

  test('arrives, works once, ends sessions, and the token is stored only as a hash', async () => {
    const { email } = world.people.qa;
    const session = await tokenOf(world.people.qa);
    const token = await linkFor(email);
    expect(await rows('SELECT id FROM password_resets WHERE token_hash = :token', { token })).toHaveLength(0);
    await resetPassword(
      { actor: PRODUCT, at: minutesLater(1) },
      { token, password: 'another long password' },
    );
    await expect(knock(email, 'another long password')).resolves.toBeDefined();
    expect(await personOfToken(session)).toBeNull();
    await expect(
      resetPassword({ actor: PRODUCT, at: minutesLater(2) }, { token, password: 'third long password' }),
    ).rejects.toMatchObject({ code: 'BAD_INPUT' });
  });

  test('ends after half an hour', async () => {
    const token = await linkFor(world.people.qa.email);
    const late = resetPassword(
      { actor: PRODUCT, at: minutesLater(31) },
      { token, password: 'another long password' },
    );
    await expect(late).rejects.toMatchObject({ code: 'BAD_INPUT' });
  });

  test('answers the same for an unknown e-mail and mails nothing', async () => {
    expect(await askReset(as(world.people.qa), { email: 'stranger@test.example', site })).toBeNull();
    expect(await sendDueMails(NOW)).toBe(0);
  });

  test('a mail is sent once, also when two send at the same time', async () => {
    await askReset(as(world.people.qa), { email: world.people.qa.email, site });
    const sent = await Promise.all([sendDueMails(NOW), sendDueMails(NOW), sendDueMails(NOW)]);
    expect(sent.reduce((sum, one) => sum + one, 0)).toBe(1);
  });
});

describe('the first admin', () => {
  const first = { name: 'First', email: 'first@test.example', password: PASSWORD };

  test('is made only while nobody is there, also of two first visits at once', async () => {
    await expect(createFirstAdmin({ actor: PRODUCT, at: NOW }, first)).rejects.toMatchObject({
      code: 'ALREADY_THERE',
    });
    await emptyDatabase();
    expect(await anyPeople()).toBe(false);
    const answers = await Promise.allSettled([
      createFirstAdmin({ actor: PRODUCT, at: NOW }, first),
      createFirstAdmin({ actor: PRODUCT, at: NOW }, { ...first, email: 'other@test.example' }),
    ]);
    expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect(await rows('SELECT id FROM people')).toHaveLength(1);
    expect(await anyPeople()).toBe(true);
  });
});
