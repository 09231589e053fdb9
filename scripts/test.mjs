// Everything a clean clone must pass, on its own ports and folders, so that it can run beside `npm start`.
//   npm test                                  all of it
//   npm test -- unit|architecture|integration|e2e|check [PATTERN]     one part
import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { runChecks } from './check.mjs';
import { buildWhenStale, bundleWorker } from './services/build.mjs';
import { ensureMariadb } from './services/mariadb.mjs';
import {
  ensurePackages,
  ensureProgram,
  requireNode,
  requireRoom,
  whileLocked,
} from './services/packages.mjs';
import { rememberedPorts } from './services/ports.mjs';
import { endWithNpm, lockFolder, run, stopEverything, stopLeftOvers } from './services/processes.mjs';
import { Stop, say } from './services/say.mjs';
import { emptyData, migrateDatabase, startServices } from './services/stack.mjs';
import { startWeb } from './services/web.mjs';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');
const data = path.join(root, '.test-data');
const DIST = '.next-test';
const WORKER = path.join(root, '.build', 'test', 'measure-worker.cjs');
const PARTS = ['check', 'unit', 'architecture', 'integration', 'e2e'];
/** The pages' own database, and one that the integration tests empty as they like. */
const DATABASES = ['midfringe', 'midfringe_integration'];
/** Services named from outside are for `npm start`; tests never touch them. */
const NOTHING_OUTSIDE = {};

const undo = [];
let stopping = null;

async function shutDown(code) {
  stopping ??= (async () => {
    for (const step of undo.splice(0).reverse()) {
      await step().catch((problem) => console.error(problem instanceof Error ? problem.message : problem));
    }
    await stopEverything();
    process.exit(code);
  })();
  return stopping;
}

/** Runs some jest projects and answers how many tests passed and failed; a file that does not even load counts as one. */
async function jest(projects, pattern, env = {}) {
  const folder = await mkdtemp(path.join(tmpdir(), 'midfringe-jest-'));
  const file = path.join(folder, 'result.json');
  const inBand = projects.some((project) => project === 'integration' || project === 'e2e');
  const args = [
    'node_modules/jest/bin/jest.js',
    '--selectProjects',
    ...projects,
    '--passWithNoTests',
    '--json',
    `--outputFile=${file}`,
  ];
  if (inBand) args.push('--runInBand');
  if (pattern) args.push('--testPathPatterns', pattern);
  say(`\n== ${projects.join(' and ')}`);
  const ended = await run(process.execPath, args, {
    cwd: root,
    env: { ...process.env, NODE_ENV: 'test', LOG_LEVEL: 'warn', ...env },
    failure: 'jest',
  }).then(
    () => true,
    () => false,
  );
  const result = await readFile(file, 'utf8').then(JSON.parse, () => null);
  await rm(folder, { recursive: true, force: true });
  if (!result) return { passed: 0, failed: 1 };
  const failed = result.numFailedTests + result.numRuntimeErrorTestSuites;
  return { passed: result.numPassedTests, failed: ended ? failed : Math.max(1, failed) };
}

async function withServices(wanted, add, pattern) {
  await requireRoom(data, 600, 'The tests');
  undo.push(await lockFolder(data));
  await stopLeftOvers(data);
  await emptyData(data);
  await ensureMariadb();
  await bundleWorker(root, WORKER);
  const services = await startServices({ data, databases: DATABASES, outside: NOTHING_OUTSIDE });
  undo.push(services.stop);
  const { web: port } = await rememberedPorts(path.join(data, 'run'), ['web']);
  const site = `http://localhost:${port}`;
  const common = { ...services.env, MEASURE_WORKER: WORKER, NEXTAUTH_URL: site };
  if (wanted('integration')) {
    const { app, owner } = services.urls.midfringe_integration;
    const spool = path.join(data, 'spool', 'integration');
    const env = { ...common, DATABASE_URL: app, DATABASE_OWNER_URL: owner, SPOOL_FOLDER: spool };
    await migrateDatabase(root, env);
    add(await jest(['integration'], pattern, env));
  }
  if (wanted('e2e')) {
    const chromium = await ensureProgram('chromium', ['chromium'], 'Chromium');
    await migrateDatabase(root, common);
    await whileLocked(root, () => buildWhenStale(root, DIST));
    const { DATABASE_OWNER_URL: _owner, ...webEnv } = common;
    const web = await startWeb({ root, data, host: '127.0.0.1', port, env: webEnv, distDir: DIST });
    undo.push(web.stop);
    add(await jest(['e2e'], pattern, { ...common, BASE_URL: site, CHROMIUM: chromium }));
  }
}

async function test() {
  requireNode();
  const [part, pattern] = process.argv.slice(2);
  if (part && !PARTS.includes(part)) throw new Stop(`npm test -- ${PARTS.join('|')} [PATTERN]`);
  const wanted = (name) => !part || part === name;
  await whileLocked(root, () => ensurePackages(root));
  const total = { passed: 0, failed: 0 };
  const add = ({ passed, failed }) => {
    total.passed += passed;
    total.failed += failed;
  };
  if (wanted('check')) add(await runChecks(part ? pattern : ''));
  const plain = ['unit', 'architecture'].filter(wanted);
  if (plain.length) add(await jest(plain, pattern));
  if (wanted('integration') || wanted('e2e')) await withServices(wanted, add, pattern);
  return total;
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void shutDown(130));

endWithNpm(() => void shutDown(130));

test().then(
  async ({ passed, failed }) => {
    for (const step of undo.splice(0).reverse()) await step();
    say(`\n${passed} passed, ${failed} failed`);
    await shutDown(failed ? 1 : 0);
  },
  async (problem) => {
    if (stopping) return;
    console.error(problem instanceof Stop ? `\n${problem.message}` : problem);
    say('\n0 passed, 1 failed');
    await shutDown(1);
  },
);
