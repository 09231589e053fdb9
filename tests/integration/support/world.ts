import type { z } from 'zod';
import type { Role } from '@/lib/domain/roles';
import { plateSchema, setupSchema } from '@/lib/domain/setup-schemas';
import { closeDatabase } from '@/lib/server/db';
import { addBench } from '@/lib/server/commands/add-bench';
import { addPerson } from '@/lib/server/commands/add-person';
import { addPlate } from '@/lib/server/commands/add-plate';
import { addSetup } from '@/lib/server/commands/add-setup';
import { decideSetup } from '@/lib/server/commands/decide-setup';
import { addSource } from '@/lib/server/commands/add-source';
import { addSpecification } from '@/lib/server/commands/add-specification';
import { addUnits, openLot } from '@/lib/server/commands/open-lot';
import { PRODUCT, type CommandContext } from '@/lib/server/context';
import { closePool } from '@/lib/server/measure-pool';
import { closeOwner, emptyDatabase } from './database';

/** An invented room: one bench with a setup, one lot with units, one source, and a person for every part. */
export interface World {
  people: Record<Who, Person>;
  benchId: number;
  setupId: number;
  /** The plate its setup picks, as a setup names it. */
  plate: { plateId: number; plateCertificateId: number };
  lotId: number;
  specificationId: number;
  unitIds: number[];
  sourceId: number;
}

export interface Person {
  id: number;
  name: string;
  email: string;
  roles: Role[];
}

export const PEOPLE = {
  admin: ['admin'],
  technician: ['technician'],
  technician2: ['technician'],
  reviewer: ['reviewer'],
  reviewer2: ['reviewer'],
  both: ['technician', 'reviewer'],
  qa: ['qa'],
  auditor: ['auditor'],
  nobody: [],
} as const satisfies Record<string, readonly Role[]>;
export type Who = keyof typeof PEOPLE;

export const PASSWORD = 'a long enough password';
export const NOW = new Date('2026-11-20T08:00:00.000Z');

export function as(person: Person, at = NOW): CommandContext {
  return { actor: person, at };
}

export const PLATE = {
  name: 'P-1',
  note: '',
  separationUm: { value: 250, stated: 0.4 },
  widthUm: { value: 50, stated: 0.6 },
  certificate: 'Invented C-2',
  due: '2027-06-01',
};

/** What a setup of the bench states beside its plate. */
export const SETUP = {
  scaleUmPerPx: { value: 6.9, stated: 0.002, k: 2, certificate: 'Invented C-1', due: '2027-06-01' },
  distanceMm: { value: 300, stated: 0.4, k: 2, certificate: 'Invented C-3', due: null },
  remountNm: null,
  tone: 'auto' as const,
  why: 'First setup.',
};

/** Before anything else happens here, whatever the clock of the machine says. */
const LONG_AGO = new Date('2020-01-06T08:00:00.000Z');

/** Entered by the admin and approved by QA at one moment. */
export async function putInForce(
  people: Pick<World['people'], 'admin' | 'qa'>,
  setup: z.input<typeof setupSchema>,
  at = NOW,
): Promise<number> {
  const { setupId } = await addSetup(as(people.admin, at), setupSchema.parse(setup));
  await decideSetup(as(people.qa, at), { setupId, decision: 'approved', reason: '' });
  return setupId;
}

export async function makeWorld(): Promise<World> {
  await emptyDatabase();
  const people = {} as Record<Who, Person>;
  for (const who of Object.keys(PEOPLE) as Who[]) {
    const person = {
      name: `Invented ${who}`,
      email: `${who.toLowerCase()}@test.example`,
      roles: [...PEOPLE[who]] as Role[],
    };
    const { personId } = await addPerson({ actor: PRODUCT, at: NOW }, { ...person, password: PASSWORD });
    people[who] = { ...person, id: personId };
  }
  const admin = as(people.admin);
  const { benchId } = await addBench(admin, { name: 'Bench T', note: 'Invented.' });
  const { plateId, certificateId } = await addPlate(as(people.admin, LONG_AGO), plateSchema.parse(PLATE));
  const plate = { plateId, plateCertificateId: certificateId };
  const setupId = await putInForce(people, { ...SETUP, ...plate, benchId, afterNumber: 0 }, LONG_AGO);
  const { specificationId } = await addSpecification(admin, {
    name: 'Invented 635 nm',
    nominalNm: 635,
    medium: 'air',
    lowerNm: 630,
    upperNm: 640,
    rule: 'guard-expanded',
    ownGuardNm: null,
    ratio: null,
    halfToleranceNm: null,
  });
  const { lotId } = await openLot(admin, { number: '0931', specificationId, supplier: 'Invented Ltd' });
  await addUnits(admin, { lotId, serials: ['A1', 'A2', 'A3', 'A4', 'A5', 'A6'] });
  const { sourceId } = await addSource(admin, {
    name: 'Invented reference',
    vacuumNm: 632.991,
    uNm: 0.001,
    kind: 'stabilised-laser',
    isReference: true,
    certificate: 'Invented C-9',
    file: null,
    due: null,
    note: '',
  });
  const { db } = await import('@/lib/server/db');
  // The mails about the setup are not what the tests look for.
  await db().tables.outbox.destroy({ where: {} });
  const units = await db().tables.units.findAll({ where: { lotId }, order: [['id', 'ASC']] });
  return {
    people,
    benchId,
    setupId,
    plate,
    lotId,
    specificationId,
    unitIds: units.map(({ id }) => id),
    sourceId,
  };
}

/** For afterAll: nothing of the product may keep the test's process open. */
export async function closeWorld(): Promise<void> {
  await closePool();
  await closeDatabase();
  await closeOwner();
}
