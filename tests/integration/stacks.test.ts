import { gunzipSync } from 'node:zlib';
import { S3Client } from '@aws-sdk/client-s3';
import { POST as upload } from '@/app/api/upload/route';
import { GET, POST } from '@/app/api/frames/[id]/stack/route';
import type { FitOptions, ReadingResult, Region } from '@/lib/domain/reading-result';
import { isScanResult } from '@/lib/domain/scan-result';
import { fitFrame } from '@/lib/server/commands/fit-frame';
import { keepFit } from '@/lib/server/commands/keep-fit';
import { storeReading } from '@/lib/server/commands/store-reading';
import { canonicalJson, sha256 } from '@/lib/server/canonical';
import { PRODUCT } from '@/lib/server/context';
import { db } from '@/lib/server/db';
import { fitFacts, loadFrame } from '@/lib/server/frame-facts';
import { analyseInPool } from '@/lib/server/measure-pool';
import { findFrame } from '@/lib/server/queries/frames';
import { originalKey, putObject, readObject, stackKey } from '@/lib/server/storage';
import { inTransaction } from '@/lib/server/transaction';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';
import { measureStack } from '@/lib/measure/measure-stack';
import { decodeStack } from '@/lib/measure/stack-file';
import { ownerDatabase, rows } from './support/database';
import { fringes } from './support/pictures';
import { callRoute } from './support/session';
import { NOW, as, closeWorld, makeWorld, type Person, type World } from './support/world';

let world: World;
let frameId: number;
let other: number;

async function receive(seed: number, name: string): Promise<number> {
  const bytes = await fringes(seed);
  const query = new URLSearchParams({
    name,
    benchId: String(world.benchId),
    lotId: String(world.lotId),
  });
  const response = await callRoute(upload, `/api/upload?${query}`, {
    person: world.people.technician,
    method: 'POST',
    body: bytes,
    headers: { 'content-length': String(bytes.length) },
  });
  const { frameId: id } = (await response.json()) as { frameId: number };
  await fitFrame({ actor: PRODUCT, at: NOW }, id);
  return id;
}

async function shownOf(id: number) {
  const frame = await findFrame(id, null);
  if (!frame?.shown) throw new Error('The frame has no reading.');
  const { shown } = frame;
  const { result } = shown;
  if (isScanResult(result)) throw new Error('This is a scan.');
  return { frame, shown: { ...shown, result } };
}

interface Asked {
  person?: Person | null;
  engine?: string;
  headers?: Record<string, string>;
}

const get = (
  id: number,
  readingId: number,
  { person = world.people.technician, engine = ENGINE_VERSION, headers }: Asked = {},
) =>
  callRoute(GET, `/api/frames/${id}/stack?reading=${readingId}&engine=${engine}`, {
    person,
    params: { id: String(id) },
    headers,
  });

const post = (
  id: number,
  region: Region,
  { person = world.people.technician, engine = ENGINE_VERSION }: Asked = {},
) =>
  callRoute(POST, `/api/frames/${id}/stack`, {
    person,
    method: 'POST',
    body: JSON.stringify({ region, engine }),
    params: { id: String(id) },
  });

async function bytesOf(response: Response): Promise<{ sha256: string; bytes: Uint8Array<ArrayBuffer> }> {
  expect(response.status).toBe(200);
  const bytes = new Uint8Array(await response.arrayBuffer());
  return { sha256: response.headers.get('x-stack-sha256') ?? '', bytes };
}

const stacksOf = (id: number) =>
  rows<{ engine: string; sha256: string; plan_json: string }>(
    'SELECT engine, sha256, plan_json FROM band_stacks WHERE frame_id = :id ORDER BY id',
    { id },
  );
/** Everything but the milliseconds, as one hash. */
const digits = (result: ReadingResult) => sha256(canonicalJson({ ...result, ms: null }));

/** A row as if it had been written then, by the owner's hand. */
async function enter(id: number, engine: string, sha256: string, planJson: string): Promise<void> {
  await ownerDatabase().query(
    `INSERT INTO band_stacks (frame_id, engine, tone, plan_json, sha256, bytes, created_at)
     VALUES (:id, :engine, 'auto', :planJson, :sha256, 1, NOW())`,
    { replacements: { id, engine, sha256, planJson } },
  );
}

const turned = (region: Region, deg: number): Region => ({ ...region, angleDeg: region.angleDeg + deg });

beforeAll(async () => {
  world = await makeWorld();
  frameId = await receive(21, 'A1.png');
  other = await receive(22, 'A2.png');
});
afterAll(closeWorld);

test('the stack of a reading is made once, kept under its hash, and gives the digits of the reading', async () => {
  const { frame, shown } = await shownOf(frameId);
  const first = await bytesOf(await get(frameId, shown.id));
  expect(sha256(first.bytes)).toBe(first.sha256);
  const again = await get(frameId, shown.id);
  expect(again.headers.get('etag')).toBe(`"${first.sha256}"`);
  expect(again.headers.get('cache-control')).toMatch(/private.*immutable/);
  expect((await bytesOf(again)).sha256).toBe(first.sha256);
  expect(await stacksOf(frameId)).toMatchObject([{ engine: ENGINE_VERSION, sha256: first.sha256 }]);
  const stored = await readObject(stackKey(first.sha256));
  expect(stored && sha256(stored)).toBe(first.sha256);
  const answer = measureStack(decodeStack(first.bytes), frame.facts.setup, {});
  expect(answer.ok && digits(answer)).toBe(digits(shown.result));
});

test('it comes packed where the client takes that, and not again to whoever has it', async () => {
  const { shown } = await shownOf(frameId);
  const plain = await bytesOf(await get(frameId, shown.id));
  const packed = await get(frameId, shown.id, { headers: { accept: 'application/gzip' } });
  expect(packed.headers.get('content-type')).toBe('application/gzip');
  const { bytes } = await bytesOf(packed);
  expect(bytes.length).toBeLessThan(plain.bytes.length);
  expect(sha256(gunzipSync(bytes))).toBe(plain.sha256);
  const known = await get(frameId, shown.id, { headers: { 'if-none-match': `"${plain.sha256}"` } });
  expect(known.status).toBe(304);
});

test('who may not fit gets none, and an outsider is asked to sign in', async () => {
  const { shown } = await shownOf(frameId);
  const { qa, admin, nobody, reviewer } = world.people;
  for (const person of [qa, admin, nobody]) {
    expect((await get(frameId, shown.id, { person })).status).toBe(403);
    expect((await post(frameId, shown.result.region, { person })).status).toBe(403);
  }
  expect((await get(frameId, shown.id, { person: null })).status).toBe(401);
  expect((await post(frameId, shown.result.region, { person: null })).status).toBe(401);
  expect((await get(frameId, shown.id, { person: reviewer })).status).toBe(200);
});

test('a reading of another frame, a frame there is not, and a page of another engine are told so', async () => {
  const { shown } = await shownOf(other);
  expect((await get(frameId, shown.id)).status).toBe(404);
  expect((await get(4_000_000, shown.id)).status).toBe(404);
  for (const response of [
    await get(other, shown.id, { engine: '0.0.1' }),
    await post(other, shown.result.region, { engine: '0.0.1' }),
  ]) {
    expect(response.status).toBe(409);
    expect(await response.json()).toMatchObject({
      title: expect.stringMatching(/Load the page again/) as string,
    });
  }
  expect(await stacksOf(other)).toEqual([]);
});

test('a region that was turned gets a stack of its own; two who ask at once get the same one', async () => {
  const { shown } = await shownOf(frameId);
  const region = turned(shown.result.region, 0.4);
  const before = (await stacksOf(frameId)).length;
  const made = await Promise.all([1, 2, 3].map(async () => bytesOf(await post(frameId, region))));
  expect(new Set(made.map(({ sha256 }) => sha256)).size).toBe(1);
  expect(made.map(({ bytes }) => sha256(bytes))).toEqual(made.map(({ sha256 }) => sha256));
  expect(decodeStack(made[0].bytes).plan.region).toEqual(region);
  expect(await stacksOf(frameId)).toHaveLength(before + 1);
  const nothing = await post(frameId, { ...region, lengthPx: 12, heightPx: 4 });
  expect(nothing.status).toBe(422);
  expect(await nothing.json()).toMatchObject({ code: 'CANNOT_FIT' });
});

describe('keeping a fit', () => {
  const change = (region: Region) => ({ region, leaveOut: [2], zeroShift: 0 });

  test('stores the digits the browser showed, and the plan with which bytes and options give them again', async () => {
    const { frame, shown } = await shownOf(frameId);
    const { sha256: hash, bytes } = await bytesOf(await get(frameId, shown.id));
    const wanted = change({ ...shown.result.region, lengthPx: shown.result.region.lengthPx - 40 });
    const seen = measureStack(decodeStack(bytes), frame.facts.setup, wanted);
    if (!seen.ok) throw new Error(seen.message);
    const { differs } = await keepFit(as(world.people.technician), {
      ...wanted,
      stackSha256: hash,
      seen,
      frameId,
      fromReadingId: shown.id,
      fromVersion: shown.version,
    });
    expect(differs).toBeNull();
    const after = await shownOf(frameId);
    expect(digits(after.shown.result)).toBe(digits(seen));
    const [{ options, sha }] = await rows<{ options: string; sha: string }>(
      'SELECT options_json AS options, frame_sha256 AS sha FROM readings WHERE id = :id',
      { id: after.shown.id },
    );
    const picture = await readObject(originalKey(sha));
    if (!picture) throw new Error('The bytes are gone.');
    const again = await analyseInPool(picture, frame.facts.setup, JSON.parse(options) as FitOptions);
    expect(again.ok && digits(again)).toBe(digits(seen));
  });

  test('says so where the page showed other digits, and keeps its own', async () => {
    const { shown } = await shownOf(frameId);
    const { spacingPx } = shown.result;
    const { differs } = await keepFit(as(world.people.technician), {
      ...change({ ...shown.result.region, heightPx: shown.result.region.heightPx - 20 }),
      stackSha256: null,
      seen: { spacingPx: spacingPx * 1.01, uSpacingPx: 1, wavelengthNm: null, expandedNm: null },
      frameId,
      fromReadingId: shown.id,
      fromVersion: shown.version,
    });
    expect(differs).toMatch(/this page showed/);
    expect((await shownOf(frameId)).shown.result.spacingPx).not.toBe(spacingPx * 1.01);
  });

  test('takes no stack of another frame, nor one that does not hold the region: the server makes its own', async () => {
    const foreign = await shownOf(other);
    const { sha256: hash } = await bytesOf(await get(other, foreign.shown.id));
    for (const [stackSha256, deg] of [
      [hash, 0],
      ['f'.repeat(64), 0.02],
      [(await stacksOf(frameId))[0].sha256, 3],
    ] as const) {
      const { shown } = await shownOf(frameId);
      const region = turned({ ...shown.result.region, lengthPx: shown.result.region.lengthPx - 10 }, deg);
      await keepFit(as(world.people.technician), {
        ...change(region),
        stackSha256,
        seen: null,
        frameId,
        fromReadingId: shown.id,
        fromVersion: shown.version,
      });
      const after = await shownOf(frameId);
      expect(after.shown.result.stack?.region).toEqual(region);
    }
  });
});

test('a stack of another engine is never measured from', async () => {
  const { shown } = await shownOf(other);
  const before = await stacksOf(other);
  await enter(other, '0.0.1', 'e'.repeat(64), before[0].plan_json);
  const { sha256: hash } = await bytesOf(await get(other, shown.id));
  expect(hash).toBe(before[0].sha256);
  const { region } = shown.result;
  const kept = await keepFit(as(world.people.technician), {
    region: { ...region, lengthPx: region.lengthPx - 6 },
    leaveOut: [],
    zeroShift: 0,
    stackSha256: 'e'.repeat(64),
    seen: null,
    frameId: other,
    fromReadingId: shown.id,
    fromVersion: 0,
  });
  expect(kept.differs).toBeNull();
  expect((await shownOf(other)).shown.result.stack?.region.lengthPx).toBe(region.lengthPx - 6);
});

test('a stack that is gone or damaged is made again from the bytes, to the same hash', async () => {
  const { shown } = await shownOf(other);
  const { sha256: hash, bytes } = await bytesOf(await get(other, shown.id));
  const damaged = bytes.slice();
  damaged[damaged.length - 5] ^= 1;
  await putObject(stackKey(hash), damaged, damaged.length, 'application/octet-stream');
  const mended = await bytesOf(await get(other, shown.id));
  expect(mended.sha256).toBe(hash);
  expect(sha256(mended.bytes)).toBe(hash);
  const stored = await readObject(stackKey(hash));
  expect(stored && sha256(stored)).toBe(hash);
  // A newer row of the same plan whose object was never written.
  const [row] = (await stacksOf(other)).filter((kept) => kept.sha256 === hash);
  await enter(other, ENGINE_VERSION, 'd'.repeat(64), row.plan_json);
  expect((await bytesOf(await get(other, shown.id))).sha256).toBe(hash);
});

test('a reading of an older engine, which has no plan, gets a stack for its region', async () => {
  const { shown } = await shownOf(other);
  const frame = await loadFrame(other);
  const facts = await fitFacts(frame);
  const { stack: _none, ...result } = shown.result;
  const old = await inTransaction(as(world.people.technician), (work) =>
    storeReading(
      {
        frame,
        result: { ...result, engine: '0.5.0' },
        ...facts,
        options: { tone: facts.tone },
        madeBy: null,
        madeInReview: false,
        replacesId: null,
        at: NOW,
        state: { status: 'replaced', sentBy: null, sentAt: null, note: '' },
      },
      work.transaction,
    ),
  );
  const { bytes } = await bytesOf(await get(other, old.id));
  expect(decodeStack(bytes)).toMatchObject({
    engine: ENGINE_VERSION,
    plan: { region: shown.result.region },
  });
});

test('a store that is down is a sentence, and nothing is written', async () => {
  const { shown } = await shownOf(other);
  const before = await stacksOf(other);
  const held = globalThis as { midfringeStore?: S3Client };
  const real = held.midfringeStore;
  held.midfringeStore = new S3Client({
    endpoint: 'http://127.0.0.1:9',
    region: 'nowhere',
    credentials: { accessKeyId: 'none', secretAccessKey: 'none' },
    maxAttempts: 1,
  });
  try {
    const response = await post(other, turned(shown.result.region, 0.7));
    expect(response.status).toBe(503);
    expect(await response.json()).toMatchObject({
      code: 'STORE_DOWN',
      title: expect.stringMatching(/try again/) as string,
    });
  } finally {
    held.midfringeStore = real;
  }
  expect(await stacksOf(other)).toEqual(before);
  expect((await post(other, turned(shown.result.region, 0.7))).status).toBe(200);
});

test('rows are added, never changed', async () => {
  const app = db().sequelize;
  await expect(app.query('UPDATE band_stacks SET bytes = 0')).rejects.toThrow(/denied/);
  await expect(app.query('DELETE FROM band_stacks')).rejects.toThrow(/denied/);
  await expect(ownerDatabase().query('UPDATE band_stacks SET bytes = 0')).rejects.toThrow(/never changed/);
});
