import 'server-only';
import { LIMITS } from '@/lib/domain/limits';

/** A page within what there is: a page too far shows the last one. */
export function pageOf(
  total: number,
  wanted: number,
): { page: number; pages: number; offset: number; rows: number } {
  const rows = LIMITS.pageRows;
  const pages = Math.max(1, Math.ceil(total / rows));
  const page = Math.min(Math.max(1, Math.trunc(wanted) || 1), pages);
  return { page, pages, offset: (page - 1) * rows, rows };
}

/** A typed text as a LIKE pattern that finds it anywhere, its own % and _ taken as they are. */
export function contains(text: string): string {
  return `%${text.trim().replace(/[\\%_]/g, (sign) => `\\${sign}`)}%`;
}
