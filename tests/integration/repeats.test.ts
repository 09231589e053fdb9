import { acceptReading } from '@/lib/server/commands/accept-reading';
import { chooseReading } from '@/lib/server/commands/choose-reading';
import { sendReading } from '@/lib/server/commands/send-reading';
import { findLot } from '@/lib/server/queries/lots';
import { repeatsOf } from '@/lib/server/queries/repeats';
import { rows } from './support/database';
import { inventedResult, makeReading } from './support/readings';
import { PASSWORD, as, closeWorld, makeWorld, type World } from './support/world';

let world: World;
beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

/** An accepted reading of the first unit with this value. */
async function accepted(wavelengthNm: number) {
  const result = inventedResult({ wavelengthNm, wavelengthVacuumNm: wavelengthNm + 0.1755 });
  const { readingId } = await makeReading(world, as(world.people.technician), 0, result);
  await sendReading(as(world.people.technician), { readingId, version: 0, note: '' });
  await acceptReading(as(world.people.reviewer), { readingId, version: 1, password: PASSWORD, answers: [] });
  return readingId;
}

test('repeat frames of a unit give mean and scatter and name the outlier; the reported one is chosen, not overwritten', async () => {
  const values = [634.8, 634.81, 634.79, 634.8, 636.9];
  const ids: number[] = [];
  for (const value of values) ids.push(await accepted(value));
  const [unitId] = world.unitIds;
  const repeats = await repeatsOf(unitId);
  expect(repeats?.rows.map(({ readingId }) => readingId)).toEqual(ids);
  expect(repeats?.meanNm).toBeCloseTo(values.reduce((a, b) => a + b) / 5, 9);
  expect(repeats?.rows.map(({ isOutlier }) => isOutlier)).toEqual([false, false, false, false, true]);
  expect(repeats?.chosen).toBeNull();

  const standing = async () =>
    (await findLot(world.lotId, { page: 1, find: '' }))!.rows.find(({ id }) => id === unitId)?.reading?.id;
  expect(await standing()).toBe(ids[4]);
  await chooseReading(as(world.people.qa), { readingId: ids[0], reason: 'The last one was bumped.' });
  await chooseReading(as(world.people.reviewer), { readingId: ids[1], reason: 'Sharper.' });
  expect((await repeatsOf(unitId))?.chosen).toMatchObject({
    readingId: ids[1],
    reason: 'Sharper.',
    by: { id: world.people.reviewer.id },
  });
  expect(await standing()).toBe(ids[1]);
  expect(await rows('SELECT id FROM reportable_choices WHERE unit_id = :unitId', { unitId })).toHaveLength(2);
});

test('only an accepted reading of a unit can be chosen', async () => {
  const { readingId } = await makeReading(world, as(world.people.technician), 1);
  await expect(chooseReading(as(world.people.qa), { readingId, reason: 'x' })).rejects.toMatchObject({
    code: 'WRONG_STATE',
  });
  await expect(chooseReading(as(world.people.qa), { readingId: 999_999, reason: 'x' })).rejects.toMatchObject(
    {
      code: 'NOT_FOUND',
    },
  );
  expect(await repeatsOf(world.unitIds[1])).toBeNull();
});
