import 'server-only';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';
import { select } from './db';
import { describe, log } from './log';
import { storeAnswers } from './storage';

export async function health(): Promise<{ ok: boolean; database: boolean; store: boolean; engine: string }> {
  const database = await select('SELECT 1 AS one').then(
    () => true,
    (problem: unknown) => {
      log().error({ problem: describe(problem) }, 'the database does not answer');
      return false;
    },
  );
  const store = await storeAnswers();
  return { ok: database && store, database, store, engine: ENGINE_VERSION };
}
