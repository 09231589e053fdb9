/** Which question goes where while a person drags: the newest change counts, and the server is asked only for bands. */
import type { Region } from '@/lib/domain/reading-result';
import type { FitPreview, RegionChange } from '@/lib/domain/views';
import { LiveFits, type FitServices } from '@/lib/client/live-fit/live-fits';
import type { FitQuestion, FitReply } from '@/lib/client/live-fit/fit-worker';
import { Refused, type SentStack } from '@/lib/client/live-fit/stacks';
import { measureFrame } from '@/lib/measure/analyse-frame';
import { encodeStack } from '@/lib/measure/stack-file';
import { frame, tiff16 } from '../measure/helpers/frames';

const FACTS = { setup: {}, tone: 'auto' as const, specification: null };
/** An answer of no meaning, told from others by its value. */
const answer = (wavelengthNm: number) => ({ wavelengthNm }) as FitPreview;

let bytes: Uint8Array<ArrayBuffer>;
let region: Region;
beforeAll(async () => {
  const measured = await measureFrame(await tiff16(frame({})), {}, {});
  if (!('stack' in measured)) throw new Error(measured.message);
  bytes = encodeStack(measured.stack);
  region = measured.stack.plan.region;
});

const stack = (sha256: string): SentStack => ({ sha256, bytes: bytes.slice().buffer });
const changed = (part: Partial<Region>): RegionChange => ({
  region: { ...region, ...part },
  leaveOut: [],
  zeroShift: 0,
});
const shorter = (px: number) => changed({ lengthPx: region.lengthPx - px });
const turned = (deg: number) => changed({ angleDeg: region.angleDeg + deg });

/** A page with a worker that answers when it is told to. */
function page(given: Partial<FitServices> = {}) {
  const asked: FitQuestion[] = [];
  let reply: (reply: FitReply) => void = () => undefined;
  let breakDown: () => void = () => undefined;
  const made: RegionChange[] = [];
  const services: FitServices = {
    startWorker: (onReply, onBroken) => {
      reply = onReply;
      breakDown = onBroken;
      return { postMessage: (question) => void asked.push(question), terminate: () => undefined };
    },
    fetchStack: () => Promise.resolve(stack('first')),
    makeStack: (change) => {
      made.push(change);
      return Promise.resolve(stack('second'));
    },
    fitOnServer: () => Promise.resolve({ ...answer(3), stackSha256: 'third' }),
    ...given,
  };
  const fits = new LiveFits(services, FACTS, true);
  const fitsAsked = () => asked.flatMap((question) => (question.kind === 'fit' ? [question.change] : []));
  return {
    fits,
    asked,
    made,
    fitsAsked,
    reply: (r: FitReply) => reply(r),
    breakDown: () => breakDown(),
  };
}

beforeEach(() => jest.useFakeTimers());
afterEach(() => jest.useRealTimers());

/** Lets everything that waits on the clock or on an answer go on. */
const settle = async () => jest.advanceTimersByTimeAsync(1000);

test('fetches the stack of the reading and then asks the worker only', async () => {
  const { fits, fitsAsked, made, reply } = page();
  fits.open();
  expect(fits.current().home).toBe('loading');
  const first = shorter(10);
  fits.want(first);
  expect(fitsAsked()).toEqual([]);
  await settle();
  expect(fits.current().home).toBe('browser');
  expect(fitsAsked()).toEqual([first]);
  reply({ kind: 'fit', fit: answer(1) });
  expect(fits.current()).toMatchObject({ change: first, stackSha256: 'first', problem: null });
  expect(made).toEqual([]);
});

test('has one question on its way; of those that come meanwhile only the newest is asked', async () => {
  const { fits, fitsAsked, reply } = page();
  fits.open();
  await settle();
  const changes = [1, 2, 3, 4].map((px) => shorter(px));
  changes.forEach((change) => fits.want(change));
  expect(fitsAsked()).toEqual([changes[0]]);
  reply({ kind: 'fit', fit: answer(1) });
  expect(fitsAsked()).toEqual([changes[0], changes[3]]);
  // The older answer is shown until the newer one is there.
  expect(fits.current().fit?.wavelengthNm).toBe(1);
  reply({ kind: 'fit', fit: answer(4) });
  expect(fits.current()).toMatchObject({ change: changes[3], fit: { wavelengthNm: 4 } });
});

test('an answer to a change that was dropped is not shown', async () => {
  const { fits, reply } = page();
  fits.open();
  await settle();
  fits.want(shorter(5));
  fits.want(null);
  reply({ kind: 'fit', fit: answer(1) });
  expect(fits.current()).toMatchObject({ change: null, fit: null });
});

test('a region turned against the stack gets a new one once it rests; the last numbers stay', async () => {
  const { fits, fitsAsked, made, reply } = page();
  fits.open();
  await settle();
  fits.want(shorter(5));
  reply({ kind: 'fit', fit: answer(1) });
  const [a, b] = [turned(0.11), turned(0.2)];
  fits.want(a);
  expect(fits.current()).toMatchObject({ home: 'making', fit: { wavelengthNm: 1 } });
  await jest.advanceTimersByTimeAsync(100);
  fits.want(b);
  await settle();
  expect(made).toEqual([b]);
  // The stand-in sends the stack of the first region again: what was made for a region is good for it, and asked for once.
  expect(fitsAsked()).toHaveLength(2);
  reply({ kind: 'fit', fit: answer(2) });
  expect(fits.current()).toMatchObject({ change: b, fit: { wavelengthNm: 2 }, stackSha256: 'second' });
});

test('a region that comes back to the stack at hand is fitted at once, and no new stack is asked for', async () => {
  const { fits, fitsAsked, made } = page();
  fits.open();
  await settle();
  fits.want(turned(0.3));
  const back = turned(0.05);
  fits.want(back);
  expect(fits.current().home).toBe('browser');
  expect(fitsAsked()).toEqual([back]);
  await settle();
  expect(made).toEqual([]);
});

test('what the server says no to is shown in its words, and the next change is tried again', async () => {
  const { fits, made } = page({
    makeStack: (change) => {
      made.push(change);
      return Promise.reject(new Refused('There are no fringes in this region.'));
    },
  });
  fits.open();
  await settle();
  const away = turned(20);
  fits.want(away);
  await settle();
  expect(fits.current()).toMatchObject({
    home: 'browser',
    change: away,
    fit: null,
    problem: 'There are no fringes in this region.',
  });
  fits.want(turned(21));
  await settle();
  expect(made).toHaveLength(2);
});

test('without the stack of the reading the first change gets one of its own', async () => {
  const { fits, made, fitsAsked } = page({ fetchStack: () => Promise.reject(new Refused('Gone.')) });
  fits.open();
  await settle();
  expect(fits.current().home).toBeNull();
  const change = shorter(3);
  fits.want(change);
  await settle();
  expect(made).toEqual([change]);
  expect(fitsAsked()).toEqual([change]);
});

describe('where the browser has no worker', () => {
  const cases: [string, (on: ReturnType<typeof page>) => void][] = [
    ['it does not start', ({ breakDown }) => breakDown()],
    ['it breaks off', ({ reply }) => reply({ kind: 'broken', message: 'out of memory' })],
  ];
  test.each(cases)('%s: the server fits and the page says so', async (_what, fail) => {
    const on = page();
    on.fits.open();
    await settle();
    const change = shorter(4);
    on.fits.want(change);
    fail(on);
    await settle();
    expect(on.fits.current()).toMatchObject({
      home: 'server',
      because: expect.stringMatching(/the server/) as string,
      change,
      fit: { wavelengthNm: 3 },
      stackSha256: 'third',
    });
  });

  test('starting one throws', async () => {
    const on = page({
      startWorker: () => {
        throw new Error('SecurityError');
      },
    });
    on.fits.open();
    on.fits.want(shorter(4));
    await settle();
    expect(on.fits.current()).toMatchObject({ home: 'server', fit: { wavelengthNm: 3 } });
  });
});
