/**
 * Checks the log's chain of hashes against the rows, the head and the daily anchors. One sentence on stdout; exit code
 * 0 when it is whole, 1 when it is not, 2 when it could not be read.
 */
import { verifyChain } from '@/lib/server/audit';
import { closeDatabase } from '@/lib/server/db';

async function main(): Promise<number> {
  const answer = await verifyChain();
  if (answer.whole) {
    console.log(`The log is whole: ${answer.rows} rows, ${answer.anchors} daily anchors.`);
    return 0;
  }
  console.log(`The log is broken at row ${answer.brokenAt}: ${answer.because} ${answer.rows} rows read.`);
  return 1;
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
  .finally(() => closeDatabase());
