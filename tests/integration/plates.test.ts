import { acceptReading } from '@/lib/server/commands/accept-reading';
import { addBench } from '@/lib/server/commands/add-bench';
import { addPlate, renewPlate } from '@/lib/server/commands/add-plate';
import { addSetup } from '@/lib/server/commands/add-setup';
import { decideSetup } from '@/lib/server/commands/decide-setup';
import { putPlateBack, takePlateOff } from '@/lib/server/commands/move-plate';
import { sendReading } from '@/lib/server/commands/send-reading';
import { plateSchema, renewPlateSchema, setupSchema } from '@/lib/domain/setup-schemas';
import { findBench, listBenchChoices } from '@/lib/server/queries/benches';
import { listPlates } from '@/lib/server/queries/plates';
import { up as makePlates } from '@/migrations/0013-plates';
import { ownerDatabase, rows } from './support/database';
import { makeReading } from './support/readings';
import {
  NOW,
  PASSWORD,
  PLATE,
  SETUP,
  as,
  closeWorld,
  makeWorld,
  putInForce,
  type World,
} from './support/world';

// A world is made anew for each test, and hashing its people's passwords takes its time on a busy machine.
jest.setTimeout(60_000);

let world: World;
beforeEach(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

const HOUR = 3_600_000;
const later = (hours: number) => new Date(NOW.getTime() + hours * HOUR);
const admin = (at = NOW) => as(world.people.admin, at);

async function newPlate(name: string) {
  const { plateId, certificateId } = await addPlate(admin(), plateSchema.parse({ ...PLATE, name }));
  return { plateId, plateCertificateId: certificateId };
}

const newBench = async (name: string) => (await addBench(admin(), { name, note: '' })).benchId;

async function propose(benchId: number, afterNumber: number, change: object = {}): Promise<number> {
  const setup = setupSchema.parse({ ...SETUP, ...world.plate, benchId, afterNumber, ...change });
  return (await addSetup(admin(), setup)).setupId;
}

const approve = (setupId: number, at = NOW) =>
  decideSetup(as(world.people.qa, at), { setupId, decision: 'approved', reason: '' });
const plateNow = async (plateId: number, at = NOW) =>
  (await listPlates(at)).find(({ id }) => id === plateId)!;

describe('a certificate of a plate', () => {
  test('is copied into a setup and kept beside the next one', async () => {
    const renewed = renewPlateSchema.parse({
      ...PLATE,
      plateId: world.plate.plateId,
      afterNumber: 1,
      separationUm: { value: 250.3, stated: 0.2, shape: 'rectangular', dof: 12 },
      certificate: 'Invented C-7',
      due: '2029-01-01',
    });
    const { certificateId } = await renewPlate(admin(), renewed);
    await expect(renewPlate(admin(), renewed)).rejects.toMatchObject({ code: 'CHANGED_MEANWHILE' });
    expect(await findBench(world.benchId, NOW)).toMatchObject({
      newerCertificate: true,
      inForce: { separationUm: { value: 250, certificate: 'Invented C-2' }, plateRevision: 1 },
    });
    // The person saw the older certificate: told to look first.
    await expect(propose(world.benchId, 1)).rejects.toMatchObject({ code: 'CHANGED_MEANWHILE' });
    await approve(await propose(world.benchId, 1, { plateCertificateId: certificateId }));
    const bench = await findBench(world.benchId, NOW);
    expect(bench).toMatchObject({
      newerCertificate: false,
      inForce: {
        plate: 'P-1',
        plateRevision: 2,
        separationUm: { value: 250.3, u: 0.2 / Math.sqrt(3), dof: 12, certificate: 'Invented C-7' },
        widthUm: { value: 50, due: '2029-01-01' },
      },
    });
    expect((await plateNow(world.plate.plateId)).certificates.map(({ number }) => number)).toEqual([2, 1]);
  });

  test('that says something odd needs a reason', async () => {
    const odd = {
      ...PLATE,
      plateId: world.plate.plateId,
      afterNumber: 1,
      separationUm: { value: 253, stated: 1 },
    };
    await expect(renewPlate(admin(), renewPlateSchema.parse(odd))).rejects.toMatchObject({
      fields: { 'confirmed.separationUm': expect.stringMatching(/1\.2 % more/) as string },
    });
    const slip = plateSchema.parse({
      ...PLATE,
      name: 'P-9',
      separationUm: { value: 2.5, stated: 0.1 },
      widthUm: { value: 0.5, stated: 0.01 },
    });
    await expect(addPlate(admin(), slip)).rejects.toMatchObject({
      fields: { 'confirmed.separationUm': expect.stringMatching(/wrong unit/) as string },
    });
    const reason = 'Measured at another laboratory.';
    await renewPlate(admin(), renewPlateSchema.parse({ ...odd, confirmed: { separationUm: reason } }));
    expect((await plateNow(world.plate.plateId)).certificates[0].confirmed).toMatchObject([
      { key: 'separationUm', reason },
    ]);
  });
});

describe('a plate', () => {
  test('comes onto its bench with the setup and goes with the next one', async () => {
    const other = await newPlate('P-2');
    expect((await plateNow(world.plate.plateId)).mountedOn?.bench.name).toBe('Bench T');
    await approve(await propose(world.benchId, 1, { ...other, inForceFrom: later(24).toISOString() }));
    expect((await plateNow(world.plate.plateId, later(23))).mountedOn?.bench.name).toBe('Bench T');
    expect((await plateNow(world.plate.plateId, later(24))).mountedOn).toBeNull();
    expect((await plateNow(other.plateId, later(24))).mountedOn?.bench.name).toBe('Bench T');
  });

  test('is refused to a second bench until it is taken off the first', async () => {
    const second = await newBench('Bench U');
    const setupId = await propose(second, 0);
    await expect(approve(setupId)).rejects.toMatchObject({
      code: 'WRONG_STATE',
      message: expect.stringMatching(/Plate P-1 is on Bench T since .*Take it off there first/) as string,
    });
    expect(await rows('SELECT * FROM setup_decisions WHERE setup_id = :setupId', { setupId })).toEqual([]);
    await takePlateOff(admin(later(1)), { plateId: world.plate.plateId });
    await approve(setupId, later(2));
    const [, , back] = await Promise.all([
      expect(takePlateOff(admin(later(1.5)), { plateId: world.plate.plateId })).rejects.toMatchObject({
        code: 'WRONG_STATE',
      }),
      listBenchChoices(later(2)).then((list) =>
        expect(list.find(({ id }) => id === world.benchId)?.fitness).toEqual({
          word: 'stop',
          text: 'plate P-1 is off: take, not accept',
        }),
      ),
      putPlateBack(admin(later(3)), { plateId: world.plate.plateId, benchId: world.benchId }).catch(
        (problem: Error) => problem.message,
      ),
    ]);
    expect(back).toMatch(/is on Bench U/);
  });

  test('is never on two benches, however many approve at once', async () => {
    const shared = await newPlate('P-S');
    const setups: number[] = [];
    for (const name of ['Bench V', 'Bench W', 'Bench X'])
      setups.push(await propose(await newBench(name), 0, shared));
    const answers = await Promise.allSettled(setups.map((setupId) => approve(setupId)));
    expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const answer of answers)
      if (answer.status === 'rejected') expect(answer.reason).toMatchObject({ code: 'WRONG_STATE' });
    const open = await rows('SELECT * FROM plate_mounts WHERE plate_id = :plateId AND to_at IS NULL', {
      plateId: shared.plateId,
    });
    expect(open).toHaveLength(1);
  });

  test('the table itself refuses a second place, and a second plate on a bench', async () => {
    const second = await newBench('Bench Y');
    const other = await newPlate('P-3');
    const mount = (plateId: number, benchId: number) =>
      ownerDatabase().query(
        'INSERT INTO plate_mounts (plate_id, bench_id, from_at, mounted_by) VALUES (:plateId, :benchId, :at, :by)',
        { replacements: { plateId, benchId, at: NOW, by: world.people.admin.id } },
      );
    await expect(mount(world.plate.plateId, second)).rejects.toThrow(/plate_mounts_plate|Validation/);
    await expect(mount(other.plateId, world.benchId)).rejects.toThrow(/plate_mounts_bench|Validation/);
  });

  test('that was off when a frame was taken bars its reading, and only that one', async () => {
    const send = async (unit: number) => {
      const made = await makeReading(world, as(world.people.technician, later(2 * unit)), unit);
      await sendReading(as(world.people.technician), { readingId: made.readingId, version: 0, note: '' });
      return made.readingId;
    };
    const accept = (readingId: number) =>
      acceptReading(as(world.people.reviewer, later(9)), {
        readingId,
        version: 1,
        password: PASSWORD,
        answers: [],
      });
    const { plateId } = world.plate;
    const before = await send(0);
    await takePlateOff(admin(later(1)), { plateId });
    const during = await send(1);
    await putPlateBack(admin(later(3)), { plateId, benchId: world.benchId });
    const after = await send(2);
    await accept(before);
    await accept(after);
    await expect(accept(during)).rejects.toMatchObject({
      code: 'WRONG_STATE',
      message: expect.stringMatching(/Plate P-1 was not on Bench T/) as string,
    });
  });

  test('of another setup is not put back', async () => {
    const other = await newPlate('P-4');
    await expect(
      putPlateBack(admin(), { plateId: other.plateId, benchId: world.benchId }),
    ).rejects.toMatchObject({ code: 'WRONG_STATE' });
  });
});

describe('what runs out', () => {
  const dueAt = async (change: object, due: Date) => {
    const setupId = await putInForce(world.people, {
      ...SETUP,
      ...world.plate,
      benchId: world.benchId,
      afterNumber: 1,
      ...change,
    });
    const { readingId } = await makeReading({ ...world, setupId }, as(world.people.technician));
    await sendReading(as(world.people.technician), { readingId, version: 0, note: '' });
    return acceptReading(as(world.people.reviewer, due), {
      readingId,
      version: 1,
      password: PASSWORD,
      answers: [],
    });
  };

  test.each([
    [
      'a distance',
      { distanceMm: { ...SETUP.distanceMm, due: '2026-12-24' } },
      /Distance of setup 2 is overdue since 24 Dec 2026/,
    ],
    ['a plate’s certificate', {}, /Slit separation of setup 2 is overdue since 1 Jun 2027/],
  ])('%s bars accepting the day after its date', async (_what, change, says) => {
    const due = says.source.includes('24 Dec') ? '2026-12-24' : '2027-06-01';
    await expect(dueAt(change, new Date(Date.parse(due) + 24 * HOUR))).rejects.toMatchObject({
      code: 'WRONG_STATE',
      message: expect.stringMatching(says) as string,
    });
  });

  test('holds through its day', async () => {
    const distanceMm = { ...SETUP.distanceMm, due: '2026-12-24' };
    await expect(dueAt({ distanceMm }, new Date('2026-12-24T23:00:00Z'))).resolves.toBeDefined();
  });
});

describe('setups that named their plate in words', () => {
  test('become plates with certificates and mounts; a second run finds nothing left', async () => {
    const owner = ownerDatabase();
    const run = (sql: string) => owner.query(sql);
    const second = await newBench('Bench O');
    const third = await newBench('Bench P');
    let number = 0;
    const older = (benchId: number, plate: string, separation: number, hours: number) =>
      owner.query(
        `INSERT INTO setups (bench_id, number, plate, scale_um_per_px, scale_stated, scale_k, separation_um, separation_stated,
           separation_k, separation_certificate, separation_due, width_um, width_stated, width_k, width_certificate, distance_mm,
           distance_stated, distance_k, tone, why, entered_by, entered_at)
         VALUES (:benchId, :number, :plate, 6.9, 0.002, 2, :separation, 0.4, 2, 'Old C-1', '2027-03-01', 50, 0.6, 2, 'Old C-2', 300,
           0.4, 2, 'auto', 'Older.', :by, :at)`,
        {
          replacements: {
            benchId,
            number: (number += 1),
            plate,
            separation,
            by: world.people.admin.id,
            at: later(hours),
          },
        },
      );
    await older(second, 'Q-1', 250, -90);
    await older(second, 'Q-1', 250.2, -80);
    await older(second, 'Q-1', 250.2, -70);
    await older(second, 'Q-2', 200, -60);
    // The same name on two benches was two plates.
    await older(second, 'Q-3', 180, -50);
    await older(third, 'Q-3', 181, -40);
    await makePlates({ context: run });
    const counts = () =>
      rows(`SELECT (SELECT COUNT(*) FROM plates) AS plates, (SELECT COUNT(*) FROM plate_certificates) AS certificates,
        (SELECT COUNT(*) FROM setup_plates) AS links, (SELECT COUNT(*) FROM plate_mounts) AS mounts`);
    const once = await counts();
    await makePlates({ context: run });
    expect(await counts()).toEqual(once);
    expect(await rows('SELECT id FROM setups WHERE id NOT IN (SELECT setup_id FROM setup_plates)')).toEqual(
      [],
    );

    const plates = await listPlates(NOW);
    expect(plates.map(({ name }) => name)).toEqual(['P-1', 'Q-1', 'Q-2', 'Q-3 (Bench O)', 'Q-3 (Bench P)']);
    const [, q1, q2, q3o, q3p] = plates;
    expect(q1.certificates.map(({ number: n, separationUm }) => [n, separationUm.value])).toEqual([
      [2, 250.2],
      [1, 250],
    ]);
    expect(q1.certificates[0]).toMatchObject({ certificate: 'Old C-1, Old C-2', due: '2027-03-01' });
    expect(q1.mounts).toEqual([
      {
        bench: { id: second, name: 'Bench O' },
        from: later(-90).toISOString(),
        to: later(-60).toISOString(),
      },
    ]);
    expect(q2.mountedOn).toBeNull();
    expect(q3o.mountedOn?.bench.id).toBe(second);
    expect(q3p.mountedOn?.bench.id).toBe(third);
    expect(await findBench(second, NOW)).toMatchObject({
      fitness: { word: 'clear' },
      inForce: { plate: 'Q-3', plateId: q3o.id, plateRevision: 1 },
    });
  });
});
