import { can, type Action } from '@/lib/domain/permissions';
import type { Me } from '@/lib/domain/views';

export interface Place {
  href: string;
  word: string;
}

/** Three places stand before the mark and three after it. */
export const BEFORE: readonly Place[] = [
  { href: '/intake', word: 'Intake' },
  { href: '/frames', word: 'Frames' },
  { href: '/review', word: 'Review' },
];
export const AFTER: readonly Place[] = [
  { href: '/lots', word: 'Lots' },
  { href: '/over-time', word: 'Over time' },
  { href: '/benches', word: 'Benches' },
];

const IN_MENU: readonly (Place & { needs: Action })[] = [
  { href: '/specifications', word: 'Specifications', needs: 'lots.see' },
  { href: '/sources', word: 'Sources', needs: 'charts.see' },
  { href: '/withdrawals', word: 'Withdrawals', needs: 'withdrawals.see' },
  { href: '/people', word: 'People', needs: 'people.see' },
  { href: '/log', word: 'Log', needs: 'log.see' },
];

/** Places in the person menu, as the roles allow. The mail page exists only beside the local mail server. */
export function menuPlaces(me: Me, mailPage: boolean): Place[] {
  const open = IN_MENU.filter((place) => can(me, place.needs)).map(({ href, word }) => ({ href, word }));
  const own = [...open, { href: '/your-mail', word: 'Your mail' }];
  return mailPage ? [...own, { href: '/mail', word: 'Developer mail' }] : own;
}

export function isAt(path: string, place: Place): boolean {
  return path === place.href || path.startsWith(`${place.href}/`);
}

/** Where a person's work starts. */
export function homeOf(me: Me): string {
  if (me.roles.includes('technician')) return '/intake';
  if (me.roles.includes('reviewer')) return '/review';
  if (me.roles.includes('qa')) return '/over-time';
  if (me.roles.includes('auditor')) return '/frames';
  return '/benches';
}
