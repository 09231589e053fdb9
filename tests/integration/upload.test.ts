import { createHash, randomBytes } from 'node:crypto';
import { mkdir, readdir, utimes, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { POST as upload } from '@/app/api/upload/route';
import { GET as status } from '@/app/api/frames/status/route';
import { GET as original } from '@/app/api/frames/[id]/original/route';
import { LIMITS } from '@/lib/domain/limits';
import type { FrameRow } from '@/lib/domain/views';
import { healFrames } from '@/lib/server/commands/heal-frames';
import { PRODUCT } from '@/lib/server/context';
import { db } from '@/lib/server/db';
import { env } from '@/lib/server/env';
import { originalKey, putObject, readObject, sizeOf } from '@/lib/server/storage';
import { rows } from './support/database';
import { callRoute } from './support/session';
import { closeWorld, makeWorld, type World } from './support/world';

const PNG = Buffer.from('89504e470d0a1a0a', 'hex');

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

/** Bytes that begin like a PNG: receiving looks no further. */
function file(bytes: number): Uint8Array<ArrayBuffer> {
  return new Uint8Array(Buffer.concat([PNG, randomBytes(bytes - PNG.length)]));
}

const hashOf = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');

interface Answer {
  frameId: number;
  sameAs: number | null;
  frame: FrameRow;
  code?: string;
  title?: string;
}

async function send(
  bytes: Uint8Array<ArrayBuffer>,
  more: Record<string, string> = {},
  headers: Record<string, string> = {},
) {
  const query = new URLSearchParams({
    name: 'frame A1.png',
    benchId: String(world.benchId),
    lotId: String(world.lotId),
    ...more,
  });
  const response = await callRoute(upload, `/api/upload?${query}`, {
    person: world.people.technician,
    method: 'POST',
    body: bytes,
    headers: { 'content-length': String(bytes.length), ...headers },
  });
  return { status: response.status, answer: (await response.json()) as Answer };
}

const spool = async () => readdir(env().SPOOL_FOLDER);
const frames = async () =>
  Number((await rows<{ many: number }>('SELECT COUNT(*) AS many FROM frames'))[0].many);
const heal = (at = new Date()) => healFrames({ actor: PRODUCT, at });

test('what comes in is what the store gives back, byte for byte, and the row waits', async () => {
  const bytes = file(12_345_678); // above the size where a body passing the page hook would be cut
  const { status: code, answer } = await send(bytes);
  expect(code).toBe(201);
  expect(answer.frame).toMatchObject({
    state: 'waiting',
    sha256: hashOf(bytes),
    bytes: bytes.length,
    fileName: 'frame A1.png',
  });
  expect(answer.frame.subject).toMatchObject({ kind: 'unit', serial: 'A1' });
  const back = await callRoute(original, `/api/frames/${answer.frameId}/original`, {
    person: world.people.qa,
    params: { id: String(answer.frameId) },
  });
  expect(back.headers.get('content-disposition')).toContain('attachment');
  expect(hashOf(new Uint8Array(await back.arrayBuffer()))).toBe(hashOf(bytes));
  expect(await spool()).toEqual([]);
});

test('the same file twice is one frame, also when both come at once; for another unit it is another', async () => {
  const bytes = file(5000);
  const [first, second] = await Promise.all([send(bytes), send(bytes)]);
  expect(first.answer.frameId).toBe(second.answer.frameId);
  const third = await send(bytes);
  expect(third).toMatchObject({
    status: 201,
    answer: { frameId: first.answer.frameId, sameAs: first.answer.frameId },
  });
  const other = await send(bytes, { serial: 'A2' });
  expect(other.answer.sameAs).toBeNull();
  expect(other.answer.frameId).not.toBe(first.answer.frameId);
  expect(await spool()).toEqual([]);
});

describe('refused with a sentence, and nothing is left', () => {
  const heic = new Uint8Array(
    Buffer.concat([Buffer.from([0, 0, 0, 24]), Buffer.from('ftypheic'), randomBytes(100)]),
  );
  const cases: [
    what: string,
    bytes: Uint8Array<ArrayBuffer>,
    more: Record<string, string>,
    headers: Record<string, string>,
    code: string,
    words: RegExp,
  ][] = [
    [
      'a text',
      new Uint8Array(Buffer.from('just some words, no picture')),
      {},
      {},
      'NOT_A_PICTURE',
      /PNG, JPEG, TIFF or WebP/,
    ],
    ['an empty file', new Uint8Array(), {}, {}, 'NOT_A_PICTURE', /empty/],
    ['HEIC, with the setting to change', heic, {}, {}, 'NOT_A_PICTURE', /HEIC.*Most Compatible/],
    [
      'more than the cap, before it is read',
      file(100),
      {},
      { 'content-length': String(LIMITS.fileBytes + 1) },
      'TOO_LARGE',
      /200 MB/,
    ],
    ['less than was announced', file(100), {}, { 'content-length': '101' }, 'BAD_INPUT', /broke off/],
    ['a name without a serial', file(100), { name: 'IMG_0001.png' }, {}, 'BAD_INPUT', /No unit of lot 0931/],
    [
      'a serial that only is part of a word',
      file(100),
      { name: 'XA12.png' },
      {},
      'BAD_INPUT',
      /No unit of lot 0931/,
    ],
    ['a name with two serials', file(100), { name: 'A1-A2.png' }, {}, 'BAD_INPUT', /both/],
    ['a serial the lot does not have', file(100), { serial: 'Z9' }, {}, 'BAD_INPUT', /no unit Z9/],
    ['no lot and no source', file(100), { lotId: '' }, {}, 'BAD_INPUT', /Choose a lot/],
    ['a bench that is not there', file(100), { benchId: '999999' }, {}, 'NOT_FOUND', /no such bench/],
  ];

  test.each(cases)('%s', async (_what, bytes, more, headers, code, words) => {
    const before = await frames();
    const { answer } = await send(bytes, more, headers);
    expect(answer.code).toBe(code);
    expect(answer.title).toMatch(words);
    expect(await frames()).toBe(before);
    expect(await spool()).toEqual([]);
  });

  test('a call from a page of another site', async () => {
    const { answer } = await send(file(100), {}, { origin: 'https://elsewhere.example' });
    expect(answer.code).toBe('NOT_ALLOWED');
  });
});

test('the status of many frames comes in one call', async () => {
  const one = await send(file(3000), { serial: 'A5' });
  const two = await send(file(3000), { serial: 'A6' });
  const ids = [two.answer.frameId, one.answer.frameId];
  const response = await callRoute(status, `/api/frames/status?ids=${ids.join(',')}`, {
    person: world.people.qa,
  });
  const body = (await response.json()) as { frames: FrameRow[] };
  expect(body.frames.map(({ id }) => id)).toEqual(ids);
});

describe('a crash', () => {
  /** A row as it stands between the spool and the store. */
  async function halfWay(bytes: Uint8Array, spoolPath: string | null) {
    const sha256 = hashOf(bytes);
    return db().tables.frames.create({
      benchId: world.benchId,
      setupId: world.setupId,
      lotId: world.lotId,
      unitId: world.unitIds[3],
      sourceId: null,
      fileName: 'half A4.png',
      findText: 'half',
      bytes: bytes.length,
      sha256,
      mediaType: 'image/png',
      sameKey: `${sha256}:${world.benchId}:u${world.unitIds[3]}`,
      state: 'copying',
      spoolPath,
      uploadedBy: world.people.technician.id,
      receivedAt: new Date(Date.now() - 1000),
    });
  }

  const spoolFile = async (bytes: Uint8Array) => {
    await mkdir(env().SPOOL_FOLDER, { recursive: true });
    const name = path.join(env().SPOOL_FOLDER, randomBytes(8).toString('hex'));
    await writeFile(name, bytes);
    return name;
  };

  test('before the store had the bytes: the next start copies them from the spool', async () => {
    const bytes = file(4000);
    const frame = await halfWay(bytes, await spoolFile(bytes));
    expect(await heal()).toMatchObject({ landed: 1, lost: 0 });
    await frame.reload();
    expect(frame.state).toBe('waiting');
    expect(hashOf((await readObject(originalKey(frame.sha256))) ?? new Uint8Array())).toBe(frame.sha256);
    expect(await spool()).toEqual([]);
  });

  test('after the store had the bytes, before the row said so: the next start says so', async () => {
    const bytes = file(4000);
    const frame = await halfWay(bytes, null);
    await putObject(originalKey(frame.sha256), bytes, bytes.length, 'image/png');
    expect(await heal()).toMatchObject({ landed: 1, lost: 0 });
    await frame.reload();
    expect(frame.state).toBe('waiting');
  });

  test('that lost the bytes: a sentence says so, and the same file can be sent again', async () => {
    const bytes = file(4000);
    const frame = await halfWay(bytes, null);
    expect(await heal()).toMatchObject({ landed: 0, lost: 1 });
    await frame.reload();
    expect(frame).toMatchObject({ state: 'unreadable', code: 'COPY_BROKE_OFF' });
    expect(frame.message).toMatch(/Send the file again/);
    const again = await send(bytes, { serial: 'A4' });
    expect(again).toMatchObject({ status: 201, answer: { sameAs: null } });
  });

  test('half way into the spool: the torn file is not taken for the whole', async () => {
    const bytes = file(4000);
    const frame = await halfWay(bytes, await spoolFile(bytes.slice(0, 1000)));
    expect(await heal()).toMatchObject({ landed: 0, lost: 1 });
    expect(await sizeOf(originalKey(frame.sha256))).toBeNull();
  });

  test('while sending: the client sends again and the half-done row is finished, not doubled', async () => {
    const bytes = file(4000);
    const frame = await halfWay(bytes, null);
    const again = await send(bytes, { serial: 'A4' });
    expect(again).toMatchObject({ status: 201, answer: { frameId: frame.id, sameAs: frame.id } });
    expect(again.answer.frame.state).toBe('waiting');
  });

  test('while fitting: the frame waits again', async () => {
    const { answer } = await send(file(4000), { serial: 'A3' });
    await db().tables.frames.update({ state: 'fitting', fitTries: 1 }, { where: { id: answer.frameId } });
    expect((await heal()).putBack).toBe(1);
    const frame = await db().tables.frames.findByPk(answer.frameId, { rejectOnEmpty: true });
    expect(frame.state).toBe('waiting');
  });

  test('while fitting, again and again: the frame is not tried for ever', async () => {
    const { answer } = await send(file(4000), { serial: 'A3' });
    await db().tables.frames.update({ state: 'fitting', fitTries: 3 }, { where: { id: answer.frameId } });
    await heal();
    const frame = await db().tables.frames.findByPk(answer.frameId, { rejectOnEmpty: true });
    expect(frame).toMatchObject({ state: 'unreadable', code: 'FIT_BROKE_OFF' });
  });

  test('that left a file nobody names: it is swept after an hour, not before', async () => {
    const name = await spoolFile(file(200));
    expect((await heal()).swept).toBe(0);
    const old = new Date(Date.now() - 2 * 3_600_000);
    await utimes(name, old, old);
    expect((await heal()).swept).toBe(1);
  });
});
