import { acceptReading } from '@/lib/server/commands/accept-reading';
import { addSetup } from '@/lib/server/commands/add-setup';
import { decideSetup } from '@/lib/server/commands/decide-setup';
import { fitFrame } from '@/lib/server/commands/fit-frame';
import { measureCorrection } from '@/lib/server/commands/measure-correction';
import { receiveFrame } from '@/lib/server/commands/receive-frame';
import { sendReading } from '@/lib/server/commands/send-reading';
import { setupSchema } from '@/lib/domain/setup-schemas';
import { PRODUCT } from '@/lib/server/context';
import { findBench } from '@/lib/server/queries/benches';
import { overTime } from '@/lib/server/queries/over-time';
import { readingView } from '@/lib/server/queries/readings';
import { findReading } from '@/lib/server/reading-facts';
import { setupAt } from '@/lib/server/setup-timeline';
import { rows } from './support/database';
import { fringes } from './support/pictures';
import { NOW, PASSWORD, SETUP, as, closeWorld, makeWorld, putInForce, type World } from './support/world';

const HOUR = 3_600_000;
const later = (hours: number) => new Date(NOW.getTime() + hours * HOUR);

// A world is made anew for each test, and hashing its people's passwords takes its time on a busy machine.
jest.setTimeout(60_000);

let world: World;
beforeEach(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

/** A simulated frame of a unit, received and fitted at a moment. */
async function take(seed: number, unit: number, at: Date): Promise<{ frameId: number; readingId: number }> {
  const bytes = await fringes(seed);
  const { frameId } = await receiveFrame(as(world.people.technician, at), {
    fileName: `A${unit + 1}-${seed}.png`,
    benchId: world.benchId,
    lotId: world.lotId,
    sourceId: null,
    serial: `A${unit + 1}`,
    detectorMm: null,
    declaredBytes: bytes.length,
    body: (async function* () {
      yield bytes;
    })(),
  });
  await fitFrame({ actor: PRODUCT, at }, frameId);
  const [{ reading_id: readingId }] = await rows<{ reading_id: number }>(
    'SELECT reading_id FROM frames WHERE id = :frameId',
    { frameId },
  );
  return { frameId, readingId };
}

const send = (readingId: number, at: Date) =>
  sendReading(as(world.people.technician, at), { readingId, version: 0, note: '' });
async function accept(readingId: number, version: number, at: Date): Promise<void> {
  const view = await readingView(readingId);
  const answers = (view?.findings ?? [])
    .filter(({ word }) => word === 'look')
    .map(({ check }) => ({ check, answer: 'accept-as-is' as const, reason: 'Invented.' }));
  await acceptReading(as(world.people.reviewer, at), { readingId, version, password: PASSWORD, answers });
}

async function propose(from: Date, change: object, at: Date): Promise<number> {
  const setup = setupSchema.parse({
    ...SETUP,
    ...world.plate,
    benchId: world.benchId,
    afterNumber: 2,
    inForceFrom: from.toISOString(),
    why: 'The scale was read wrong.',
    ...change,
  });
  return (await addSetup(as(world.people.admin, at), setup)).setupId;
}

const approve = (setupId: number, at: Date) =>
  decideSetup(as(world.people.qa, at), { setupId, decision: 'approved', reason: '' });

async function measureAll(at: Date): Promise<number> {
  let many = 0;
  while (await measureCorrection({ actor: PRODUCT, at })) many += 1;
  return many;
}

/** 1 % more per pixel makes 1 % more wavelength: 635 nm becomes 641 nm, outside 630 to 640 nm. */
const WRONG_SCALE = {
  scaleUmPerPx: { ...SETUP.scaleUmPerPx, value: SETUP.scaleUmPerPx.value * 1.01 },
  confirmed: { scaleUmPerPx: 'Read from the picture again.' },
};

test('a correction shows old beside new, waits for all of them, and gives every reading of its time a successor', async () => {
  const draft = await take(11, 0, later(1));
  const waiting = await take(12, 1, later(2));
  await send(waiting.readingId, later(2));
  const accepted = await take(13, 2, later(3));
  await send(accepted.readingId, later(3));
  await accept(accepted.readingId, 1, later(4));
  await putInForce(
    world.people,
    { ...SETUP, ...world.plate, benchId: world.benchId, afterNumber: 1 },
    later(10),
  );
  const after = await take(14, 3, later(11));
  const signature = await rows('SELECT * FROM signatures');

  // In force from half an hour before the first frame until the next setup.
  const setupId = await propose(later(0.5), WRONG_SCALE, later(20));
  let shown = (await findBench(world.benchId, later(20)))?.correction;
  expect(shown).toMatchObject({
    from: later(0.5).toISOString(),
    until: later(10).toISOString(),
    total: 3,
    measured: 0,
  });
  await expect(approve(setupId, later(20))).rejects.toMatchObject({
    code: 'WRONG_STATE',
    message: expect.stringMatching(/3 of 3 readings/) as string,
  });
  expect((await setupAt(world.benchId, later(5)))?.number).toBe(1);

  expect(await measureAll(later(20))).toBe(3);
  shown = (await findBench(world.benchId, later(20)))?.correction;
  expect(shown).toMatchObject({ total: 3, measured: 3, flips: 3, withoutAnswer: 0 });
  for (const { was, becomes } of shown?.rows ?? []) {
    // The wavelength goes with the scale; the finite distance and the like move it by far less.
    expect((becomes?.valueNm ?? 0) / (was.valueNm ?? 1)).toBeCloseTo(1.01, 5);
    expect([was.verdict, becomes?.verdict]).toEqual(['within', 'outside']);
  }

  await approve(setupId, later(21));
  expect((await setupAt(world.benchId, later(5)))?.number).toBe(3);
  expect((await setupAt(world.benchId, later(11)))?.number).toBe(2);
  const successor = async (made: { frameId: number; readingId: number }) => {
    const [row] = await rows<{ id: number; setup_id: number; frame_setup: number }>(
      'SELECT r.id, r.setup_id, f.setup_id AS frame_setup FROM frames f JOIN readings r ON r.id = f.reading_id WHERE f.id = :frameId AND r.replaces_id = :readingId',
      made,
    );
    expect([row.setup_id, row.frame_setup]).toEqual([setupId, setupId]);
    return findReading(row.id);
  };
  expect(await successor(draft)).toMatchObject({ status: 'draft', number: 2 });
  expect(await successor(waiting)).toMatchObject({ status: 'review', sentBy: world.people.technician.id });
  const signedAgain = await successor(accepted);
  expect(signedAgain).toMatchObject({ status: 'review', verdict: 'outside' });
  // What was shown is what was kept.
  const [exact] = await rows<{ value_nm: number }>('SELECT value_nm FROM readings WHERE id = :id', {
    id: signedAgain.readingId,
  });
  const row = shown?.rows.find(({ readingId }) => readingId === accepted.readingId);
  expect(exact.value_nm).toBe(row?.becomes?.valueNm);
  // The signed original stays as it was signed; those that were not have stepped back.
  expect(await findReading(accepted.readingId)).toMatchObject({ status: 'accepted', verdict: 'within' });
  expect(await readingView(accepted.readingId)).toMatchObject({
    replacedBy: signedAgain.readingId,
    correctedBy: 2,
  });
  expect(await readingView(draft.readingId)).toMatchObject({ correctedBy: null });
  expect(await rows('SELECT * FROM signatures')).toEqual(signature);
  expect(await findReading(draft.readingId)).toMatchObject({ status: 'replaced' });
  expect(await findReading(after.readingId)).toMatchObject({ status: 'draft' });
  expect(await rows("SELECT id FROM audit_rows WHERE action = 'reading.correct'")).toHaveLength(3);

  // The chart shows the signed one until its successor is signed, then only that.
  const values = async () =>
    (await overTime({ benchId: world.benchId, choice: '', last: 0 })).points.map(
      ({ readingId }) => readingId,
    );
  expect(await values()).toEqual([accepted.readingId]);
  await accept(signedAgain.readingId, 0, later(22));
  expect(await values()).toEqual([signedAgain.readingId]);

  const mails = await rows<{ to_address: string; body_text: string }>(
    "SELECT to_address, body_text FROM outbox WHERE subject LIKE '%corrects%' ORDER BY to_address",
  );
  expect(mails.map(({ to_address }) => to_address)).toEqual([
    world.people.reviewer.email,
    world.people.technician.email,
  ]);
  expect(mails[0].body_text.match(/within becomes outside/g)).toHaveLength(1);
  expect(mails[1].body_text.match(/within becomes outside/g)).toHaveLength(3);
});

test('what is taken or changed meanwhile is measured before the approval; declined, nothing has changed', async () => {
  await putInForce(
    world.people,
    { ...SETUP, ...world.plate, benchId: world.benchId, afterNumber: 1 },
    later(-1),
  );
  const first = await take(21, 0, later(1));
  const setupId = await propose(later(0), WRONG_SCALE, later(2));
  await measureAll(later(2));
  await take(22, 1, later(3));
  await expect(approve(setupId, later(4))).rejects.toMatchObject({
    message: expect.stringMatching(/1 of 2 readings/) as string,
  });
  expect(await measureAll(later(4))).toBe(1);
  await decideSetup(as(world.people.qa, later(5)), {
    setupId,
    decision: 'declined',
    reason: 'The picture shows the old value.',
  });
  expect(await findReading(first.readingId)).toMatchObject({ status: 'draft', number: 1 });
  expect(await rows('SELECT id FROM readings WHERE replaces_id IS NOT NULL')).toEqual([]);
  expect(await measureAll(later(6))).toBe(0);
});

test('a moment before the first setup has nothing to correct, and a correction needs two people', async () => {
  await putInForce(
    world.people,
    { ...SETUP, ...world.plate, benchId: world.benchId, afterNumber: 1 },
    later(-1),
  );
  await expect(propose(new Date('2019-01-01T00:00:00Z'), WRONG_SCALE, later(1))).rejects.toMatchObject({
    fields: { inForceFrom: expect.stringMatching(/nothing to correct/) as string },
  });
  const setupId = await propose(later(0), WRONG_SCALE, later(1));
  await expect(
    decideSetup(as(world.people.admin, later(1)), { setupId, decision: 'approved', reason: '' }),
  ).rejects.toMatchObject({ code: 'NOT_ALLOWED' });
});
