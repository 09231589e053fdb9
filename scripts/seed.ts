/**
 * Fills an empty installation with the invented demo: every row through the product's own commands, with this
 * script's clock, every frame a real file that is uploaded and fitted. Run by `npm start`; safe only on an empty
 * database, which it checks.
 */
import type { Role } from '@/lib/domain/roles';
import { setupSchema } from '@/lib/domain/setup-schemas';
import type { FitResult } from '@/lib/domain/scan-result';
import type { Outcome } from '@/lib/domain/views';
import { acceptReading } from '@/lib/server/commands/accept-reading';
import { addBench } from '@/lib/server/commands/add-bench';
import { addPerson, createFirstAdmin } from '@/lib/server/commands/add-person';
import { addSetup } from '@/lib/server/commands/add-setup';
import { addSource } from '@/lib/server/commands/add-source';
import { addSpecification } from '@/lib/server/commands/add-specification';
import { askReset } from '@/lib/server/commands/ask-reset';
import { decideSetup } from '@/lib/server/commands/decide-setup';
import { fitFrame } from '@/lib/server/commands/fit-frame';
import { addUnits, openLot } from '@/lib/server/commands/open-lot';
import { receiveFrame } from '@/lib/server/commands/receive-frame';
import { returnReading } from '@/lib/server/commands/return-reading';
import { sendReading } from '@/lib/server/commands/send-reading';
import { setOutcome } from '@/lib/server/commands/set-outcome';
import { PRODUCT, type CommandContext } from '@/lib/server/context';
import { closeDatabase, db, select } from '@/lib/server/db';
import { env } from '@/lib/server/env';
import { closePool } from '@/lib/server/measure-pool';
import { DEMO_PASSWORD, DEMO_PEOPLE } from './seed/people';
import {
  DEMO_BENCHES,
  DEMO_LOTS,
  DEMO_SETUPS,
  DEMO_SPECIFICATIONS,
  demoFrames,
  serialsOf,
  type DemoFrame,
} from './seed/plan';
import { photograph } from './simulator/camera';
import { encodeFile } from './simulator/encode';
import { scanText } from './simulator/scan';

const DAY_MS = 86_400_000;
const MINUTE_MS = 60_000;
const NOW = Date.now();
const CERTIFICATE = 'Invented certificate';

type Actor = CommandContext['actor'];

interface Cast {
  admin: Actor;
  qa: Actor;
  technicians: Actor[];
  reviewers: Actor[];
}

const daysAgo = (days: number, minutes = 0): Date => new Date(NOW - days * DAY_MS + minutes * MINUTE_MS);
const dueIn = (days: number): string => new Date(NOW + days * DAY_MS).toISOString().slice(0, 10);

async function people(): Promise<Cast> {
  const at = daysAgo(91);
  const [admin, ...others] = DEMO_PEOPLE;
  const first = await createFirstAdmin(
    { actor: PRODUCT, at },
    { name: admin.name, email: admin.email, password: DEMO_PASSWORD },
  );
  const adminActor: Actor = { id: first.personId, name: admin.name, roles: admin.roles };
  const made: Actor[] = [];
  for (const person of others) {
    const { personId } = await addPerson({ actor: adminActor, at }, { ...person, password: DEMO_PASSWORD });
    made.push({ id: personId, name: person.name, roles: person.roles });
  }
  // Reviewer 2 is a technician as well; whoever took a frame never reviews it, so the two lists stay apart.
  const whoseFirstRole = (role: Role): Actor[] => made.filter((actor) => actor.roles[0] === role);
  return {
    admin: adminActor,
    qa: whoseFirstRole('qa')[0],
    technicians: whoseFirstRole('technician'),
    reviewers: whoseFirstRole('reviewer'),
  };
}

async function constants(
  cast: Cast,
): Promise<{ benches: number[]; sourceId: number; lots: Map<string, number> }> {
  const at = daysAgo(90.9);
  const context = { actor: cast.admin, at };
  const benches: number[] = [];
  for (const bench of DEMO_BENCHES) benches.push((await addBench(context, bench)).benchId);
  const { sourceId } = await addSource(context, {
    name: 'Reference R-1',
    vacuumNm: 632.9912,
    uNm: 0.00095,
    kind: 'free-running-he-ne',
    isReference: true,
    certificate: 'CIPM 2007, Recommendation 2',
    file: null,
    due: null,
    note: 'Invented unit; the published value of an unstabilised 633 nm laser, u 1.5e-6.',
  });
  const specifications = new Map<string, number>();
  for (const { key, name, nominalNm, half, rule } of DEMO_SPECIFICATIONS) {
    const { specificationId } = await addSpecification(context, {
      name,
      nominalNm,
      medium: 'air',
      lowerNm: nominalNm - half,
      upperNm: nominalNm + half,
      rule,
      ownGuardNm: null,
      ratio: rule === 'simple' ? 1 / 3 : 1,
      halfToleranceNm: null,
    });
    specifications.set(key, specificationId);
  }
  const lots = new Map<string, number>();
  for (const lot of DEMO_LOTS) {
    const by = { actor: cast.technicians[0], at: daysAgo(lot.daysAgo) };
    const { lotId } = await openLot(by, {
      number: lot.number,
      specificationId: specifications.get(lot.specification) ?? 0,
      supplier: lot.supplier,
    });
    await addUnits(by, { lotId, serials: serialsOf(lot) });
    lots.set(lot.number, lotId);
  }
  return { benches, sourceId, lots };
}

async function enterSetup(
  cast: Cast,
  benchId: number,
  setup: (typeof DEMO_SETUPS)[number],
  afterNumber: number,
): Promise<void> {
  const stated = ([value, expanded]: [number, number], due: number) => ({
    value,
    stated: expanded,
    k: 2,
    certificate: CERTIFICATE,
    due: dueIn(due),
  });
  const { setupId } = await addSetup(
    { actor: cast.admin, at: daysAgo(setup.daysAgo, -60) },
    setupSchema.parse({
      benchId,
      afterNumber,
      plate: setup.plate,
      scaleUmPerPx: stated(setup.scaleUmPerPx, setup.dueInDays.scale),
      separationUm: stated(setup.separationUm, setup.dueInDays.plate),
      widthUm: stated(setup.widthUm, setup.dueInDays.plate),
      distanceMm: stated(setup.distanceMm, setup.dueInDays.distance),
      remountNm: { u: 0.058, dof: 29 },
      tone: 'auto',
      camera: setup.camera,
      why: setup.why,
    }),
  );
  if (setup.waits) return;
  await decideSetup(
    { actor: cast.qa, at: daysAgo(setup.daysAgo, -40) },
    { setupId, decision: 'approved', reason: '' },
  );
}

async function fileOf(frame: DemoFrame): Promise<Buffer> {
  if (!('camera' in frame.plan)) return Buffer.from(scanText(frame.plan));
  const { scene, camera, kind, quality } = frame.plan;
  const bytes = await encodeFile(photograph(scene, camera), kind, { quality });
  return frame.cutAt ? bytes.subarray(0, Math.floor(frame.cutAt * bytes.length)) : bytes;
}

interface Fitted {
  readingId: number;
  version: number;
  verdict: string | null;
  unitId: number | null;
}

async function takeFrame(
  cast: Cast,
  frame: DemoFrame,
  benchId: number,
  subject: { lotId: number | null; sourceId: number | null },
): Promise<Fitted | null> {
  const bytes = await fileOf(frame);
  const serial = frame.subject.kind === 'unit' ? frame.subject.serial : null;
  const body = (async function* () {
    yield bytes;
  })();
  const { frameId } = await receiveFrame(
    { actor: cast.technicians[frame.by], at: daysAgo(frame.daysAgo) },
    {
      fileName: frame.fileName,
      benchId,
      ...subject,
      serial,
      detectorMm: 'detectorMm' in frame.plan ? frame.plan.detectorMm : null,
      declaredBytes: bytes.length,
      body,
    },
  );
  await fitFrame({ actor: PRODUCT, at: daysAgo(frame.daysAgo, 0.2) }, frameId);
  const [row] = await select<Fitted>(
    `SELECT r.id AS readingId, s.version, r.verdict, f.unit_id AS unitId
     FROM frames f JOIN readings r ON r.id = f.reading_id JOIN reading_states s ON s.reading_id = r.id WHERE f.id = :frameId`,
    { frameId },
  );
  return row ?? null;
}

async function decide(cast: Cast, frame: DemoFrame, fitted: Fitted, turn: number): Promise<void> {
  if (frame.fate === 'draft' || frame.fate === 'as-it-falls') return;
  const technician = cast.technicians[frame.by];
  const reviewer = cast.reviewers[turn % cast.reviewers.length];
  await sendReading(
    { actor: technician, at: daysAgo(frame.daysAgo, 6) },
    { readingId: fitted.readingId, version: fitted.version, note: '' },
  );
  if (frame.fate === 'review') return;
  const context = { actor: reviewer, at: daysAgo(frame.daysAgo, 50 + (turn % 7) * 11) };
  const version = fitted.version + 1;
  const findings = await findingsOf(fitted.readingId);
  if (frame.fate === 'return' || findings.some((finding) => finding.word === 'stop')) {
    await returnReading(context, {
      readingId: fitted.readingId,
      version,
      reason: 'take-again',
      words: 'Clean the screen and straighten the plate, then take it again.',
    });
    return;
  }
  const answers = findings
    .filter((finding) => finding.word === 'look')
    .map((finding) => ({
      check: finding.check,
      answer: 'accept-as-is' as const,
      reason: 'Seen; it is small against U.',
    }));
  await acceptReading(context, { readingId: fitted.readingId, version, password: DEMO_PASSWORD, answers });
  if (fitted.unitId !== null && fitted.verdict) {
    await setOutcome(
      { ...context, at: daysAgo(frame.daysAgo, 120) },
      { unitId: fitted.unitId, outcome: OUTCOME_OF[fitted.verdict] ?? 'held-for-qa', reason: '' },
    );
  }
}

const OUTCOME_OF: Record<string, Outcome> = {
  within: 'passed-on',
  undecided: 'measure-again',
  outside: 'sent-back',
  'no-verdict': 'held-for-qa',
};

async function findingsOf(readingId: number): Promise<FitResult['findings']> {
  const row = await db().tables.readingResults.findByPk(readingId, { rejectOnEmpty: true });
  return (JSON.parse(row.resultJson) as FitResult).findings;
}

async function main(): Promise<void> {
  const [found] = await select<{ many: number }>('SELECT COUNT(*) AS many FROM people');
  if (found.many > 0)
    throw new Error('The demo goes into an empty database only; this one has people in it.');
  const cast = await people();
  const { benches, sourceId, lots } = await constants(cast);
  const setups = [...DEMO_SETUPS].sort((a, b) => b.daysAgo - a.daysAgo);
  const numbers = benches.map(() => 0);
  const frames = demoFrames();
  for (const [turn, frame] of frames.entries()) {
    while (setups.length > 0 && setups[0].daysAgo >= frame.daysAgo) {
      const setup = setups.shift()!;
      await enterSetup(cast, benches[setup.bench], setup, numbers[setup.bench]);
      numbers[setup.bench] += 1;
    }
    const subject =
      frame.subject.kind === 'source'
        ? { lotId: null, sourceId }
        : { lotId: lots.get(frame.subject.lot) ?? null, sourceId: null };
    const fitted = await takeFrame(cast, frame, benches[frame.bench], subject);
    if (fitted) await decide(cast, frame, fitted, turn);
    if (turn % 20 === 19) console.log(`  ${turn + 1} of ${frames.length} demo frames taken and fitted`);
  }
  for (const setup of setups) {
    await enterSetup(cast, benches[setup.bench], setup, numbers[setup.bench]);
    numbers[setup.bench] += 1;
  }
  // One mail in the developer's mail page, the way a forgotten password sends it.
  await askReset(
    { actor: PRODUCT, at: daysAgo(0.5) },
    { email: DEMO_PEOPLE[2].email, site: env().NEXTAUTH_URL.replace(/\/$/, '') },
  );
}

main()
  .then(
    () => console.log('The invented demo is in.'),
    (error: unknown) => {
      console.error(error instanceof Error ? error.message : error);
      process.exitCode = 1;
    },
  )
  .finally(async () => {
    await closePool();
    await closeDatabase();
  });
