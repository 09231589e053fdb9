import { addBench } from '@/lib/server/commands/add-bench';
import { addPerson } from '@/lib/server/commands/add-person';
import { addPlate } from '@/lib/server/commands/add-plate';
import { addSetup } from '@/lib/server/commands/add-setup';
import { addSource, renewSource } from '@/lib/server/commands/add-source';
import { decideSetup, takeBackSetup } from '@/lib/server/commands/decide-setup';
import { plateSchema, setupSchema } from '@/lib/domain/setup-schemas';
import { renewSourceSchema, sourceSchema } from '@/lib/domain/source-schemas';
import { PRODUCT } from '@/lib/server/context';
import { fitFacts } from '@/lib/server/frame-facts';
import { findBench, listBenchChoices } from '@/lib/server/queries/benches';
import { listSources } from '@/lib/server/queries/sources';
import { requireSetupAt, setupAt } from '@/lib/server/setup-timeline';
import { POST as sendCertificate } from '@/app/api/certificates/route';
import { GET as getCertificate } from '@/app/api/certificates/[sha256]/route';
import { ownerDatabase, rows } from './support/database';
import { callRoute } from './support/session';
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

const proposal = (change: object = {}) =>
  setupSchema.parse({
    ...SETUP,
    ...world.plate,
    benchId: world.benchId,
    afterNumber: 1,
    why: 'Measured again.',
    ...change,
  });

async function propose(change: object = {}, at = NOW): Promise<number> {
  return (await addSetup(as(world.people.admin, at), proposal(change))).setupId;
}

const approve = (setupId: number, at = NOW) =>
  decideSetup(as(world.people.qa, at), { setupId, decision: 'approved', reason: '' });
const numberAt = async (at: Date) => (await setupAt(world.benchId, at))?.number ?? null;

describe('a proposed setup', () => {
  test('changes nothing until QA approves it; then it is in force from the approval', async () => {
    const setupId = await propose({}, NOW);
    expect(await numberAt(later(1))).toBe(1);
    await approve(setupId, later(2));
    expect(await numberAt(later(1))).toBe(1);
    expect(await numberAt(later(2))).toBe(2);
  });

  test('from a later moment on: in force then, not with the approval; approved too late, with the approval', async () => {
    const soon = await propose({ inForceFrom: later(24).toISOString() });
    await approve(soon, later(1));
    expect(await numberAt(later(23.9))).toBe(1);
    expect(await numberAt(later(24))).toBe(2);
    const passed = await propose({ afterNumber: 2, inForceFrom: later(30).toISOString() }, later(25));
    await approve(passed, later(48));
    expect(await numberAt(later(47))).toBe(2);
    expect(await numberAt(later(48))).toBe(3);
  });

  test('has one proposal before it: another waits for the decision, and a declined number is not used again', async () => {
    const first = await propose();
    await expect(propose({ afterNumber: 2 })).rejects.toMatchObject({ code: 'WRONG_STATE' });
    await decideSetup(as(world.people.qa), {
      setupId: first,
      decision: 'declined',
      reason: 'No certificate.',
    });
    expect(await numberAt(later(1))).toBe(1);
    const second = await propose({ afterNumber: 2 });
    await approve(second);
    expect(await numberAt(NOW)).toBe(3);
  });
});

describe('the decision', () => {
  test('is never made by whoever entered it, whatever roles they hold', async () => {
    const roles = ['admin', 'qa'] as const;
    const { personId } = await addPerson(
      { actor: PRODUCT, at: NOW },
      { name: 'Invented all', email: 'all@test.example', roles: [...roles], password: PASSWORD },
    );
    const all = { id: personId, name: 'Invented all', email: 'all@test.example', roles: [...roles] };
    const { setupId } = await addSetup(as(all), proposal());
    await expect(decideSetup(as(all), { setupId, decision: 'approved', reason: '' })).rejects.toMatchObject({
      code: 'NOT_ALLOWED',
    });
    expect(await rows('SELECT * FROM setup_decisions WHERE setup_id = :setupId', { setupId })).toEqual([]);
    await approve(setupId);
    expect(await numberAt(NOW)).toBe(2);
  });

  test('of two at once one holds and the other is told who was first', async () => {
    const setupId = await propose();
    const answers = await Promise.allSettled([
      approve(setupId),
      decideSetup(as(world.people.qa), { setupId, decision: 'declined', reason: 'Invented.' }),
      takeBackSetup(as(world.people.admin), { setupId }),
    ]);
    expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const answer of answers)
      if (answer.status === 'rejected')
        expect(answer.reason).toMatchObject({
          code: 'CHANGED_MEANWHILE',
          message: expect.stringMatching(/Invented (qa|admin) (approved|declined|took back)/) as string,
        });
    expect(await rows('SELECT * FROM setup_decisions WHERE setup_id = :setupId', { setupId })).toHaveLength(
      1,
    );
  });

  test('only whoever entered it takes it back', async () => {
    const setupId = await propose();
    await expect(takeBackSetup(as(world.people.qa), { setupId })).rejects.toMatchObject({
      code: 'NOT_ALLOWED',
    });
    await takeBackSetup(as(world.people.admin), { setupId });
    await expect(approve(setupId)).rejects.toMatchObject({ code: 'CHANGED_MEANWHILE' });
  });

  test('is logged, and mails go to QA on the proposal and to the admin on the decision', async () => {
    const setupId = await propose({ scaleUmPerPx: { ...SETUP.scaleUmPerPx, value: 6.905 } });
    await decideSetup(as(world.people.qa), {
      setupId,
      decision: 'declined',
      reason: 'Where is the picture?',
    });
    const mails = await rows<{ to_address: string; subject: string; body_text: string }>(
      'SELECT to_address, subject, body_text FROM outbox ORDER BY id',
    );
    expect(mails.map(({ to_address, subject }) => [to_address, subject])).toEqual([
      [world.people.qa.email, 'Bench T: setup 2 waits for QA'],
      [world.people.admin.email, 'Bench T: setup 2 declined'],
    ]);
    expect(mails[0].body_text).toMatch(/pixel scale 6\.9000 became 6\.9050 µm\/px/);
    expect(mails[0].body_text).toContain(`/benches/${world.benchId}`);
    expect(mails[1].body_text).toContain('Where is the picture?');
    const log = await rows<{ action: string; who: string }>(
      "SELECT action, who FROM audit_rows WHERE subject_kind = 'setup' AND subject_id = :setupId ORDER BY id",
      { setupId },
    );
    expect(log).toEqual([
      { action: 'setup.add', who: 'Invented admin' },
      { action: 'setup.decline', who: 'Invented qa' },
    ]);
  });
});

describe('a bench', () => {
  /** Each bench has a plate of its own: one plate is in one place. */
  const plateOf = async (name: string) => {
    const added = await addPlate(as(world.people.admin), plateSchema.parse({ ...PLATE, name }));
    return { plateId: added.plateId, plateCertificateId: added.certificateId };
  };

  test('without an approved setup takes no frames, and says whom it waits for', async () => {
    const { benchId } = await addBench(as(world.people.admin), { name: 'Bench N', note: '' });
    await expect(requireSetupAt(benchId, NOW)).rejects.toMatchObject({
      message: expect.stringContaining('An admin enters one') as string,
    });
    const { setupId } = await addSetup(
      as(world.people.admin),
      proposal({ benchId, afterNumber: 0, ...(await plateOf('P-N')) }),
    );
    await expect(requireSetupAt(benchId, NOW)).rejects.toMatchObject({
      message: expect.stringContaining('waits for QA') as string,
    });
    expect((await listBenchChoices(NOW)).find(({ id }) => id === benchId)).toMatchObject({
      setupNumber: null,
      waitingNumber: 1,
      fitness: { word: 'stop' },
    });
    await approve(setupId);
    await expect(requireSetupAt(benchId, NOW)).resolves.toMatchObject({ number: 1 });
  });

  test('has a line of setups without gap or overlap, whatever order they are approved in', async () => {
    const approveFrom = async (afterNumber: number, hours: number) =>
      approve(await propose({ afterNumber, inForceFrom: later(hours).toISOString() }));
    await approveFrom(1, 50);
    await approveFrom(2, 10);
    await approveFrom(3, 30);
    await approveFrom(4, 30);
    const bench = await findBench(world.benchId, later(31));
    const line = [...(bench?.setups ?? [])].reverse();
    expect(line.map(({ number }) => number)).toEqual([1, 3, 4, 5, 2]);
    line.slice(1).forEach((setup, i) => expect(line[i].to).toBe(setup.from));
    expect(line.at(-1)?.to).toBeNull();
    // Of two of the same moment the later one holds.
    expect(bench?.inForce?.number).toBe(5);
    expect(await numberAt(later(31))).toBe(5);
    expect(await numberAt(later(60))).toBe(2);
  });

  test('from before approval was asked for keeps its setups in force from the moment they were entered', async () => {
    const { benchId } = await addBench(as(world.people.admin), { name: 'Bench O', note: '' });
    for (const [number, hours] of [
      [1, -48],
      [2, -24],
    ])
      await ownerDatabase().query(
        `INSERT INTO setups (bench_id, number, plate, scale_um_per_px, scale_stated, scale_k, separation_um, separation_stated,
           separation_k, width_um, width_stated, width_k, distance_mm, distance_stated, distance_k, tone, why, entered_by, entered_at)
         VALUES (:benchId, :number, 'P-9', 6.9, 0.002, 2, 250, 0.4, 2, 50, 0.6, 2, 300, 0.4, 2, 'auto', 'Older.', :by, :at)`,
        { replacements: { benchId, number, by: world.people.admin.id, at: later(hours) } },
      );
    expect((await setupAt(benchId, later(-30)))?.number).toBe(1);
    expect((await setupAt(benchId, NOW))?.number).toBe(2);
    const bench = await findBench(benchId, NOW);
    expect(bench).toMatchObject({ waiting: null, ended: [], inForce: { number: 2, approved: null } });
    const { setupId } = await addSetup(
      as(world.people.admin),
      proposal({ benchId, afterNumber: 2, ...(await plateOf('P-O')) }),
    );
    await approve(setupId, later(1));
    expect((await setupAt(benchId, later(2)))?.number).toBe(3);
  });
});

describe('what looks odd', () => {
  test('needs a reason, which stays with the setup; what does not look odd keeps none', async () => {
    const distanceMm = { ...SETUP.distanceMm, value: 317.526 };
    await expect(propose({ distanceMm })).rejects.toMatchObject({
      code: 'BAD_INPUT',
      fields: { 'confirmed.distanceMm': expect.stringMatching(/flange/) as string },
    });
    await propose({
      distanceMm,
      confirmed: { distanceMm: 'Measured to the sensor now.', scaleUmPerPx: 'x' },
    });
    const bench = await findBench(world.benchId, NOW);
    expect(bench?.waiting?.confirmed).toEqual([
      {
        key: 'distanceMm',
        seen: expect.stringMatching(/17\.5 mm more/) as string,
        reason: 'Measured to the sensor now.',
      },
    ]);
  });
});

describe('a source', () => {
  const START = { kind: 'lamp-line' as const, vacuumNm: 546.2268, uNm: 0.0001 };
  const add = (change: object) =>
    addSource(as(world.people.qa), sourceSchema.parse({ ...START, name: 'Invented lamp', ...change }));

  test('keeps every certificate; the newest is the one that counts', async () => {
    const { sourceId } = await add({ certificate: 'Invented L-1', due: '2026-12-01' });
    const renewed = renewSourceSchema.parse({
      sourceId,
      afterNumber: 1,
      vacuumNm: 546.2269,
      uNm: 0.0002,
      certificate: 'Invented L-2',
      due: '2028-12-01',
    });
    await renewSource(as(world.people.admin), renewed);
    await expect(renewSource(as(world.people.admin), renewed)).rejects.toMatchObject({
      code: 'CHANGED_MEANWHILE',
    });
    const shown = (await listSources()).find(({ id }) => id === sourceId);
    expect(shown).toMatchObject({
      vacuumNm: 546.2269,
      certificate: 'Invented L-2',
      revision: 2,
      due: '2028-12-01',
    });
    expect(
      await rows(
        'SELECT number, vacuum_nm, certificate FROM source_certificates WHERE source_id = :sourceId',
        {
          sourceId,
        },
      ),
    ).toEqual([
      { number: 1, vacuum_nm: 546.2268, certificate: 'Invented L-1' },
      { number: 2, vacuum_nm: 546.2269, certificate: 'Invented L-2' },
    ]);
  });

  test.each([
    ['a product is no reference', { kind: 'product', isReference: true }, 'isReference'],
    ['a stabilised laser stands on its certificate', { kind: 'stabilised-laser' }, 'certificate'],
    ['a kind is one of those there are', { kind: 'unstated' }, 'kind'],
  ])('%s', (_what, change, field) => {
    const answer = sourceSchema.safeParse({ ...START, name: 'Invented', ...change });
    expect(answer.error?.issues.map(({ path }) => path.join('.'))).toEqual([field]);
  });
});

test('limits and scatter reach the engine as standard uncertainties with their degrees of freedom', async () => {
  const setupId = await putInForce(world.people, {
    ...SETUP,
    ...world.plate,
    benchId: world.benchId,
    afterNumber: 1,
    distanceMm: { ...SETUP.distanceMm, stated: 0.3, shape: 'rectangular', k: 2 },
    scaleUmPerPx: { ...SETUP.scaleUmPerPx, stated: 0.001, shape: 'type-a', dof: 7 },
  });
  const { setup } = await fitFacts({
    id: 0,
    benchId: world.benchId,
    receivedAt: new Date(),
    mediaType: 'image/png',
    setupId,
    lotId: null,
  });
  // JCGM 100:2008, 4.3.7: limits of +-a without more knowledge have u = a / sqrt 3.
  expect(setup.distanceMm).toMatchObject({
    u: 0.3 / Math.sqrt(3),
    known: 'Invented C-3, rectangular',
    dof: null,
  });
  expect(setup.scaleUmPerPx).toMatchObject({ u: 0.001, known: 'Invented C-1, type A, ν = 7', dof: 7 });
  expect(setup.separationUm).toMatchObject({ u: 0.2, known: 'Invented C-2, k = 2', dof: null });
});

describe('a certificate', () => {
  const send = (body: string | Uint8Array<ArrayBuffer>, name: string, bytes?: number) =>
    callRoute(sendCertificate, `/api/certificates?name=${encodeURIComponent(name)}`, {
      person: world.people.admin,
      method: 'POST',
      body,
      headers: { 'content-length': String(bytes ?? Buffer.byteLength(body)) },
    });
  const PDF = '%PDF-1.7\ninvented certificate';

  test('is kept under its hash, named by a value, and comes back byte for byte as a download', async () => {
    const answer = await send(PDF, 'C:\\scans\\Prüfschein 1.pdf');
    expect(answer.status).toBe(200);
    const { sha256, fileName } = (await answer.json()) as { sha256: string; fileName: string };
    expect(fileName).toBe('Prüfschein 1.pdf');
    await send(PDF, 'again.pdf');
    expect(await rows('SELECT file_name FROM certificate_files')).toEqual([
      { file_name: 'Prüfschein 1.pdf' },
    ]);
    await propose({ distanceMm: { ...SETUP.distanceMm, file: sha256 } });
    expect((await findBench(world.benchId, NOW))?.waiting?.distanceMm.file).toEqual({ sha256, fileName });
    const got = await callRoute(getCertificate, `/api/certificates/${sha256}`, {
      person: world.people.technician,
      params: { sha256 },
    });
    expect(await got.text()).toBe(PDF);
    expect(got.headers.get('content-type')).toBe('application/pdf');
    expect(got.headers.get('content-disposition')).toMatch(/^attachment;.*Pr%C3%BCfschein/);
  });

  test.each([
    ['a page that calls itself a PDF', '<html><script>x</script>', 'a.pdf', undefined, 415],
    ['more than 20 MB', '%PDF-', 'a.pdf', 20 * 1024 * 1024 + 1, 413],
    ['a copy that broke off', '%PDF-', 'a.pdf', 100, 400],
  ])('%s is refused and leaves nothing', async (_what, body, name, bytes, status) => {
    expect((await send(body, name, bytes)).status).toBe(status);
    expect(await rows('SELECT * FROM certificate_files')).toEqual([]);
  });

  test('nobody handed in cannot be named', async () => {
    await expect(
      propose({ distanceMm: { ...SETUP.distanceMm, file: 'f'.repeat(64) } }),
    ).rejects.toMatchObject({ fields: { 'distanceMm.file': expect.any(String) as string } });
  });
});
