import 'server-only';
import type { Transaction } from 'sequelize';
import type { Role } from '@/lib/domain/roles';
import { select } from './db';
import { env } from './env';

export interface Addressee {
  id: number;
  name: string;
  email: string;
}

/** Everybody who may sign in and holds one of these roles. */
export function peopleWith(roles: readonly Role[], transaction?: Transaction): Promise<Addressee[]> {
  return select<Addressee>(
    `SELECT DISTINCT p.id, p.name, p.email FROM people p JOIN person_roles r ON r.person_id = p.id
     WHERE p.active AND r.role IN (:roles) ORDER BY p.id`,
    { roles },
    transaction,
  );
}

/** A page of the product as a mail names it. */
export function pageAddress(path: string): string {
  return `${env().NEXTAUTH_URL.replace(/\/$/, '')}${path}`;
}

/** A mail in plain text: greeting, paragraphs, and where to look. */
export function mailText(name: string, paragraphs: readonly string[], path: string): string {
  return [`Hello ${name},`, ...paragraphs, pageAddress(path)].join('\n\n');
}
