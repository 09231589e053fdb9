import 'server-only';
import type { ConfirmedValue } from '@/lib/domain/setup';
import type {
  CertificateLink,
  PersonRef,
  PlateCertificateView,
  PlateView,
  StatedValue,
} from '@/lib/domain/views';
import type { PlateCertificate } from '@/models/plate-certificate';
import { db, select } from '../db';
import { EVER_IN_FORCE, IN_FORCE_FROM } from '../setup-timeline';
import { certificateLinks } from './certificates';

interface MountRow {
  plate_id: number;
  bench_id: number;
  bench: string;
  from_at: Date;
  to_at: Date | null;
}

/** Every slit plate by name, with its certificates and where it was and is. */
export async function listPlates(now = new Date()): Promise<PlateView[]> {
  const { tables } = db();
  const [plates, certificates, people, mounts, named] = await Promise.all([
    tables.plates.findAll({ order: [['name', 'ASC']] }),
    tables.plateCertificates.findAll({ order: [['number', 'DESC']] }),
    select<PersonRef>(
      'SELECT DISTINCT p.id, p.name FROM people p JOIN plate_certificates c ON c.entered_by = p.id',
    ),
    select<MountRow>(
      `SELECT m.plate_id, m.bench_id, b.name AS bench, m.from_at, m.to_at FROM plate_mounts m
       JOIN benches b ON b.id = m.bench_id WHERE m.to_at IS NULL OR m.to_at > m.from_at ORDER BY m.from_at`,
    ),
    plateOfEachBench(now),
  ]);
  const files = await certificateLinks(certificates.map(({ file }) => file));
  const nameOf = new Map(people.map(({ id, name }) => [id, name]));
  return plates.map((plate) => {
    const own = joined(mounts.filter((mount) => mount.plate_id === plate.id));
    const isNow = (mount: MountRow) => mount.from_at <= now && (mount.to_at === null || mount.to_at > now);
    const here = own.find(isNow);
    return {
      id: plate.id,
      name: plate.name,
      note: plate.note,
      certificates: certificates
        .filter((certificate) => certificate.plateId === plate.id)
        .map((row) => certificateView(row, files, nameOf)),
      mountedOn: here
        ? { bench: { id: here.bench_id, name: here.bench }, since: here.from_at.toISOString() }
        : null,
      missedBy: named
        .filter(({ plate_id, id }) => plate_id === plate.id && here?.bench_id !== id)
        .map(({ id, name }) => ({ id, name })),
      mounts: own
        .map((mount) => ({
          bench: { id: mount.bench_id, name: mount.bench },
          from: mount.from_at.toISOString(),
          to: mount.to_at?.toISOString() ?? null,
        }))
        .reverse(),
    };
  });
}

/** The plate named by the setup in force of each bench. */
function plateOfEachBench(now: Date): Promise<{ id: number; name: string; plate_id: number }[]> {
  return select(
    `SELECT b.id, b.name, x.plate_id FROM benches b JOIN setup_plates x ON x.setup_id = (
       SELECT s.id FROM setups s LEFT JOIN setup_decisions d ON d.setup_id = s.id
       WHERE s.bench_id = b.id AND ${EVER_IN_FORCE} AND ${IN_FORCE_FROM} <= :now
       ORDER BY ${IN_FORCE_FROM} DESC, s.number DESC LIMIT 1)`,
    { now },
  );
}

/** Each setup mounts its plate anew; stays on one bench that follow each other are one. */
function joined(mounts: readonly MountRow[]): MountRow[] {
  const out: MountRow[] = [];
  for (const mount of mounts) {
    const last = out.at(-1);
    if (last && last.bench_id === mount.bench_id && last.to_at?.getTime() === mount.from_at.getTime())
      last.to_at = mount.to_at;
    else out.push({ ...mount });
  }
  return out;
}

function certificateView(
  row: PlateCertificate,
  files: Map<string, CertificateLink>,
  nameOf: Map<number, string>,
): PlateCertificateView {
  const { certificate, due } = row;
  const file = row.file === null ? null : (files.get(row.file) ?? null);
  const stated = (name: 'separation' | 'width'): StatedValue => ({
    value: row[`${name}Um`],
    stated: row[`${name}Stated`],
    shape: row[`${name}Shape`],
    k: row[`${name}K`],
    dof: row[`${name}Dof`],
    u: row[`${name}Stated`] / row[`${name}K`],
    certificate,
    file,
    due,
  });
  return {
    id: row.id,
    number: row.number,
    separationUm: stated('separation'),
    widthUm: stated('width'),
    certificate,
    file,
    due,
    confirmed: JSON.parse(row.confirmedJson) as ConfirmedValue[],
    enteredBy: { id: row.enteredBy, name: nameOf.get(row.enteredBy) ?? '' },
    enteredAt: row.enteredAt.toISOString(),
  };
}
