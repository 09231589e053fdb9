import type { Role } from './roles';

/** Who acts. `null` roles list means nobody is signed in. */
export interface Actor {
  id: number;
  roles: readonly Role[];
}

/** What bears on a decision about one reading. */
export interface ReadingSubject {
  /** Who uploaded the frame. */
  uploadedBy: number;
  /** Who sent the reading (or any it replaces) to review; null while it is a draft. */
  sentBy: number | null;
  /** Everyone who made a fit of this frame before it was sent to review. */
  fittedBeforeSending: readonly number[];
}

/** One table: action -> roles that hold it. Anything not listed is refused. */
export const PERMISSIONS = {
  'frames.see': ['technician', 'reviewer', 'qa', 'admin', 'auditor'],
  'frames.upload': ['technician'],
  'readings.fit': ['technician', 'reviewer'],
  'readings.send': ['technician'],
  'readings.accept': ['reviewer'],
  'readings.return': ['reviewer'],
  'comments.add': ['technician', 'reviewer', 'qa', 'admin'],
  'readings.choose': ['reviewer', 'qa'],
  'readings.withdraw': ['reviewer', 'qa'],
  'outcomes.set': ['reviewer', 'qa'],
  'lots.see': ['technician', 'reviewer', 'qa', 'admin', 'auditor'],
  'lots.open': ['technician', 'admin'],
  'units.add': ['technician', 'admin'],
  'specifications.add': ['admin', 'qa'],
  'benches.see': ['technician', 'reviewer', 'qa', 'admin', 'auditor'],
  'benches.add': ['admin'],
  'setups.add': ['admin'],
  'setups.decide': ['qa'],
  'plates.see': ['technician', 'reviewer', 'qa', 'admin'],
  'plates.change': ['admin', 'qa'],
  'certificates.see': ['technician', 'reviewer', 'qa', 'admin', 'auditor'],
  'certificates.add': ['admin', 'qa'],
  'sources.add': ['admin', 'qa'],
  'benches.release': ['qa'],
  'conditions.enter': ['technician', 'qa', 'admin'],
  'charts.see': ['technician', 'reviewer', 'qa', 'admin', 'auditor'],
  'people.see': ['admin'],
  'people.change': ['admin'],
  'log.see': ['qa', 'admin', 'auditor'],
  'withdrawals.see': ['reviewer', 'qa', 'auditor'],
} as const satisfies Record<string, readonly Role[]>;

export type Action = keyof typeof PERMISSIONS;

/**
 * May this person do this? Unknown action: no. With a reading as the subject, accepting is also barred to
 * whoever had a hand in it before it came to review, whatever other roles they hold.
 */
export function can(actor: Actor | null, action: string, subject?: ReadingSubject): boolean {
  if (!actor) return false;
  if (!Object.hasOwn(PERMISSIONS, action)) return false;
  const holders: readonly Role[] = PERMISSIONS[action as Action];
  if (!holders.some((role) => actor.roles.includes(role))) return false;
  if (action === 'readings.accept' && subject) return barredFromAccepting(actor.id, subject) === null;
  return true;
}

/** Why this person cannot accept the reading, or null when nothing bars them. */
export function barredFromAccepting(
  personId: number,
  subject: ReadingSubject,
): 'uploaded' | 'sent' | 'fitted' | null {
  if (subject.uploadedBy === personId) return 'uploaded';
  if (subject.sentBy === personId) return 'sent';
  if (subject.fittedBeforeSending.includes(personId)) return 'fitted';
  return null;
}
