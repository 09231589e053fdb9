import 'server-only';
import type { CommentView } from '@/lib/domain/comment';
import type { PersonRef } from '@/lib/domain/views';
import { select } from '../db';

interface Row {
  id: number;
  number: number;
  words: string;
  made_by: number;
  name: string;
  made_at: Date;
}

/** Everything said about the readings of a frame, oldest first. */
export async function commentsOf(frameId: number): Promise<CommentView[]> {
  const rows = await select<Row>(
    `SELECT c.id, r.number, c.words, c.made_by, p.name, c.made_at FROM comments c
     JOIN readings r ON r.id = c.reading_id JOIN people p ON p.id = c.made_by
     WHERE r.frame_id = :frameId ORDER BY c.id`,
    { frameId },
  );
  return rows.map(({ id, number, words, made_by: byId, name, made_at: at }) => ({
    id,
    reading: number,
    words,
    by: { id: byId, name },
    at: at.toISOString(),
  }));
}

/** Everyone who can be named. */
export function listNames(): Promise<PersonRef[]> {
  return select<PersonRef>('SELECT id, name FROM people WHERE active ORDER BY name');
}
