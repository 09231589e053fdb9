import 'server-only';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { BenchChoice, BenchView } from '@/lib/domain/views';
import { db, select } from '../db';
import { fitnessWithChecks, standingOf } from '../reference-checks';
import { fitnessOf } from '../setups';
import { setupViews } from './setup-views';

/** The wavelength a bench without accepted readings is drawn with, nm. */
const EXAMPLE_NM = 635;

async function newestSetup(benchId: number) {
  return db().tables.setups.findOne({ where: { benchId }, order: [['number', 'DESC']] });
}

export async function listBenchChoices(now = new Date()): Promise<BenchChoice[]> {
  const benches = await db().tables.benches.findAll({ order: [['name', 'ASC']] });
  return Promise.all(
    benches.map(async ({ id, name }) => {
      const setup = await newestSetup(id);
      const fitness = fitnessWithChecks(fitnessOf(setup, now), await standingOf(id));
      return { id, name, setupNumber: setup?.number ?? null, fitness };
    }),
  );
}

export async function findBench(id: number, now = new Date()): Promise<BenchView | null> {
  const bench = await db().tables.benches.findByPk(id);
  if (!bench) return null;
  const setup = await newestSetup(id);
  const setups = await setupViews(id);
  const [last] = await select<{ nm: number }>(
    `SELECT r.wavelength_air_nm AS nm FROM reading_states st JOIN readings r ON r.id = st.reading_id
     WHERE st.bench_id = :id AND st.status = :accepted ORDER BY st.accepted_at DESC LIMIT 1`,
    { id, accepted: READING_STEPS.accept.to },
  );
  return {
    id,
    name: bench.name,
    note: bench.note,
    setupNumber: setup?.number ?? null,
    fitness: fitnessWithChecks(fitnessOf(setup, now), await standingOf(id)),
    inForce: setups[0] ?? null,
    setups,
    drawNm: last?.nm ?? EXAMPLE_NM,
    drawnFrom: last ? 'reading' : 'example',
  };
}
