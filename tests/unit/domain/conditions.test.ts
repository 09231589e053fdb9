import {
  airOf,
  benchConditionsSchema,
  mergeConditions,
  sourceTemperatureOf,
  type Conditions,
} from '@/lib/domain/conditions';

const NOTHING: Conditions = {
  airTemperatureC: null,
  pressurePa: null,
  humidityPercent: null,
  co2Ppm: null,
  sourceTemperatureC: null,
};
const AIR: Conditions = {
  ...NOTHING,
  airTemperatureC: { value: 21.4, half: 0.5 },
  pressurePa: { value: 100_820, half: 100 },
};

test('air needs temperature and pressure; the rest is any room’s, as wide as rooms are', () => {
  expect(airOf(NOTHING)).toBeNull();
  expect(airOf({ ...AIR, pressurePa: null })).toBeNull();
  expect(airOf(AIR)).toMatchObject({ temperatureC: 21.4, humidityPercent: 50, co2Ppm: 450 });
  // A rectangle of half width a has the standard uncertainty a/√3 (JCGM 100:2008, 4.3.7).
  expect(airOf(AIR)?.uTemperatureC).toBeCloseTo(0.288675, 6);
});

test('a frame goes before its bench, its air as a whole', () => {
  const frame = { ...NOTHING, sourceTemperatureC: { value: 31, half: 0.5 } };
  const merged = mergeConditions(frame, AIR);
  expect(merged?.pressurePa?.value).toBe(100_820);
  expect(sourceTemperatureOf(merged!)).toMatchObject({ value: 31, shape: 'rectangular' });
  const own = { ...AIR, humidityPercent: { value: 30, half: 5 } };
  const bench = { ...AIR, co2Ppm: { value: 900, half: 50 }, sourceTemperatureC: { value: 25, half: 1 } };
  expect(mergeConditions(own, bench)).toMatchObject({ co2Ppm: null, sourceTemperatureC: { value: 25 } });
  expect(mergeConditions(null, null)).toBeNull();
});

test.each([
  ['half an air', { airTemperatureC: { value: 20, half: 1 } }, 'pressurePa.value'],
  ['nothing at all', {}, 'airTemperatureC.value'],
  [
    'kPa for Pa',
    { airTemperatureC: { value: 20, half: 1 }, pressurePa: { value: 101.3, half: 1 } },
    'pressurePa.value',
  ],
  ['no ±', { sourceTemperatureC: { value: 25, half: 0 } }, 'sourceTemperatureC.half'],
  ['a ± that says nothing', { sourceTemperatureC: { value: 25, half: 200 } }, 'sourceTemperatureC.half'],
])('%s is refused beside its field', (_what, entered, field) => {
  const answer = benchConditionsSchema.safeParse({ benchId: 1, ...entered });
  expect(answer.error?.issues.map(({ path }) => path.join('.'))).toContain(field);
  expect(answer.error?.issues[0].message).toMatch(/\.$/);
});
