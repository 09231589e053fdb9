import 'server-only';
import { DUE_SOON_DAYS, daysUntil, dueOf } from '@/lib/domain/due';
import { SETUP_VALUES } from '@/lib/domain/setup';
import { db } from '../db';
import { fourValues } from '../setups';
import { setupAt } from '../setup-timeline';
import { listPlates } from './plates';

export interface DueItem {
  /** "Bench 2, setup 3: distance" */
  what: string;
  /** "due 21 Dec 2026, in 9 days" */
  when: string;
  days: number;
}

/**
 * Everything certified that is overdue or due within 14 days, the most urgent first: the values in force on each bench,
 * plates on no bench, and references.
 */
export async function listDue(at: Date): Promise<DueItem[]> {
  const found: { what: string; due: string | null }[] = [
    ...(await ofBenches(at)),
    ...(await listPlates(at))
      .filter(({ mountedOn }) => mountedOn === null)
      .map(({ name, certificates }) => ({ what: `Plate ${name}: certificate`, due: certificates[0].due })),
    ...(await db().tables.sources.findAll({ where: { isReference: true } })).map(({ name, due }) => ({
      what: `${name}: certificate`,
      due,
    })),
  ];
  return found
    .flatMap(({ what, due }): DueItem[] => {
      if (due === null) return [];
      const { text } = dueOf(due, at);
      return [{ what, when: text[0].toLowerCase() + text.slice(1), days: daysUntil(due, at) }];
    })
    .filter(({ days }) => days <= DUE_SOON_DAYS)
    .sort((a, b) => a.days - b.days || a.what.localeCompare(b.what));
}

async function ofBenches(at: Date): Promise<{ what: string; due: string | null }[]> {
  const { tables } = db();
  const benches = await tables.benches.findAll({ order: [['name', 'ASC']] });
  const lists = await Promise.all(
    benches.map(async ({ id, name }) => {
      const inForce = await setupAt(id, at);
      if (!inForce) return [];
      const setup = await tables.setups.findByPk(inForce.id, { rejectOnEmpty: true });
      const four = fourValues(setup);
      return SETUP_VALUES.map((value) => ({
        what: `${name}, setup ${setup.number}: ${value.name.toLowerCase()}`,
        due: four[value.key].due,
      }));
    }),
  );
  return lists.flat();
}
