import 'server-only';
import type { Role } from '@/lib/domain/roles';
import type { PersonRow } from '@/lib/domain/views';
import { select } from '../db';

interface Row {
  id: number;
  name: string;
  email: string;
  active: number;
  last_sign_in_at: Date | null;
  created_at: Date;
  access_until: Date | null;
  roles: string | null;
}

export async function listPeople(): Promise<PersonRow[]> {
  const rows = await select<Row>(
    `SELECT p.id, p.name, p.email, p.active, p.last_sign_in_at, p.created_at, p.access_until,
       GROUP_CONCAT(r.role ORDER BY FIELD(r.role, 'technician', 'reviewer', 'qa', 'admin', 'auditor')) AS roles
     FROM people p LEFT JOIN person_roles r ON r.person_id = p.id GROUP BY p.id ORDER BY p.active DESC, p.name`,
  );
  return rows.map((row) => ({
    id: row.id,
    name: row.name,
    email: row.email,
    roles: row.roles ? (row.roles.split(',') as Role[]) : [],
    active: Boolean(row.active),
    lastSignInAt: row.last_sign_in_at?.toISOString() ?? null,
    createdAt: row.created_at.toISOString(),
    accessUntil: row.access_until?.toISOString() ?? null,
  }));
}

/** False only on an empty installation, whose first visit makes the first admin. */
export async function anyPeople(): Promise<boolean> {
  const [found] = await select<{ any_people: number }>('SELECT EXISTS (SELECT 1 FROM people) AS any_people');
  return Boolean(found.any_people);
}

/** Do this person's notices come together once a day? */
export async function hasDailyMail(personId: number): Promise<boolean> {
  const [row] = await select<{ mail_daily: number }>('SELECT mail_daily FROM people WHERE id = :personId', {
    personId,
  });
  return Boolean(row?.mail_daily);
}
