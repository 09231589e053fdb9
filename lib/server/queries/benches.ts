import 'server-only';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { BenchChoice, BenchView, SetupView } from '@/lib/domain/views';
import type { PlateCertificate } from '@/models/plate-certificate';
import { db, select } from '../db';
import { isMounted } from '../plate-mounts';
import { fitnessWithChecks, standingOf } from '../reference-checks';
import { fitnessOf } from '../setups';
import { setupAt, waitingNumber } from '../setup-timeline';
import { correctionView } from './corrections';
import { setupHistory } from './setup-views';

/** The wavelength a bench without accepted readings is drawn with, nm. */
const EXAMPLE_NM = 635;

async function choiceOf(bench: { id: number; name: string }, now: Date): Promise<BenchChoice> {
  const [inForce, waiting] = await Promise.all([setupAt(bench.id, now), waitingNumber(bench.id)]);
  const setup = inForce ? await db().tables.setups.findByPk(inForce.id) : null;
  return {
    id: bench.id,
    name: bench.name,
    setupNumber: setup?.number ?? null,
    fitness: fitnessWithChecks(
      fitnessOf(setup, now, setup ? await isMounted(bench.id, setup.id, now) : true),
      await standingOf(bench.id),
    ),
    waitingNumber: waiting,
  };
}

export async function listBenchChoices(now = new Date()): Promise<BenchChoice[]> {
  const benches = await db().tables.benches.findAll({ order: [['name', 'ASC']] });
  return Promise.all(benches.map((bench) => choiceOf(bench, now)));
}

export async function findBench(id: number, now = new Date()): Promise<BenchView | null> {
  const bench = await db().tables.benches.findByPk(id);
  if (!bench) return null;
  const [choice, history] = await Promise.all([choiceOf(bench, now), setupHistory(id, now)]);
  const [last] = await select<{ nm: number }>(
    `SELECT r.wavelength_air_nm AS nm FROM reading_states st JOIN readings r ON r.id = st.reading_id
     WHERE st.bench_id = :id AND st.status = :accepted ORDER BY st.accepted_at DESC LIMIT 1`,
    { id, accepted: READING_STEPS.accept.to },
  );
  const [picture] = await select<{ width_px: number }>(
    'SELECT width_px FROM frames WHERE bench_id = :id AND width_px IS NOT NULL ORDER BY id DESC LIMIT 1',
    { id },
  );
  const inForce = history.setups.find(({ from }) => new Date(from) <= now) ?? null;
  return {
    ...choice,
    ...history,
    note: bench.note,
    inForce,
    correction: history.waiting ? await correctionView(history.waiting.id) : null,
    newerCertificate: inForce ? await hasNewerCertificate(inForce) : false,
    pictureWidthPx: picture?.width_px ?? null,
    drawNm: last?.nm ?? EXAMPLE_NM,
    drawnFrom: last ? 'reading' : 'example',
  };
}

async function hasNewerCertificate({ plateId, plateRevision }: SetupView): Promise<boolean> {
  const newest = await db().tables.plateCertificates.max<number, PlateCertificate>('number', {
    where: { plateId },
  });
  return newest > plateRevision;
}
