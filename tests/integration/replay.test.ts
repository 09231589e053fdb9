import { acceptReading } from '@/lib/server/commands/accept-reading';
import { addComment } from '@/lib/server/commands/add-comment';
import { fitFrame } from '@/lib/server/commands/fit-frame';
import { keepFit } from '@/lib/server/commands/keep-fit';
import { receiveFrame } from '@/lib/server/commands/receive-frame';
import { storeReading } from '@/lib/server/commands/store-reading';
import { sendReading } from '@/lib/server/commands/send-reading';
import { answerWithdrawal, askWithdrawal } from '@/lib/server/commands/withdraw-reading';
import { PRODUCT } from '@/lib/server/context';
import { fitFacts, loadFrame } from '@/lib/server/frame-facts';
import { findFrame } from '@/lib/server/queries/frames';
import { historyOf } from '@/lib/server/queries/history';
import { replayReadings, type Replayed } from '@/lib/server/replay';
import { inTransaction } from '@/lib/server/transaction';
import { originalKey, putObject } from '@/lib/server/storage';
import type { ReadingResult, Region } from '@/lib/domain/reading-result';
import { ownerDatabase, rows } from './support/database';
import { fringes } from './support/pictures';
import { NOW, PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

jest.setTimeout(60_000);

let world: World;
let frameId: number;
let sha256: string;
let bytes: Uint8Array<ArrayBuffer>;

const later = (minutes: number) => new Date(NOW.getTime() + minutes * 60_000);

async function replayed(): Promise<Replayed[]> {
  const done: Replayed[] = [];
  for await (const one of replayReadings()) done.push(one);
  return done;
}

async function accept(readingId: number, version: number, minutes: number) {
  const wanted = { readingId, version, password: PASSWORD, moveReason: 'Nearer to the middle.' };
  const frame = await findFrame(frameId, readingId);
  const answers = (frame?.shown?.findings ?? [])
    .filter(({ word }) => word === 'look')
    .map(({ check }) => ({ check, answer: 'accept-as-is' as const, reason: 'Seen.' }));
  await acceptReading(as(world.people.reviewer, later(minutes)), { ...wanted, answers });
}

/** One frame through its whole life: fitted, changed, sent, changed in review, accepted, withdrawn, read anew. */
beforeAll(async () => {
  world = await makeWorld();
  bytes = await fringes(31);
  const received = await receiveFrame(as(world.people.technician), {
    fileName: 'A1.png',
    benchId: world.benchId,
    lotId: world.lotId,
    sourceId: null,
    serial: null,
    detectorMm: null,
    declaredBytes: bytes.length,
    body: (async function* () {
      yield bytes;
    })(),
  });
  frameId = received.frameId;
  await fitFrame({ actor: PRODUCT, at: later(1) }, frameId);
  const first = await findFrame(frameId, null);
  if (!first?.shown) throw new Error('The frame has no reading.');
  sha256 = first.sha256;
  await sendReading(as(world.people.technician, later(2)), {
    readingId: first.shown.id,
    version: 0,
    note: 'Dust at the right.',
  });
  await addComment(as(world.people.reviewer, later(3)), {
    readingId: first.shown.id,
    words: 'Looks bright.',
  });
  const region = first.shown.result.region as Region;
  const change = { region: { ...region, lengthPx: region.lengthPx - 40 }, leaveOut: [], zeroShift: 0 };
  const { readingId } = await keepFit(as(world.people.reviewer2, later(4)), {
    ...change,
    frameId,
    fromReadingId: first.shown.id,
    fromVersion: 1,
    trials: [{ ...change, valueNm: 634.9, expandedNm: 0.7, problem: null, agoMs: 5000 }],
  });
  await accept(readingId, 0, 5);
  const { proposalId } = await askWithdrawal(as(world.people.reviewer, later(6)), {
    readingId,
    version: 1,
    reason: 'Wrong lot.',
    password: PASSWORD,
  });
  await answerWithdrawal(as(world.people.qa, later(7)), {
    proposalId,
    answer: 'confirmed',
    words: '',
    password: PASSWORD,
  });
  const anew = await keepFit(as(world.people.technician, later(8)), {
    region,
    leaveOut: [],
    zeroShift: 0,
    frameId,
    fromReadingId: readingId,
    fromVersion: 2,
  });
  await sendReading(as(world.people.technician, later(9)), {
    readingId: anew.readingId,
    version: 0,
    note: '',
  });
  await accept(anew.readingId, 1, 10);
});
afterAll(closeWorld);

test('a new reading takes the place of the withdrawn one, which stays withdrawn', async () => {
  const frame = await findFrame(frameId, null);
  expect(frame?.readings.map(({ status }) => status)).toEqual(['accepted', 'withdrawn', 'replaced']);
  expect(frame?.reading?.number).toBe(3);
});

test('every signed reading gives the same digits again', async () => {
  const done = await replayed();
  expect(done).toHaveLength(2);
  expect(done).toMatchObject([{ outcome: 'same' }, { outcome: 'same' }]);
});

test('what was measured with other bytes, and what is not what was signed, is told; nothing is changed', async () => {
  const other = await fringes(32);
  await putObject(originalKey(sha256), other, other.length, 'image/png');
  const counted = () => rows('SELECT COUNT(*) AS many FROM readings');
  const before = await counted();
  expect(await replayed()).toMatchObject([
    { outcome: 'wrong', because: expect.stringContaining('not those that were measured') as string },
    { outcome: 'wrong' },
  ]);
  await putObject(originalKey(sha256), bytes, bytes.length, 'image/png');
  expect(await counted()).toEqual(before);

  const owner = ownerDatabase();
  const [{ id, result_json: kept }] = await rows<{ id: number; result_json: string }>(
    `SELECT rr.reading_id AS id, rr.result_json FROM reading_results rr JOIN signatures s ON s.reading_id = rr.reading_id
     ORDER BY rr.reading_id LIMIT 1`,
  );
  const write = (json: string) =>
    owner.query('UPDATE reading_results SET result_json = :json WHERE reading_id = :id', {
      replacements: { json, id },
    });
  await owner.query('DROP TRIGGER reading_results_no_update');
  try {
    await write(kept.replace(/"spacingPx":([\d.]+)/, '"spacingPx":99.5'));
    expect((await replayed())[0]).toMatchObject({
      readingId: id,
      outcome: 'wrong',
      because: expect.stringContaining('not what was signed') as string,
    });
    await write(kept);
  } finally {
    const { up } = await import('@/migrations/0008-immutable-tables');
    await up({ context: (statement) => owner.query(statement) });
  }
  expect(await replayed()).toMatchObject([{ outcome: 'same' }, { outcome: 'same' }]);
});

test('the history tells every step with who, when and why', async () => {
  const history = await historyOf(frameId);
  expect(history?.steps.map(({ step, who, reading }) => `${step} ${who} ${reading ?? '-'}`)).toEqual([
    'received Invented technician -',
    'fitted Midfringe 1',
    'sent Invented technician 1',
    'said Invented reviewer 1',
    'tried Invented reviewer2 1',
    'fitted Invented reviewer2 2',
    'accepted Invented reviewer 2',
    'asked Invented reviewer 2',
    'withdrawn Invented qa 2',
    'fitted Invented technician 3',
    'sent Invented technician 3',
    'accepted Invented reviewer 3',
  ]);
  const text = JSON.stringify(history);
  for (const words of ['Dust at the right.', 'Looks bright.', 'Wrong lot.', 'as the page showed it'])
    expect(text).toContain(words);
});

test('a reading of another engine may give other digits, and is told apart', async () => {
  const frame = await loadFrame(frameId);
  const { setup, specification } = await fitFacts(frame);
  const now = (await findFrame(frameId, null))!.shown!.result as ReadingResult;
  const older = { ...now, engine: '0.0.1', spacingPx: now.spacingPx * (1 + 1e-9) };
  const { id: readingId } = await inTransaction(as(world.people.technician), (work) =>
    storeReading(
      {
        frame,
        result: older,
        setup,
        specification,
        options: { tone: 'auto' },
        madeBy: null,
        madeInReview: true,
        replacesId: null,
        at: later(11),
        state: { status: 'review', sentBy: world.people.technician.id, sentAt: later(11), note: '' },
      },
      work.transaction,
    ),
  );
  await accept(readingId, 0, 12);
  expect((await replayed()).at(-1)).toMatchObject({
    readingId,
    engine: '0.0.1',
    outcome: 'other',
    because: expect.stringContaining('spacingPx') as string,
  });
});
