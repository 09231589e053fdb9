import 'server-only';
import { env } from './env';

/** The address of a page as people open it, for mails. */
export function pageAddress(path: string): string {
  return `${env().NEXTAUTH_URL.replace(/\/$/, '')}${path}`;
}
