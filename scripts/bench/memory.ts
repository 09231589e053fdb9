/**
 * A process of its own: analyses one file and prints the peak of its memory above idle, in bytes. Idle is after an analysis
 * of a small frame, when everything is loaded.
 */
import { readFile, writeFile } from 'node:fs/promises';
import path from 'node:path';
import type { SetupValues } from '@/lib/domain/reading-result';
import { analyseFrame } from '@/lib/measure/analyse-frame';

const WARM_UP = path.join(process.cwd(), 'fixtures', 'frames', 'photo.jpg');

/** Peak of the resident memory since it was last forgotten, bytes. Source: proc(5), VmHWM. */
async function peakBytes(): Promise<number> {
  const status = await readFile('/proc/self/status', 'utf8').catch(() => '');
  const line = /VmHWM:\s*(\d+) kB/.exec(status);
  return 1024 * (line ? Number(line[1]) : process.resourceUsage().maxRSS);
}

async function main(file: string, setup: SetupValues): Promise<void> {
  await analyseFrame(await readFile(WARM_UP), setup, {});
  const bytes = await readFile(file);
  globalThis.gc?.();
  // Forgets the peak so far (proc(5), clear_refs 5); where that cannot be done the figure is too high, never too low.
  await writeFile('/proc/self/clear_refs', '5').catch(() => undefined);
  const idle = process.memoryUsage().rss;
  const answer = await analyseFrame(bytes, setup, {});
  if (!answer.ok) throw new Error(`The frame for the memory test was refused: ${answer.code}`);
  console.log((await peakBytes()) - idle);
}

main(process.argv[2], JSON.parse(process.argv[3]) as SetupValues).catch((error: unknown) => {
  console.error(error);
  process.exitCode = 1;
});
