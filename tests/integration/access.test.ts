import * as door from '@/app/(door)/actions';
import * as room from '@/app/(room)/actions';
import * as benches from '@/app/(room)/benches/actions';
import * as conditions from '@/app/(room)/conditions/actions';
import * as references from '@/app/(room)/references/actions';
import * as lots from '@/app/(room)/lots/actions';
import * as people from '@/app/(room)/people/actions';
import * as readings from '@/app/(room)/readings/actions';
import * as sources from '@/app/(room)/sources/actions';
import { POST as upload } from '@/app/api/upload/route';
import { POST as newCertificate } from '@/app/api/certificates/route';
import { GET as certificate } from '@/app/api/certificates/[sha256]/route';
import { GET as status } from '@/app/api/frames/status/route';
import { GET as original } from '@/app/api/frames/[id]/original/route';
import { GET as photo } from '@/app/api/frames/[id]/photo/route';
import { GET as scan } from '@/app/api/frames/[id]/scan/route';
import { POST as previewFit } from '@/app/api/frames/[id]/preview-fit/route';
import { POST as looking } from '@/app/api/readings/[id]/looking/route';
import { POST as trials } from '@/app/api/frames/[id]/trials/route';
import { GET as stack, POST as newStack } from '@/app/api/frames/[id]/stack/route';
import { GET as overTimeCsv } from '@/app/api/over-time/route';
import type { ActionAnswer } from '@/lib/domain/errors';
import { sendReading } from '@/lib/server/commands/send-reading';
import { rows } from './support/database';
import { makeReading } from './support/readings';
import { actAs, callRoute } from './support/session';
import {
  PASSWORD,
  PEOPLE,
  PLATE,
  SETUP,
  as,
  closeWorld,
  makeWorld,
  type Who,
  type World,
} from './support/world';

/** Written by hand from the brief, not derived from the table it checks. */
const MATRIX: Record<string, Who[]> = {
  chooseBench: ['admin', 'technician', 'technician2', 'reviewer', 'reviewer2', 'both', 'qa', 'auditor'],
  setMailTiming: [
    'admin',
    'technician',
    'technician2',
    'reviewer',
    'reviewer2',
    'both',
    'qa',
    'auditor',
    'nobody',
  ],
  emptyIntake: ['technician', 'technician2', 'both'],
  addBench: ['admin'],
  addSetup: ['admin'],
  decideSetup: ['qa'],
  takeBackSetup: ['admin'],
  addPlate: ['admin', 'qa'],
  renewPlate: ['admin', 'qa'],
  takePlateOff: ['admin', 'qa'],
  putPlateBack: ['admin', 'qa'],
  'POST certificates': ['admin', 'qa'],
  'GET certificates': [
    'admin',
    'technician',
    'technician2',
    'reviewer',
    'reviewer2',
    'both',
    'qa',
    'auditor',
  ],
  addSpecification: ['admin', 'qa'],
  retireSpecification: ['admin', 'qa'],
  openLot: ['admin', 'technician', 'technician2', 'both'],
  addUnits: ['admin', 'technician', 'technician2', 'both'],
  addSource: ['admin', 'qa'],
  releaseBench: ['qa'],
  setBenchRule: ['qa'],
  enterBenchConditions: ['admin', 'technician', 'technician2', 'both', 'qa'],
  enterFrameConditions: ['technician', 'technician2', 'both'],
  renewSource: ['admin', 'qa'],
  addPerson: ['admin'],
  changePerson: ['admin'],
  keepFit: ['technician', 'technician2', 'reviewer', 'reviewer2', 'both'],
  sendToReview: ['technician', 'technician2', 'both'],
  acceptReading: ['reviewer', 'reviewer2', 'both'],
  returnReading: ['reviewer', 'reviewer2', 'both'],
  acceptSheet: ['reviewer', 'reviewer2', 'both'],
  'POST looking': ['reviewer', 'reviewer2', 'both'],
  chooseReading: ['reviewer', 'reviewer2', 'both', 'qa'],
  addComment: ['admin', 'technician', 'technician2', 'reviewer', 'reviewer2', 'both', 'qa'],
  askWithdrawal: ['reviewer', 'reviewer2', 'both', 'qa'],
  answerWithdrawal: ['reviewer', 'reviewer2', 'both', 'qa'],
  setOutcome: ['reviewer', 'reviewer2', 'both', 'qa'],
  'POST upload': ['technician', 'technician2', 'both'],
  'GET status': ['admin', 'technician', 'technician2', 'reviewer', 'reviewer2', 'both', 'qa', 'auditor'],
  'GET photo': ['admin', 'technician', 'technician2', 'reviewer', 'reviewer2', 'both', 'qa', 'auditor'],
  'GET original': ['admin', 'technician', 'technician2', 'reviewer', 'reviewer2', 'both', 'qa', 'auditor'],
  'GET scan': ['admin', 'technician', 'technician2', 'reviewer', 'reviewer2', 'both', 'qa', 'auditor'],
  'POST preview-fit': ['technician', 'technician2', 'reviewer', 'reviewer2', 'both'],
  'GET stack': ['technician', 'technician2', 'reviewer', 'reviewer2', 'both'],
  'POST trials': ['technician', 'technician2', 'reviewer', 'reviewer2', 'both'],
  'POST stack': ['technician', 'technician2', 'reviewer', 'reviewer2', 'both'],
  'GET over-time': ['admin', 'technician', 'technician2', 'reviewer', 'reviewer2', 'both', 'qa', 'auditor'],
};

let world: World;
let draft: { frameId: number; readingId: number };
let waiting: { frameId: number; readingId: number };

beforeAll(async () => {
  world = await makeWorld();
  draft = await makeReading(world, as(world.people.technician));
  waiting = await makeReading(world, as(world.people.technician), 1);
  await sendReading(as(world.people.technician), { readingId: waiting.readingId, version: 0, note: '' });
});
afterAll(closeWorld);

type Outcome = 'done' | 'refused' | 'shut' | 'other';

const OUTCOME: Record<string, Outcome> = { NOT_ALLOWED: 'refused', NOT_SIGNED_IN: 'shut' };

async function act(action: Promise<ActionAnswer<unknown>>): Promise<Outcome> {
  const answer = await action;
  return answer.ok ? 'done' : (OUTCOME[answer.code] ?? 'other');
}

const region = { cxPx: 1, cyPx: 1, lengthPx: 1, heightPx: 1, angleDeg: 0 };

/** Each call with an input that harms nobody when the person is let through: it names nothing there is. */
function calls(who: Who | null): Record<string, () => Promise<Outcome>> {
  const person = who ? world.people[who] : null;
  const nowhere = 4_000_000;
  const route = async (
    handler: Parameters<typeof callRoute>[0],
    method: string,
    address: string,
    body?: string,
  ) => {
    const params = { id: String(nowhere) };
    const response = await callRoute(handler, address, {
      person,
      method,
      params,
      body,
      headers: { 'content-length': '0' },
    });
    if (response.status === 401) return 'shut';
    return response.status === 403 ? 'refused' : response.ok ? 'done' : 'other';
  };
  const air = { airTemperatureC: { value: 21, half: 1 }, pressurePa: { value: 101_000, half: 100 } };
  const specification = {
    name: '',
    nominalNm: 635,
    medium: 'air' as const,
    lowerNm: 630,
    upperNm: 640,
    rule: 'simple' as const,
  };
  return {
    chooseBench: () => act(room.chooseBench({ benchId: null })),
    setMailTiming: () => act(room.setMailTiming({ daily: false })),
    emptyIntake: () => act(room.emptyIntake()),
    addBench: () => act(benches.addBench({ name: 'Bench T' })),
    addSetup: () => act(benches.addSetup({ ...SETUP, ...world.plate, benchId: nowhere, afterNumber: 0 })),
    decideSetup: () => act(benches.decideSetup({ setupId: nowhere, decision: 'approved' })),
    takeBackSetup: () => act(benches.takeBackSetup({ setupId: nowhere })),
    addPlate: () => act(benches.addPlate({ ...PLATE, name: '' })),
    renewPlate: () => act(benches.renewPlate({ ...PLATE, plateId: nowhere, afterNumber: 1 })),
    takePlateOff: () => act(benches.takePlateOff({ plateId: nowhere })),
    putPlateBack: () => act(benches.putPlateBack({ plateId: nowhere, benchId: nowhere })),
    'POST certificates': () => route(newCertificate, 'POST', '/api/certificates?name=a.pdf', ''),
    'GET certificates': () => route(certificate, 'GET', '/api/certificates/x'),
    addSpecification: () => act(lots.addSpecification(specification)),
    retireSpecification: () => act(lots.retireSpecification({ id: nowhere })),
    openLot: () => act(lots.openLot({ number: '1', specificationId: nowhere })),
    addUnits: () => act(lots.addUnits({ lotId: nowhere, serials: ['X'] })),
    addSource: () => act(sources.addSource({ name: '', kind: 'lamp-line', vacuumNm: 633, uNm: 0.1 })),
    renewSource: () =>
      act(sources.renewSource({ sourceId: nowhere, afterNumber: 1, vacuumNm: 633, uNm: 0.1 })),
    releaseBench: () => act(references.releaseBench({ stopId: nowhere, reason: 'x' })),
    setBenchRule: () => act(references.setBenchRule({ benchId: nowhere, method: 'absolute', why: 'x' })),
    enterBenchConditions: () => act(conditions.enterBenchConditions({ benchId: nowhere, ...air })),
    enterFrameConditions: () =>
      act(conditions.enterFrameConditions({ frameId: nowhere, readingId: nowhere, version: 0, ...air })),
    addPerson: () =>
      act(people.addPerson({ name: '', email: 'x@test.example', roles: ['qa'], password: PASSWORD })),
    changePerson: () => act(people.changePerson({ personId: nowhere, roles: [], active: true })),
    keepFit: () => act(readings.keepFit({ region, frameId: nowhere, fromReadingId: null, fromVersion: 0 })),
    sendToReview: () => act(readings.sendToReview({ readings: [{ readingId: nowhere, version: 0 }] })),
    acceptReading: () => act(readings.acceptReading({ readingId: nowhere, version: 0, password: 'x' })),
    returnReading: () =>
      act(readings.returnReading({ readingId: nowhere, version: 0, reason: 'take-again' })),
    acceptSheet: () => act(readings.acceptSheet({ readings: [{ readingId: nowhere, version: 0 }] })),
    'POST looking': () => route(looking, 'POST', '/api/readings/4000000/looking'),
    chooseReading: () => act(readings.chooseReading({ readingId: nowhere, reason: 'x' })),
    addComment: () => act(readings.addComment({ readingId: nowhere, words: 'x' })),
    askWithdrawal: () => act(readings.askWithdrawal({ readingId: nowhere, version: 0, reason: 'x' })),
    answerWithdrawal: () => act(readings.answerWithdrawal({ proposalId: nowhere, answer: 'confirmed' })),
    setOutcome: () => act(readings.setOutcome({ unitId: nowhere, outcome: 'passed-on' })),
    'POST upload': () => route(upload, 'POST', '/api/upload?name=a.png&benchId=4000000', ''),
    'GET status': () => route(status, 'GET', '/api/frames/status?ids=4000000'),
    'GET photo': () => route(photo, 'GET', '/api/frames/4000000/photo'),
    'GET original': () => route(original, 'GET', '/api/frames/4000000/original'),
    'GET scan': () => route(scan, 'GET', '/api/frames/4000000/scan'),
    'POST preview-fit': () =>
      route(previewFit, 'POST', '/api/frames/4000000/preview-fit', JSON.stringify({ region })),
    'GET stack': () => route(stack, 'GET', '/api/frames/4000000/stack?reading=4000000&engine=x'),
    'POST stack': () =>
      route(newStack, 'POST', '/api/frames/4000000/stack', JSON.stringify({ region, engine: 'x' })),
    'POST trials': () =>
      route(
        trials,
        'POST',
        '/api/frames/4000000/trials',
        JSON.stringify({
          readingId: null,
          trials: [{ region, valueNm: null, expandedNm: null, problem: null, agoMs: 0 }],
        }),
      ),
    'GET over-time': () => route(overTimeCsv, 'GET', '/api/over-time'),
  };
}

/** A number that changes when any row of any table does. */
async function fingerprint(): Promise<unknown> {
  const tables = await rows<{ name: string }>(
    'SELECT TABLE_NAME AS name FROM information_schema.TABLES WHERE TABLE_SCHEMA = DATABASE()',
  );
  return rows(`CHECKSUM TABLE ${tables.map(({ name }) => name).join(', ')} EXTENDED`);
}

test('the matrix names every call, and every call is in the matrix', () => {
  expect(Object.keys(calls(null)).sort()).toEqual(Object.keys(MATRIX).sort());
  const exported = [room, benches, conditions, references, lots, people, readings, sources].flatMap((file) =>
    Object.keys(file),
  );
  expect(exported.filter((name) => !(name in MATRIX) && name !== 'signOutEverywhere')).toEqual([]);
});

describe.each([...(Object.keys(PEOPLE) as Who[]), null])('%s', (who) => {
  test.each(Object.keys(MATRIX))('%s', async (name) => {
    await actAs(who ? world.people[who] : null);
    const before = await fingerprint();
    const outcome = await calls(who)[name]();
    const expected = who === null ? ['shut'] : MATRIX[name].includes(who) ? ['done', 'other'] : ['refused'];
    expect(expected).toContain(outcome);
    if (outcome !== 'done') expect(await fingerprint()).toEqual(before);
  });
});

describe('with rows that are there', () => {
  /** Insiders without the right: refused, and the row is as it was. */
  const wrongHands: [who: Who, what: string, call: () => Promise<ActionAnswer<unknown>>][] = [
    [
      'qa',
      'accept',
      () => readings.acceptReading({ readingId: waiting.readingId, version: 1, password: PASSWORD }),
    ],
    [
      'technician',
      'accept',
      () => readings.acceptReading({ readingId: waiting.readingId, version: 1, password: PASSWORD }),
    ],
    [
      'admin',
      'accept',
      () => readings.acceptReading({ readingId: waiting.readingId, version: 1, password: PASSWORD }),
    ],
    [
      'technician',
      'return',
      () => readings.returnReading({ readingId: waiting.readingId, version: 1, reason: 'take-again' }),
    ],
    [
      'reviewer',
      'send',
      () => readings.sendToReview({ readings: [{ readingId: draft.readingId, version: 0 }] }),
    ],
    [
      'reviewer',
      'keep a fit of a draft',
      () =>
        readings.keepFit({ region, frameId: draft.frameId, fromReadingId: draft.readingId, fromVersion: 0 }),
    ],
    [
      'technician',
      'keep a fit in review',
      () =>
        readings.keepFit({
          region,
          frameId: waiting.frameId,
          fromReadingId: waiting.readingId,
          fromVersion: 1,
        }),
    ],
    [
      'technician',
      'decide on a unit',
      () => readings.setOutcome({ unitId: world.unitIds[0], outcome: 'passed-on' }),
    ],
    ['reviewer', 'add units', () => lots.addUnits({ lotId: world.lotId, serials: ['NEW'] })],
    [
      'technician',
      'change a setup',
      () => benches.addSetup({ ...SETUP, ...world.plate, benchId: world.benchId, afterNumber: 1 }),
    ],
    [
      'technician',
      'take a plate off its bench',
      () => benches.takePlateOff({ plateId: world.plate.plateId }),
    ],
    ['admin', 'approve a setup', () => benches.decideSetup({ setupId: world.setupId, decision: 'approved' })],
    [
      'qa',
      'change roles',
      () => people.changePerson({ personId: world.people.qa.id, roles: ['admin'], active: true }),
    ],
  ];

  test.each(wrongHands)('%s may not %s', async (who, _what, call) => {
    await actAs(world.people[who]);
    const before = await fingerprint();
    expect(await call()).toMatchObject({ ok: false, code: 'NOT_ALLOWED' });
    expect(await fingerprint()).toEqual(before);
  });
});

test('wrong input is said beside its field and changes nothing', async () => {
  await actAs(world.people.admin);
  const before = await fingerprint();
  const answer = await benches.addSetup({
    ...SETUP,
    ...world.plate,
    benchId: world.benchId,
    afterNumber: 1,
    distanceMm: { ...SETUP.distanceMm, value: -1 },
  });
  expect(answer).toMatchObject({
    ok: false,
    code: 'BAD_INPUT',
    fields: { 'distanceMm.value': expect.any(String) as string },
  });
  expect(await fingerprint()).toEqual(before);
});

test('the door is throttled by address', async () => {
  const answers = [];
  for (let i = 0; i < 12; i += 1) answers.push(await door.askReset({ email: 'stranger@test.example' }));
  expect(answers.filter(({ ok }) => ok)).toHaveLength(10);
  expect(answers.at(-1)).toMatchObject({ ok: false, code: 'TOO_MANY' });
});
