// A command beside the running product: npm run audit:verify, npm run replay. Takes --data FOLDER.
import { spawn } from 'node:child_process';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { environmentOf } from './services/attach.mjs';
import { bundleWorker } from './services/build.mjs';
import { Stop } from './services/say.mjs';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');
const WORKER = path.join(root, '.build', 'beside', 'measure-worker.cjs');
const [script, ...rest] = process.argv.slice(2);

function dataFolder(words) {
  const at = words.indexOf('--data');
  if (at < 0) return path.join(root, '.data');
  if (!words[at + 1]) throw new Stop('--data needs a folder.');
  return path.resolve(words[at + 1]);
}

try {
  const env = await environmentOf(dataFolder(rest));
  if (script === 'replay') await bundleWorker(root, WORKER);
  const child = spawn(
    process.execPath,
    ['--conditions=react-server', '--import', 'tsx', path.join('scripts', `${script}.ts`)],
    {
      cwd: root,
      env: { LOG_LEVEL: 'warn', ...process.env, ...env, MEASURE_WORKER: WORKER },
      stdio: 'inherit',
    },
  );
  child.once('close', (code) => {
    process.exitCode = code ?? 2;
  });
} catch (problem) {
  console.error(problem instanceof Stop ? problem.message : problem);
  process.exitCode = 2;
}
