import { sendReading } from '@/lib/server/commands/send-reading';
import { releaseBench, setBenchRule } from '@/lib/server/commands/release-bench';
import { findBench, listBenchChoices } from '@/lib/server/queries/benches';
import { findFrame, mayFor } from '@/lib/server/queries/frames';
import { referencesOf } from '@/lib/server/queries/references';
import { whyBenchStopped } from '@/lib/server/reference-checks';
import { rows } from './support/database';
import { makeReading } from './support/readings';
import { acceptAs, acceptReference, referenceInReview, referenceResult } from './support/references';
import { as, closeWorld, makeWorld, type World } from './support/world';

let world: World;

beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

async function unitInReview(unit: number): Promise<{ frameId: number; readingId: number }> {
  const made = await makeReading(world, as(world.people.technician), unit);
  await sendReading(as(world.people.technician), { readingId: made.readingId, version: 0, note: '' });
  return made;
}

const references = () => referencesOf(world.benchId);
const mails = () =>
  rows<{ to_address: string; subject: string; body_text: string }>('SELECT * FROM outbox ORDER BY id');

test('an accepted reading of a reference is a check of its bench, once', async () => {
  expect((await references()).standing).toBe('unchecked');
  await acceptReference(world, 0.2);
  const view = await references();
  expect(view).toMatchObject({ standing: 'agrees', many: 1, stop: null });
  expect(view.checks[0].deviationNm).toBeCloseTo(0.2, 6);
  // u 0.35 nm of the bench and 0.001 nm of the source, k = 2.
  expect(view.checks[0].limitNm).toBeCloseTo(0.7, 5);
  expect((await findBench(world.benchId))?.fitness.word).toBe('clear');
});

test('a reading of a unit is no check', async () => {
  const { readingId } = await unitInReview(0);
  await acceptAs(world, 'reviewer', readingId);
  expect((await references()).many).toBe(1);
});

describe('outside twice', () => {
  let waiting: { frameId: number; readingId: number };

  test('the first asks for a repeat and stops nothing', async () => {
    waiting = await unitInReview(1);
    await acceptReference(world, 6.4);
    expect((await references()).standing).toBe('repeat');
    expect(await whyBenchStopped(waiting.readingId)).toBeNull();
    expect((await listBenchChoices())[0].fitness).toMatchObject({ word: 'look' });
    expect(await mails()).toHaveLength(0);
  });

  test('the second stops the bench and tells QA and admin, with what would explain it', async () => {
    await acceptReference(world, 6.3);
    const view = await references();
    expect(view.standing).toBe('stopped');
    // 300 mm · 6.3/632.8 is 3 mm.
    expect(view.checks[0].explanations.find(({ what }) => what === 'distance')?.step).toBeCloseTo(2.99, 1);
    const sent = await mails();
    expect(sent.map(({ to_address }) => to_address).sort()).toEqual([
      'admin@test.example',
      'qa@test.example',
    ]);
    expect(sent[0].body_text).toContain('nm (air)');
    expect(sent[0].body_text).toMatch(/would have to be/);
    expect((await findBench(world.benchId))?.fitness).toMatchObject({ word: 'stop' });
  });

  test('no unit is accepted then, with a sentence; the reading stays in review', async () => {
    await expect(acceptAs(world, 'reviewer', waiting.readingId)).rejects.toMatchObject({
      code: 'WRONG_STATE',
      message: expect.stringContaining('Bench T is stopped') as string,
    });
    const frame = await findFrame(waiting.frameId, waiting.readingId);
    expect(frame?.shown?.status).toBe('review');
    const may = await mayFor({ ...world.people.reviewer, email: '' }, frame!);
    expect(may).toMatchObject({ accept: false, acceptBarred: expect.stringContaining('stopped') as string });
  });

  test('a third check outside makes no second stop', async () => {
    await acceptReference(world, 6.5);
    expect(await rows('SELECT id FROM bench_stops')).toHaveLength(1);
    expect(await mails()).toHaveLength(2);
  });

  test('a reference is accepted all the same and shows that the bench agrees, which releases nothing', async () => {
    await acceptReference(world, 0.1);
    expect((await references()).standing).toBe('stopped');
    await expect(acceptAs(world, 'reviewer', waiting.readingId)).rejects.toMatchObject({
      code: 'WRONG_STATE',
    });
  });

  test('QA releases it with a reason, once; then units are accepted again', async () => {
    const { stop } = await references();
    const qa = as(world.people.qa, new Date());
    await releaseBench(qa, { stopId: stop!.id, reason: 'Mount ring put back.' });
    await expect(releaseBench(qa, { stopId: stop!.id, reason: 'Again.' })).rejects.toMatchObject({
      code: 'WRONG_STATE',
    });
    const view = await references();
    expect(view.stop).toBeNull();
    expect(view.lastRelease).toMatchObject({ reason: 'Mount ring put back.' });
    await acceptAs(world, 'reviewer', waiting.readingId);
    const [last] = await rows<{ action: string }>(
      "SELECT action FROM audit_rows WHERE subject_kind = 'bench' ORDER BY id DESC LIMIT 1",
    );
    expect(last.action).toBe('bench.release');
  });

  test('after the release one outside is a repeat again, not a stop', async () => {
    await acceptReference(world, 6.4);
    expect((await references()).standing).toBe('repeat');
    await acceptReference(world, 0.1);
    expect((await references()).standing).toBe('agrees');
  });
});

test('two signatures at once on a bench: a unit that comes after the stop is refused, never half accepted', async () => {
  const first = await referenceInReview(world, referenceResult(7));
  const second = await referenceInReview(world, referenceResult(7));
  const unit = await unitInReview(2);
  await acceptAs(world, 'reviewer', first.readingId);
  const [, ofUnit] = await Promise.allSettled([
    acceptAs(world, 'reviewer', second.readingId),
    acceptAs(world, 'reviewer2', unit.readingId),
  ]);
  expect((await references()).standing).toBe('stopped');
  const [{ status }] = await rows<{ status: string }>(
    `SELECT status FROM reading_states WHERE reading_id = ${unit.readingId}`,
  );
  expect(status).toBe(ofUnit.status === 'fulfilled' ? 'accepted' : 'review');
  const { stop } = await references();
  await releaseBench(as(world.people.qa), { stopId: stop!.id, reason: 'For the tests after this.' });
});

test('a limit of the bench’s own decides from then on', async () => {
  const qa = as(world.people.qa, new Date());
  await setBenchRule(qa, { benchId: world.benchId, limitNm: 0.15, method: 'absolute', why: 'Agreed.' });
  await acceptReference(world, 0.2);
  const view = await references();
  expect(view.checks[0]).toMatchObject({ inside: false, ownLimit: true, limitNm: 0.15 });
  expect(view.rule).toMatchObject({ limitNm: 0.15, why: 'Agreed.' });
});
