import { POST as upload } from '@/app/api/upload/route';
import { GET as photo } from '@/app/api/frames/[id]/photo/route';
import { POST as previewFit } from '@/app/api/frames/[id]/preview-fit/route';
import { GET as overTimeCsv } from '@/app/api/over-time/route';
import type { FitPreview } from '@/lib/domain/views';
import { acceptReading } from '@/lib/server/commands/accept-reading';
import { fitFrame } from '@/lib/server/commands/fit-frame';
import { keepFit } from '@/lib/server/commands/keep-fit';
import { sendReading } from '@/lib/server/commands/send-reading';
import { PRODUCT } from '@/lib/server/context';
import { findFrame, intakeFrames, listFrames, mayFor } from '@/lib/server/queries/frames';
import { overTime } from '@/lib/server/queries/over-time';
import { findReview } from '@/lib/server/queries/review';
import { reviewQueue } from '@/lib/server/queries/review-queue';
import { BENCH_SCENE, fringes } from './support/pictures';
import { actAs, callRoute } from './support/session';
import { NOW, PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

let world: World;
let frameId: number;

async function receive(bytes: Uint8Array<ArrayBuffer>, more: Record<string, string>): Promise<number> {
  const query = new URLSearchParams({ name: 'A1.png', benchId: String(world.benchId), ...more });
  const response = await callRoute(upload, `/api/upload?${query}`, {
    person: world.people.technician,
    method: 'POST',
    body: bytes,
    headers: { 'content-length': String(bytes.length) },
  });
  return ((await response.json()) as { frameId: number }).frameId;
}

const fit = (id: number) => fitFrame({ actor: PRODUCT, at: NOW }, id);

async function shownOf(id: number, readingId: number | null = null) {
  const frame = await findFrame(id, readingId);
  if (!frame?.shown) throw new Error('The frame has no reading.');
  return { frame, shown: frame.shown };
}

beforeAll(async () => {
  world = await makeWorld();
  frameId = await receive(await fringes(7), { lotId: String(world.lotId) });
});
afterAll(closeWorld);

test('a frame is fitted off this thread into a draft with value, budget and verdict', async () => {
  expect(await fit(frameId)).toBe('fitted');
  const { shown } = await shownOf(frameId);
  expect(shown).toMatchObject({ status: 'draft', version: 0, number: 1, medium: 'air', madeBy: null });
  const off = Math.abs((shown.wavelengthNm ?? 0) - BENCH_SCENE.wavelengthNm);
  expect(off).toBeLessThan(shown.expandedNm ?? 0);
  expect(shown.judgement?.verdict).toBe('within');
  expect(shown.setup.number).toBe(1);
});

test('a frame is taken by one fitter only', async () => {
  const id = await receive(await fringes(8), { lotId: String(world.lotId), name: 'A2.png' });
  const states = await Promise.all([fit(id), fit(id), fit(id)]);
  expect(states.filter((state) => state === 'fitted')).toHaveLength(1);
  expect(states.filter((state) => state === null)).toHaveLength(2);
});

test('a picture without fringes is refused, a broken file is unreadable, each with code and sentence', async () => {
  const dark = await receive(await fringes(9, 'png', { pattern: 'one' }), {
    lotId: String(world.lotId),
    name: 'A3.png',
  });
  expect(await fit(dark)).toBe('refused');
  const whole = await fringes(10, 'jpeg');
  const broken = await receive(whole.slice(0, Math.floor(whole.length / 3)), {
    lotId: String(world.lotId),
    name: 'A4.jpg',
  });
  expect(await fit(broken)).toBe('unreadable');
  for (const id of [dark, broken]) {
    const frame = await findFrame(id, null);
    expect(frame?.code).toMatch(/^[A-Z_]+$/);
    expect(frame?.message).toMatch(/\.$/);
    expect(frame?.shown).toBeNull();
  }
});

test('the small picture is made once and then only fetched', async () => {
  const call = { person: world.people.reviewer, params: { id: String(frameId) } };
  const first = await callRoute(photo, `/api/frames/${frameId}/photo`, call);
  expect(first.headers.get('content-type')).toBe('image/webp');
  const tag = first.headers.get('etag') ?? '';
  const again = await callRoute(photo, `/api/frames/${frameId}/photo`, {
    ...call,
    headers: { 'if-none-match': tag },
  });
  expect(again.status).toBe(304);
});

describe('with another region', () => {
  const region = { cxPx: 512, cyPx: 128, lengthPx: 800, heightPx: 100, angleDeg: 0 };
  const unseen = { leaveOut: [], zeroShift: 0, stackSha256: null, seen: null };

  test('a preview answers a whole result and keeps nothing', async () => {
    const response = await callRoute(previewFit, `/api/frames/${frameId}/preview-fit`, {
      person: world.people.technician,
      method: 'POST',
      body: JSON.stringify({ region }),
      params: { id: String(frameId) },
    });
    const preview = (await response.json()) as FitPreview;
    expect(preview.result.ok).toBe(true);
    expect(preview.judgement?.verdict).toBe('within');
    expect((await shownOf(frameId)).frame.readings).toHaveLength(1);
  });

  test('a region without fringes is said in a sentence', async () => {
    const response = await callRoute(previewFit, `/api/frames/${frameId}/preview-fit`, {
      person: world.people.technician,
      method: 'POST',
      body: JSON.stringify({ region: { ...region, lengthPx: 12, heightPx: 4 } }),
      params: { id: String(frameId) },
    });
    expect(response.status).toBe(422);
    expect(await response.json()).toMatchObject({ code: 'CANNOT_FIT' });
  });

  test('keeping it makes a new reading that names the old one', async () => {
    const { shown: before } = await shownOf(frameId);
    const refit = { ...unseen, frameId, fromReadingId: before.id, fromVersion: 0, region };
    const kept = await keepFit(as(world.people.technician), refit);
    const { frame, shown } = await shownOf(frameId);
    expect(shown).toMatchObject({ id: kept.readingId, number: 2, replaces: before.id, status: 'draft' });
    expect(shown.madeBy?.id).toBe(world.people.technician.id);
    expect(frame.readings.map(({ status }) => status)).toEqual(['draft', 'replaced']);
    expect((await shownOf(frameId, before.id)).shown.replacedBy).toBe(kept.readingId);
    await expect(keepFit(as(world.people.technician), refit)).rejects.toMatchObject({
      code: 'CHANGED_MEANWHILE',
    });
  });

  test('before review only a technician keeps a fit, in review only a reviewer, whose fit stays in review', async () => {
    const { shown } = await shownOf(frameId);
    const refit = { ...unseen, frameId, fromReadingId: shown.id, fromVersion: 0, region };
    await expect(keepFit(as(world.people.reviewer), refit)).rejects.toMatchObject({ code: 'NOT_ALLOWED' });
    await sendReading(as(world.people.technician), { readingId: shown.id, version: 0, note: '' });
    await expect(keepFit(as(world.people.technician), { ...refit, fromVersion: 1 })).rejects.toMatchObject({
      code: 'NOT_ALLOWED',
    });
    const kept = await keepFit(as(world.people.reviewer), { ...refit, fromVersion: 1 });
    const after = await shownOf(frameId);
    expect(after.shown).toMatchObject({ id: kept.readingId, status: 'review', version: 0 });
    expect(after.shown.sentBy?.id).toBe(world.people.technician.id);
    const me = { ...world.people.reviewer };
    expect(await mayFor(me, after.frame)).toMatchObject({
      accept: true,
      fit: true,
      return: true,
      send: false,
      acceptBarred: null,
    });
    expect(await mayFor(world.people.technician, after.frame)).toMatchObject({
      accept: false,
      fit: false,
      return: false,
    });
  });
});

test('the queue, the review page, acceptance and the chart see the same reading', async () => {
  const queue = await reviewQueue();
  expect(queue).toHaveLength(1);
  const [{ readingId }] = queue;
  const review = await findReview(world.people.reviewer, readingId);
  expect(review?.queue).toEqual({
    at: 1,
    of: 1,
    previousId: null,
    nextId: null,
    nextFrameId: null,
    because: 'No other lot of this supplier has been accepted yet.',
  });
  const looks = review?.frame.shown?.findings.filter(({ word }) => word === 'look') ?? [];
  const answers = looks.map(({ check }) => ({ check, answer: 'accept-as-is' as const, reason: 'Seen.' }));
  await acceptReading(as(world.people.reviewer), { readingId, version: 0, password: PASSWORD, answers });
  const { shown } = await shownOf(frameId);
  expect(shown.signature).toMatchObject({ personName: 'Invented reviewer', role: 'reviewer' });
  const chart = await overTime({ benchId: world.benchId, choice: '', last: 0 });
  expect(chart.chosen).toBe(`lot:${world.lotId}`);
  expect(chart.points).toHaveLength(1);
  expect(chart.points[0].valueNm).toBe(shown.wavelengthNm);
  expect(chart.stretches[0].standing).toBe('none');
  const csv = await callRoute(
    overTimeCsv,
    `/api/over-time?bench=${world.benchId}&choice=lot:${world.lotId}`,
    { person: world.people.qa },
  );
  const lines = (await csv.text()).trim().split('\r\n');
  expect(lines).toHaveLength(2);
  expect(lines[1]).toContain(String(shown.wavelengthNm));
});

test('the list counts every state under the other filters and pages on the server', async () => {
  await actAs(world.people.technician);
  const everything = {
    state: '' as const,
    find: '',
    benchId: null,
    lotId: null,
    days: 0,
    mine: false,
    page: 1,
  };
  const all = await listFrames(everything);
  expect(all.total).toBe(4);
  expect(all.counts).toMatchObject({ accepted: 1, draft: 1, refused: 1, unreadable: 1 });
  expect((await listFrames({ ...everything, state: 'refused' })).rows).toHaveLength(1);
  expect((await listFrames({ ...everything, find: '0931' })).total).toBe(4);
  expect((await listFrames({ ...everything, find: '%' })).total).toBe(0);
  expect((await listFrames({ ...everything, mine: true })).total).toBe(4);
  await actAs(world.people.technician2);
  expect((await listFrames({ ...everything, mine: true })).total).toBe(0);
  expect((await listFrames({ ...everything, page: 99 })).page).toBe(1);
  expect((await intakeFrames(world.people.technician.id)).map(({ state }) => state)).toEqual([
    'fitted',
    'refused',
    'unreadable',
  ]);
});

test('a source is measured without a verdict', async () => {
  const id = await receive(await fringes(11, 'tiff', { wavelengthNm: 632.8 }), {
    sourceId: String(world.sourceId),
    name: 'check.tif',
  });
  expect(await fit(id)).toBe('fitted');
  const { frame, shown } = await shownOf(id);
  expect(frame.subject.kind).toBe('source');
  expect(shown.judgement).toBeNull();
  expect(shown.wavelengthNm).not.toBeNull();
});
