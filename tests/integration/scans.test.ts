import { readdir } from 'node:fs/promises';
import { POST as upload } from '@/app/api/upload/route';
import { GET as original } from '@/app/api/frames/[id]/original/route';
import { GET as photo } from '@/app/api/frames/[id]/photo/route';
import { POST as previewFit } from '@/app/api/frames/[id]/preview-fit/route';
import { GET as scanRoute } from '@/app/api/frames/[id]/scan/route';
import { GET as overTimeCsv } from '@/app/api/over-time/route';
import { isScanResult, type ScanDrawing, type ScanResult } from '@/lib/domain/scan-result';
import type { FitPreview, FrameRow } from '@/lib/domain/views';
import { acceptReading } from '@/lib/server/commands/accept-reading';
import { fitFrame } from '@/lib/server/commands/fit-frame';
import { keepFit } from '@/lib/server/commands/keep-fit';
import { returnReading } from '@/lib/server/commands/return-reading';
import { sendReading } from '@/lib/server/commands/send-reading';
import { PRODUCT } from '@/lib/server/context';
import { env } from '@/lib/server/env';
import { findFrame } from '@/lib/server/queries/frames';
import { rows } from './support/database';
import { BENCH_SCENE, fringes } from './support/pictures';
import { scanFile } from './support/scans';
import { callRoute } from './support/session';
import { NOW, PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

interface Answer {
  frameId: number;
  sameAs: number | null;
  frame: FrameRow;
  code?: string;
  title?: string;
}

async function send(bytes: Uint8Array<ArrayBuffer>, more: Record<string, string> = {}) {
  const query = new URLSearchParams({
    name: 'scan A1.csv',
    benchId: String(world.benchId),
    lotId: String(world.lotId),
    ...more,
  });
  const response = await callRoute(upload, `/api/upload?${query}`, {
    person: world.people.technician,
    method: 'POST',
    body: bytes,
    headers: { 'content-length': String(bytes.length) },
  });
  return { status: response.status, answer: (await response.json()) as Answer };
}

const fit = (id: number) => fitFrame({ actor: PRODUCT, at: NOW }, id);

async function shownOf(id: number) {
  const frame = await findFrame(id, null);
  if (!frame?.shown || !isScanResult(frame.shown.result))
    throw new Error('The frame has no reading of a scan.');
  return { frame, shown: frame.shown, result: frame.shown.result satisfies ScanResult };
}

const frames = async () =>
  Number((await rows<{ many: number }>('SELECT COUNT(*) AS many FROM frames'))[0].many);

async function preview(id: number, change: object) {
  const response = await callRoute(previewFit, `/api/frames/${id}/preview-fit`, {
    person: world.people.technician,
    method: 'POST',
    body: JSON.stringify(change),
    params: { id: String(id) },
  });
  return { status: response.status, body: (await response.json()) as FitPreview & { title?: string } };
}

/** The spacing of the invented bench, mm: lambda L / d. */
const TRUE_MM =
  (BENCH_SCENE.wavelengthNm * 1e-6 * BENCH_SCENE.distanceMm) / (BENCH_SCENE.separationUm * 1e-3);

describe('from upload to a signature', () => {
  const bytes = scanFile(1);
  let frameId: number;

  test('it is known by its bytes, whatever its name, and waits', async () => {
    const { status, answer } = await send(bytes, { name: 'run A1.dat', detectorMm: '0.2' });
    expect(status).toBe(201);
    expect(answer.frame).toMatchObject({ state: 'waiting', scan: { detectorMm: 0.2 } });
    frameId = answer.frameId;
  });

  test('it is fitted in mm, with value, budget and verdict', async () => {
    expect(await fit(frameId)).toBe('fitted');
    const { frame, shown, result } = await shownOf(frameId);
    expect(shown).toMatchObject({ status: 'draft', number: 1, madeBy: null, spacing: { unit: 'mm' } });
    expect(Math.abs(shown.spacing.value - TRUE_MM)).toBeLessThan(4 * shown.spacing.u);
    expect(Math.abs((shown.wavelengthNm ?? 0) - BENCH_SCENE.wavelengthNm)).toBeLessThan(
      shown.expandedNm ?? 0,
    );
    expect(shown.judgement?.verdict).toBe('within');
    expect(shown.budget.map(({ key }) => key)).not.toContain('scale');
    expect(frame.scanLength).toEqual({ fromMm: -5, toMm: 5, points: 251 });
    expect([frame.widthPx, frame.heightPx]).toEqual([null, null]);
    // The strip is placed about the zero order, which stands at 0.31 mm of the scan.
    expect(Math.abs(shown.strip.fromMm - (-5 - 0.31))).toBeLessThan(0.02);
    expect(result.detectorMm).toBe(0.2);
  });

  test('the file comes back byte for byte, the drawing as points; a picture has no such drawing', async () => {
    const call = { person: world.people.qa, params: { id: String(frameId) } };
    const file = await callRoute(original, `/api/frames/${frameId}/original`, call);
    expect(file.headers.get('content-type')).toBe('text/csv');
    expect(Buffer.from(await file.arrayBuffer()).equals(Buffer.from(bytes))).toBe(true);
    const drawn = await callRoute(scanRoute, `/api/frames/${frameId}/scan`, call);
    const drawing = (await drawn.json()) as ScanDrawing;
    expect(drawing.xMm).toHaveLength(251);
    const again = await callRoute(scanRoute, `/api/frames/${frameId}/scan`, {
      ...call,
      headers: { 'if-none-match': drawn.headers.get('etag') ?? '' },
    });
    expect(again.status).toBe(304);
    const picture = await send(await fringes(3), { serial: 'A6', name: 'A6.png' });
    const noPhoto = await callRoute(photo, `/api/frames/${frameId}/photo`, call);
    expect(noPhoto.status).toBe(404);
    const none = await callRoute(scanRoute, '/', {
      ...call,
      params: { id: String(picture.answer.frameId) },
    });
    expect(none.status).toBe(404);
    expect(picture.answer.frame.scan).toBeNull();
  });

  test('a preview fits another region, detector and orders, and keeps nothing', async () => {
    const { shown } = await shownOf(frameId);
    const change = { region: { fromMm: -4, toMm: 4 }, leaveOut: [1], detectorMm: 0.3 };
    const { status, body } = await preview(frameId, { ...change, readingId: shown.id });
    expect(status).toBe(200);
    if (!isScanResult(body.result)) throw new Error('not a scan');
    expect(body.result).toMatchObject({ region: change.region, detectorMm: 0.3 });
    expect(body.result.orders.filter((o) => !o.used).map((o) => o.m)).toEqual([1]);
    expect((await shownOf(frameId)).frame.readings).toHaveLength(1);
    const rectangle = { cxPx: 1, cyPx: 1, lengthPx: 50, heightPx: 10, angleDeg: 0 };
    expect((await preview(frameId, { region: rectangle })).status).toBe(400);
    const narrow = await preview(frameId, { region: { fromMm: 0, toMm: 0.2 } });
    expect(narrow).toMatchObject({
      status: 422,
      body: { title: expect.stringMatching(/Widen it/) as string },
    });
    expect((await preview(frameId, { region: { fromMm: 2, toMm: 1 } })).status).toBe(400);
  });

  test('a region that is kept makes a new reading that names the old one; the log has region and detector', async () => {
    const { shown: before } = await shownOf(frameId);
    const kept = await keepFit(as(world.people.technician), {
      frameId,
      fromReadingId: before.id,
      fromVersion: 0,
      region: { fromMm: -4.5, toMm: 5 },
      leaveOut: [],
      zeroShift: 0,
      detectorMm: 0.25,
    });
    const { frame, shown, result } = await shownOf(frameId);
    expect(shown).toMatchObject({ id: kept.readingId, number: 2, replaces: before.id, status: 'draft' });
    expect(result).toMatchObject({ region: { fromMm: -4.5, toMm: 5 }, detectorMm: 0.25 });
    expect(frame.scan).toEqual({ detectorMm: 0.25 });
    const [log] = await rows<{ after_json: string }>(
      `SELECT after_json FROM audit_rows WHERE action = 'reading.refit' AND subject_id = :id`,
      { id: kept.readingId },
    );
    expect(JSON.parse(log.after_json)).toMatchObject({ region: { fromMm: -4.5, toMm: 5 }, detectorMm: 0.25 });
    // Without a word about the detector it stays as it was.
    const { body } = await preview(frameId, { region: { fromMm: -4, toMm: 4 }, readingId: shown.id });
    expect(body.result).toMatchObject({ detectorMm: 0.25 });
  });

  test('sent, returned, sent again, fitted in review, accepted by another, and in the chart with the frames', async () => {
    const { technician, reviewer, reviewer2 } = world.people;
    const first = (await shownOf(frameId)).shown;
    await sendReading(as(technician), { readingId: first.id, version: 0, note: '' });
    await returnReading(as(reviewer2), {
      readingId: first.id,
      version: 1,
      reason: 'no-clean-region',
      words: '',
    });
    const again = await keepFit(as(technician), {
      frameId,
      fromReadingId: first.id,
      fromVersion: 2,
      region: { fromMm: -5, toMm: 5 },
      leaveOut: [],
      zeroShift: 0,
      detectorMm: 0.2,
    });
    await sendReading(as(technician), { readingId: again.readingId, version: 0, note: '' });
    const inReview = await keepFit(as(reviewer), {
      frameId,
      fromReadingId: again.readingId,
      fromVersion: 1,
      region: { fromMm: -4.6, toMm: 4.8 },
      leaveOut: [],
      zeroShift: 0,
    });
    const { shown } = await shownOf(frameId);
    const answers = shown.findings
      .filter(({ word }) => word === 'look')
      .map(({ check }) => ({ check, answer: 'accept-as-is' as const, reason: 'Seen.' }));
    await acceptReading(as(reviewer2), {
      readingId: inReview.readingId,
      version: 0,
      password: PASSWORD,
      answers,
    });
    const csv = await callRoute(
      overTimeCsv,
      `/api/over-time?bench=${world.benchId}&choice=lot:${world.lotId}`,
      {
        person: world.people.qa,
      },
    );
    expect(await csv.text()).toContain(String(shown.wavelengthNm));
  });
});

describe('the same bytes with another detector', () => {
  const detectorOf = async (id: number) => (await findFrame(id, null))?.scan?.detectorMm;

  test('are one frame: the same width again changes nothing, another one fits anew before review', async () => {
    const bytes = scanFile(2, { detectorMm: 0.3 });
    const to = { serial: 'A2', name: 'A2.csv' };
    const first = await send(bytes, to);
    await fit(first.answer.frameId);
    const same = await send(bytes, to);
    expect(same.answer).toMatchObject({ frameId: first.answer.frameId, sameAs: first.answer.frameId });
    expect((await shownOf(first.answer.frameId)).frame.readings).toHaveLength(1);

    const other = await send(bytes, { ...to, detectorMm: '0.3' });
    expect(other.answer).toMatchObject({
      frameId: first.answer.frameId,
      sameAs: first.answer.frameId,
      frame: { scan: { detectorMm: 0.3 } },
    });
    const { frame, shown, result } = await shownOf(first.answer.frameId);
    expect(frame.readings.map(({ status }) => status)).toEqual(['draft', 'replaced']);
    expect(shown.madeBy?.id).toBe(world.people.technician.id);
    expect(result.detectorMm).toBe(0.3);

    await sendReading(as(world.people.technician), { readingId: shown.id, version: 0, note: '' });
    const spool = await readdir(env().SPOOL_FOLDER);
    const late = await send(bytes, { ...to, detectorMm: '0.4' });
    expect(late).toMatchObject({ status: 409, answer: { code: 'WRONG_STATE' } });
    expect(late.answer.title).toMatch(/with a detector of 0\.3 mm.*gone to review.*Nothing was changed/);
    expect(await detectorOf(first.answer.frameId)).toBe(0.3);
    expect(await readdir(env().SPOOL_FOLDER)).toEqual(spool);
  });

  test('take the new width while they wait, and are fitted again after a refusal', async () => {
    const waiting = await send(scanFile(4), { serial: 'A3', name: 'A3.csv' });
    await send(scanFile(4), { serial: 'A3', name: 'A3.csv', detectorMm: '0.2' });
    expect(await detectorOf(waiting.answer.frameId)).toBe(0.2);
    expect(await fit(waiting.answer.frameId)).toBe('fitted');
    expect((await shownOf(waiting.answer.frameId)).result.detectorMm).toBe(0.2);

    const one = scanFile(5, { scene: { ...BENCH_SCENE, pattern: 'one', widthUm: 120 } });
    const refused = await send(one, { serial: 'A4', name: 'A4.csv' });
    expect(await fit(refused.answer.frameId)).toBe('refused');
    const again = await send(one, { serial: 'A4', name: 'A4.csv', detectorMm: '0.2' });
    expect(again.answer.frame).toMatchObject({ state: 'waiting', message: null, scan: { detectorMm: 0.2 } });
    expect(await fit(refused.answer.frameId)).toBe('refused');
  });

  test.each(['-1', '0', 'wide', '2000'])('a width of %s is said to be wrong', async (detectorMm) => {
    const before = await frames();
    const { status, answer } = await send(scanFile(6), { serial: 'A5', detectorMm });
    expect([status, answer.code]).toEqual([400, 'BAD_INPUT']);
    expect(await frames()).toBe(before);
  });
});

describe('a text that is no scan', () => {
  test('without two numbers on a line is not taken', async () => {
    const before = await frames();
    const { status, answer } = await send(new Uint8Array(Buffer.from('unit,verdict\nA1,within\n')));
    expect([status, answer.code]).toEqual([415, 'NOT_A_PICTURE']);
    expect(answer.title).toMatch(/two columns, position in mm and intensity/);
    expect(await frames()).toBe(before);
  });

  test.each([
    ['too short', '0,1\n1,2\n2,1\n', /3 positions.*at least 24/],
    ['broken in the middle', `${'0.1,5\n'.repeat(3)}oops\n`, /Line 4 does not hold two numbers/],
  ])('%s is kept as unreadable, with the line and what to do', async (_what, text, words) => {
    const { answer } = await send(new Uint8Array(Buffer.from(text)), { serial: 'A5', name: 'A5.csv' });
    expect(await fit(answer.frameId)).toBe('unreadable');
    const frame = await findFrame(answer.frameId, null);
    expect(frame?.message).toMatch(words);
    expect(frame).toMatchObject({ scanLength: null, shown: null });
    const drawn = await callRoute(scanRoute, '/', {
      person: world.people.technician,
      params: { id: String(answer.frameId) },
    });
    expect(drawn.status).toBe(404);
  });

  test('a scan of one slit is refused and can still be drawn and fitted by hand', async () => {
    const bytes = scanFile(8, { scene: { ...BENCH_SCENE, pattern: 'one', widthUm: 120 } });
    const { answer } = await send(bytes, { serial: 'A5', name: 'A5 one slit.csv' });
    expect(await fit(answer.frameId)).toBe('refused');
    const frame = await findFrame(answer.frameId, null);
    expect(frame?.message).not.toMatch(/camera|frame/);
    expect(frame?.scanLength).toEqual({ fromMm: -5, toMm: 5, points: 251 });
    const by = await preview(answer.frameId, { region: { fromMm: -5, toMm: 5 } });
    expect(by.status).toBe(422);
  });
});
