/**
 * Computes every signed reading again from its stored bytes, options and setup and compares the digits. Reads only.
 * Exit code 0 when every reading of this engine agrees, 1 when one does not, 2 when it could not be done.
 */
import { ENGINE_VERSION } from '@/lib/measure/engine-version';
import { closeDatabase } from '@/lib/server/db';
import { closePool } from '@/lib/server/measure-pool';
import { replayReadings, type Replayed } from '@/lib/server/replay';

async function main(): Promise<number> {
  const done: Replayed[] = [];
  for await (const one of replayReadings()) {
    done.push(one);
    if (one.outcome !== 'same')
      console.log(`Reading ${one.readingId} (${one.name}, engine ${one.engine}): ${one.because}`);
  }
  const many = (outcome: Replayed['outcome']) => done.filter((one) => one.outcome === outcome).length;
  const engines = [...new Set(done.map(({ engine }) => engine))].filter(
    (engine) => engine !== ENGINE_VERSION,
  );
  const older = done.filter(({ engine }) => engine !== ENGINE_VERSION).length;
  console.log(
    `${done.length} signed readings computed again with engine ${ENGINE_VERSION}: ${many('same')} agree in every digit, ${many('wrong')} do not.`,
  );
  if (older)
    console.log(
      `${older} were made by another engine (${engines.join(', ')}); ${many('other')} of them give other digits now.`,
    );
  return many('wrong') ? 1 : 0;
}

main()
  .then(
    (code) => {
      process.exitCode = code;
    },
    (problem: unknown) => {
      console.error(problem instanceof Error ? problem.message : problem);
      process.exitCode = 2;
    },
  )
  .finally(async () => {
    await closePool();
    await closeDatabase();
  });
