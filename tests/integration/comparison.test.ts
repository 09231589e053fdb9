import { addSpecification } from '@/lib/server/commands/add-specification';
import { addUnits, openLot } from '@/lib/server/commands/open-lot';
import { setBenchRule } from '@/lib/server/commands/release-bench';
import { findFrame } from '@/lib/server/queries/frames';
import { airFromVacuum } from '@/lib/quantity/air-index';
import { inventedResult, makeReading } from './support/readings';
import { acceptReference } from './support/references';
import { as, closeWorld, makeWorld, type World } from './support/world';

/** Spacing the reference has on this bench, px; a unit of the same light has the same. */
const REFERENCE_PX = 110.4;
const REFERENCE_AIR = airFromVacuum(632.991);

let world: World;

beforeAll(async () => {
  world = await makeWorld();
});
afterAll(closeWorld);

async function unitReading(unit: number, spacingPx: number, lot = world) {
  const { frameId } = await makeReading(
    lot,
    as(world.people.technician, new Date()),
    unit,
    inventedResult({ spacingPx, wavelengthNm: 634.8, wavelengthVacuumNm: 634.9755 }),
  );
  const shown = (await findFrame(frameId, null))?.shown;
  if (!shown) throw new Error('The frame has no reading.');
  return shown;
}

const ask = (method: 'absolute' | 'comparison') =>
  setBenchRule(as(world.people.qa, new Date()), {
    benchId: world.benchId,
    limitNm: null,
    method,
    why: 'Agreed.',
  });

test('asked for without a reference: the constants count, and it says why', async () => {
  await ask('comparison');
  const shown = await unitReading(0, REFERENCE_PX);
  expect(shown).toMatchObject({ method: 'absolute', wavelengthNm: 634.8, other: null });
  expect(shown.corrections.join(' ')).toContain('No accepted reference reading');
});

test('beside accepted references of the setup, with mounting again from their scatter', async () => {
  // Seven checks: six degrees of freedom for mounting again.
  for (const off of [0.05, -0.05, 0.1, -0.1, 0, 0.02, -0.02])
    await acceptReference(world, off, world.setupId, { spacingPx: REFERENCE_PX, uSpacingPx: 0.005 });
  const shown = await unitReading(1, REFERENCE_PX * 1.003);
  expect(shown.method).toBe('comparison');
  expect(shown.wavelengthNm).toBeCloseTo(REFERENCE_AIR * 1.003, 4);
  expect(shown.other).toMatchObject({ method: 'absolute', valueNm: 634.8, expandedNm: 0.7 });
  expect(shown.budget.map(({ key }) => key)).toEqual(
    expect.arrayContaining(['fit', 'reference-fit-1', 'remount']),
  );
  expect(shown.budget.find(({ key }) => key === 'remount')).toMatchObject({ dof: 6 });
  expect(shown.expandedNm).toBeLessThan(0.4);
});

test('the bench’s constants again: the comparison stays beside', async () => {
  await ask('absolute');
  const shown = await unitReading(2, REFERENCE_PX);
  expect(shown).toMatchObject({ method: 'absolute', wavelengthNm: 634.8 });
  expect(shown.other).toMatchObject({ method: 'comparison' });
  expect(shown.other?.valueNm).toBeCloseTo(REFERENCE_AIR, 4);
});

test('a specification’s own method goes before the bench’s', async () => {
  const admin = as(world.people.admin);
  const { specificationId } = await addSpecification(admin, {
    name: 'Invented, compared',
    nominalNm: 633,
    medium: 'vacuum',
    lowerNm: 632,
    upperNm: 634,
    rule: 'guard-expanded',
    ownGuardNm: null,
    ratio: null,
    halfToleranceNm: null,
    method: 'comparison',
  });
  const { lotId } = await openLot(admin, { number: '0998', specificationId, supplier: '' });
  const { unitIds } = await addUnits(admin, { lotId, serials: ['V1'] }).then(async () => {
    const { db } = await import('@/lib/server/db');
    const units = await db().tables.units.findAll({ where: { lotId } });
    return { unitIds: units.map(({ id }) => id) };
  });
  const shown = await unitReading(0, REFERENCE_PX, { ...world, lotId, unitIds });
  expect(shown).toMatchObject({ method: 'comparison', medium: 'vacuum' });
  expect(shown.wavelengthNm).toBeCloseTo(632.991, 4);
  expect(shown.judgement?.verdict).toBe('within');
});
