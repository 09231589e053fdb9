import { POST as upload } from '@/app/api/upload/route';
import { enterBenchConditions, enterFrameConditions } from '@/lib/server/commands/enter-conditions';
import { fitFrame } from '@/lib/server/commands/fit-frame';
import { openLot, addUnits } from '@/lib/server/commands/open-lot';
import { addSpecification } from '@/lib/server/commands/add-specification';
import { sendReading } from '@/lib/server/commands/send-reading';
import { PRODUCT } from '@/lib/server/context';
import { benchConditions } from '@/lib/server/conditions';
import { findFrame } from '@/lib/server/queries/frames';
import { fringes } from './support/pictures';
import { callRoute } from './support/session';
import { as, closeWorld, makeWorld, type World } from './support/world';

const HOUR = 3_600_000;
const NOTHING = {
  airTemperatureC: null,
  pressurePa: null,
  humidityPercent: null,
  co2Ppm: null,
  sourceTemperatureC: null,
};
/** An invented mountain: thin air shows. */
const MOUNTAIN = {
  ...NOTHING,
  airTemperatureC: { value: 21.4, half: 0.5 },
  pressurePa: { value: 80_000, half: 300 },
};

let world: World;
let lotId: number;
let seed = 30;

beforeAll(async () => {
  world = await makeWorld();
  const admin = as(world.people.admin);
  const { specificationId } = await addSpecification(admin, {
    name: 'Invented 635 nm at 25 °C',
    nominalNm: 635,
    medium: 'air',
    lowerNm: 630,
    upperNm: 640,
    rule: 'guard-expanded',
    ownGuardNm: null,
    ratio: null,
    halfToleranceNm: null,
    atTemperature: { temperatureC: 25, nmPerK: 0.2, uNmPerK: 0.02 },
  });
  ({ lotId } = await openLot(admin, { number: '0999', specificationId, supplier: '' }));
  await addUnits(admin, { lotId, serials: ['C1', 'C2', 'C3'] });
});
afterAll(closeWorld);

async function take(name: string) {
  const bytes = await fringes(seed++);
  const query = new URLSearchParams({ name, benchId: String(world.benchId), lotId: String(lotId) });
  const response = await callRoute(upload, `/api/upload?${query}`, {
    person: world.people.technician,
    method: 'POST',
    body: bytes,
    headers: { 'content-length': String(bytes.length) },
  });
  const { frameId } = (await response.json()) as { frameId: number };
  await fitFrame({ actor: PRODUCT, at: new Date() }, frameId);
  return shownOf(frameId);
}

async function shownOf(frameId: number) {
  const frame = await findFrame(frameId, null);
  if (!frame?.shown) throw new Error('The frame has no reading.');
  return { frameId, shown: frame.shown };
}

const technician = () => as(world.people.technician, new Date());

test('without the temperature its limits hold at a unit gets no verdict, and it says what is missing', async () => {
  const { shown } = await take('C1.png');
  expect(shown.judgement?.verdict).toBe('no-verdict');
  expect(shown.judgement?.because).toContain('25 °C');
  expect(shown.conditions.air).toBeUndefined();
});

test('entered for the frame: a new reading, carried to 25 °C, with its rows; the first one stays as it was', async () => {
  const { frameId, shown } = await take('C2.png');
  const before = shown.wavelengthNm ?? 0;
  const kept = await enterFrameConditions(technician(), {
    frameId,
    readingId: shown.id,
    version: shown.version,
    ...NOTHING,
    sourceTemperatureC: { value: 31, half: 0.5 },
  });
  const { shown: now } = await shownOf(frameId);
  expect(now).toMatchObject({ id: kept.readingId, replaces: shown.id, status: 'draft' });
  // 6 K at 0.2 nm/K; the fit itself is of the same region.
  expect((now.wavelengthNm ?? 0) - before).toBeCloseTo(-1.2, 2);
  expect(now.judgement?.verdict).toBe('within');
  expect(now.budget.map(({ key }) => key)).toEqual(
    expect.arrayContaining(['unit-temperature', 'temperature-coefficient']),
  );
  const first = await findFrame(frameId, shown.id);
  expect(first?.shown).toMatchObject({ status: 'replaced', wavelengthNm: before });
});

test('in review nothing is entered any more', async () => {
  const { frameId, shown } = await take('C3.png');
  await sendReading(technician(), { readingId: shown.id, version: 0, note: '' });
  const wanted = { frameId, readingId: shown.id, version: 1, ...MOUNTAIN };
  await expect(enterFrameConditions(technician(), wanted)).rejects.toMatchObject({ code: 'WRONG_STATE' });
  await expect(enterFrameConditions(technician(), { ...wanted, version: 0 })).rejects.toMatchObject({
    code: 'CHANGED_MEANWHILE',
  });
});

test('air of the bench reaches the next frame: carried to standard air, index of air among the rows', async () => {
  await enterBenchConditions(technician(), { benchId: world.benchId, ...MOUNTAIN });
  const { shown } = await take('C1-again.png');
  expect(shown.conditions.air).toMatchObject({ pressurePa: 80_000, humidityPercent: 50 });
  const { wavelengthNm } = shown.result;
  // Thin air: (n − 1) is smaller by about 5.8e-5, so the same light is shorter by 0.037 nm in standard air.
  expect((shown.wavelengthNm ?? 0) - (wavelengthNm ?? 0)).toBeCloseTo(-0.037, 2);
  expect(shown.budget.find(({ key }) => key === 'air-index')?.contributionNm).toBeGreaterThan(0);
  expect(shown.monteCarlo?.agrees).toBe(true);
});

test('what was read a day ago no longer holds', async () => {
  const now = new Date();
  expect(await benchConditions(world.benchId, now)).not.toBeNull();
  expect(await benchConditions(world.benchId, new Date(now.getTime() + 25 * HOUR))).toBeNull();
  expect(await benchConditions(world.benchId, new Date(now.getTime() - HOUR))).toBeNull();
});
