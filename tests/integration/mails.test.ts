import { SMTPServer } from 'smtp-server';
import { addComment } from '@/lib/server/commands/add-comment';
import { setMailTiming } from '@/lib/server/commands/set-mail-timing';
import { PRODUCT } from '@/lib/server/context';
import { mailHtml } from '@/lib/server/mail-html';
import { nextDigestAt, sendDueMails } from '@/lib/server/outbox';
import { inTransaction } from '@/lib/server/transaction';
import { rows } from './support/database';
import { makeReading } from './support/readings';
import { NOW, as, closeWorld, makeWorld, type World } from './support/world';

jest.setTimeout(60_000);

/** A mail server that fails where it is told to. Seeded, so that a failing run can be run again. */
interface Fake {
  port: number;
  /** Message ids of the mails it has taken, in order. */
  taken: string[];
  raw: string[];
  failShare: number;
  /** Takes the mail, then breaks the line before it says so. */
  loseReplies: number;
  close: () => Promise<void>;
}

const SEED = 20_261_201;

/** Numerical Recipes' quick generator (Press et al. 2007, 7.1): good enough to choose failures. */
function random(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return state / 2 ** 32;
  };
}

async function startFake(): Promise<Fake> {
  const chance = random(SEED);
  const fake = { port: 0, taken: [], raw: [], failShare: 0, loseReplies: 0 } as unknown as Fake;
  const fails = () => chance() < fake.failShare;
  const refusal = () => Object.assign(new Error('Invented trouble, try later'), { responseCode: 451 });
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS'],
    logger: false,
    onConnect: (_session, done) => done(fails() ? refusal() : null),
    onMailFrom: (_address, _session, done) => done(fails() ? refusal() : null),
    onRcptTo: (_address, _session, done) => done(fails() ? refusal() : null),
    onData(stream, _session, done) {
      const parts: Buffer[] = [];
      stream.on('data', (part: Buffer) => parts.push(part));
      stream.on('end', () => {
        if (fails()) {
          done(refusal());
          return;
        }
        const raw = Buffer.concat(parts).toString('utf8');
        fake.raw.push(raw);
        fake.taken.push(/^Message-ID: <(.+)>/im.exec(raw)?.[1] ?? '');
        if (fake.loseReplies > 0) {
          fake.loseReplies -= 1;
          for (const connection of server.connections) connection.close();
          return;
        }
        done();
      });
    },
  });
  server.on('error', () => undefined); // broken lines are what this server is for
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = server.server.address();
  fake.port = typeof address === 'object' && address ? address.port : 0;
  fake.close = () => new Promise((resolve) => server.close(resolve));
  return fake;
}

let fake: Fake;
let world: World;

beforeAll(async () => {
  fake = await startFake();
  // Before anything reads the environment: this file's product talks to this file's mail server.
  process.env.SMTP_URL = `smtp://127.0.0.1:${fake.port}`;
  world = await makeWorld();
});
afterAll(async () => {
  await closeWorld();
  await fake.close();
});
beforeEach(() => {
  fake.taken.length = 0;
  fake.raw.length = 0;
  fake.failShare = 0;
  fake.loseReplies = 0;
});

const after = (seconds: number) => new Date(NOW.getTime() + seconds * 1000);

async function post(
  many: number,
  more: { notice?: boolean; cause?: string } = {},
  to = 'someone@test.example',
) {
  for (let i = 0; i < many; i += 1)
    await inTransaction({ actor: PRODUCT, at: NOW }, (work) =>
      work.mail({ to, subject: `Invented ${i}`, text: `Words ${i}`, ...more }),
    );
}

const unsent = async () => (await rows('SELECT id FROM outbox WHERE sent_at IS NULL')).length;

test('a mail server that fails at random gets each mail once and only once', async () => {
  await post(25);
  fake.failShare = 0.3;
  let rounds = 0;
  for (let seconds = 0; (await unsent()) > 0 && rounds < 60; seconds += 7200) {
    rounds += 1;
    // Two senders at once, as two processes of the product would be.
    await Promise.all([sendDueMails(after(seconds)), sendDueMails(after(seconds))]);
  }
  expect(rounds).toBeGreaterThan(1);
  expect(await unsent()).toBe(0);
  expect(fake.taken).toHaveLength(25);
  expect(new Set(fake.taken).size).toBe(25);
});

test('a reply that is lost sends the mail again under the same message id, by which it is one mail', async () => {
  await post(1);
  fake.loseReplies = 1;
  expect(await sendDueMails(NOW)).toBe(0);
  expect(await sendDueMails(after(3600))).toBe(1);
  expect(fake.taken).toHaveLength(2);
  expect(new Set(fake.taken).size).toBe(1);
  expect(await unsent()).toBe(0);
});

test('while the mail server is down nothing is lost', async () => {
  await post(3);
  fake.failShare = 1;
  expect(await sendDueMails(NOW)).toBe(0);
  expect(await unsent()).toBe(3);
  fake.failShare = 0;
  await sendDueMails(after(90_000));
  expect(fake.taken).toHaveLength(3);
});

test('one open mail for one cause; once it is sent, the next one may go', async () => {
  await post(3, { cause: 'bench 1 stopped' });
  expect(await sendDueMails(NOW)).toBe(1);
  await post(1, { cause: 'bench 1 stopped' });
  expect(await sendDueMails(NOW)).toBe(1);
});

test('whoever chose it gets the notices of a day in one mail; what is no notice comes at once', async () => {
  await setMailTiming(as(world.people.qa), { daily: true });
  const { readingId } = await makeReading(world, as(world.people.technician));
  for (const words of ['@Invented qa, one.', '@Invented qa, two.', '@Invented reviewer, at once.'])
    await addComment(as(world.people.technician), { readingId, words });
  await post(1, {}, world.people.qa.email);
  await sendDueMails(NOW);
  expect(fake.raw.filter((raw) => raw.includes(world.people.reviewer.email))).toHaveLength(1);
  expect(fake.raw.filter((raw) => raw.includes(world.people.qa.email))).toHaveLength(1);
  fake.raw.length = 0;
  const morning = nextDigestAt(NOW);
  expect(morning.toISOString()).toBe('2026-11-21T05:00:00.000Z');
  await sendDueMails(new Date(morning.getTime() - 1));
  expect(fake.raw).toHaveLength(0);
  await Promise.all([sendDueMails(morning), sendDueMails(morning)]);
  expect(fake.raw).toHaveLength(1);
  expect(fake.raw[0]).toContain('Subject: 2 notices of the day');
  expect(fake.raw[0]).toMatch(/one\.[\s\S]*two\./);
  expect(await unsent()).toBe(0);
});

test('a mail is plain text and a page with the same words, and nothing in it is taken for markup', () => {
  const html = mailHtml('Returned: <b>', 'Hello,\n\n1 < 2 & "so on"\n\nhttp://localhost/frames/1?reading=2');
  expect(html).toContain('Returned: &lt;b&gt;');
  expect(html).toContain('1 &lt; 2 &amp; &quot;so on&quot;');
  expect(html).toContain('<a href="http://localhost/frames/1?reading=2"');
  expect(html).not.toMatch(/<img|src=|<script/);
});
