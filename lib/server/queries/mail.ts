import 'server-only';
import { readdir, readFile } from 'node:fs/promises';
import path from 'node:path';
import { env } from '../env';

export interface FakeMail {
  id: string;
  to: string;
  subject: string;
  at: string;
  text: string;
  links: string[];
}

const MOST_MAILS = 200;

/** The mails the local mail fake has kept, newest first; null when a real mail server is used. */
export async function listFakeMails(): Promise<FakeMail[] | null> {
  const folder = env().MAIL_FOLDER;
  if (!folder) return null;
  const names = (await readdir(folder)).filter((name) => name.endsWith('.json')).sort();
  const newest = names.slice(-MOST_MAILS).reverse();
  return Promise.all(
    newest.map(async (name) => JSON.parse(await readFile(path.join(folder, name), 'utf8')) as FakeMail),
  );
}
