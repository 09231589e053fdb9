// Brings the whole product up from a clean clone, and stops it cleanly. Only Node's own modules until the packages
// are there: everything that needs one imports it where it is used.
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { readArguments } from './services/arguments.mjs';
import { buildWhenStale, bundleWorker } from './services/build.mjs';
import { clearHalfMadeDemo, demoAccountLines, seedWhenEmpty } from './services/demo.mjs';
import { ensureMariadb } from './services/mariadb.mjs';
import { ensurePackages, requireNode, requireRoom, whileLocked } from './services/packages.mjs';
import { isFree } from './services/ports.mjs';
import { endWithNpm, lockFolder, stopEverything, stopLeftOvers } from './services/processes.mjs';
import { Stop, say } from './services/say.mjs';
import { migrateDatabase, startServices } from './services/stack.mjs';
import { startWeb } from './services/web.mjs';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');
const WORKER = path.join(root, '.build', 'measure-worker.cjs');
const DATA_MEGABYTES = 600;

/** What to undo when the product stops, newest last. */
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

async function start() {
  requireNode();
  const { port, host, data, demo } = readArguments(process.argv.slice(2), root);
  await requireRoom(data, DATA_MEGABYTES, 'Midfringe');
  undo.push(await lockFolder(data));
  await stopLeftOvers(data);
  if (!(await isFree(port, host))) {
    throw new Stop(
      `Port ${port} is used by another program. Choose another one: npm start -- --port ${port + 1}`,
    );
  }
  const local = !process.env.DATABASE_URL;
  await whileLocked(root, async () => {
    await ensurePackages(root);
    await bundleWorker(root, WORKER);
  });
  if (local) {
    await ensureMariadb();
    await clearHalfMadeDemo(data);
  }
  const services = await startServices({ data });
  undo.push(services.stop);
  const env = {
    ...services.env,
    NEXTAUTH_URL: process.env.NEXTAUTH_URL ?? `http://localhost:${port}`,
    MEASURE_WORKER: WORKER,
    // The demo's people and their mails are invented, and its mails say so.
    ...(demo && local && !process.env.MAIL_FROM
      ? { MAIL_FROM: 'Midfringe, invented demo <midfringe@demo.example>' }
      : {}),
  };
  await migrateDatabase(root, env);
  await whileLocked(root, () => buildWhenStale(root, '.next'));
  await seedWhenEmpty({ root, data, env, wanted: demo && local });
  const { DATABASE_OWNER_URL: _owner, ...webEnv } = env;
  const web = await startWeb({ root, data, host, port, env: webEnv, distDir: '.next' });
  undo.push(web.stop);
  say('');
  for (const line of local ? await demoAccountLines(env) : []) say(line);
  say(`\nMidfringe is running at http://localhost:${port} (stop it with Ctrl-C)`);
  watch([web.server, services.database?.server]);
}

/** The product is whole or it is down: when one part ends by itself, the rest is stopped and the reason said. */
function watch(servers) {
  for (const server of servers.filter(Boolean)) {
    void server.ended.then((how) => {
      if (stopping) return;
      console.error(
        `${server.name} ended by itself (${how}). Its log is ${server.log}. Start again with npm start.`,
      );
      void shutDown(1);
    });
  }
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
  process.on(signal, () => {
    if (!stopping) say('Stopping ...');
    void shutDown(0);
  });
}

endWithNpm(() => void shutDown(0));

start().catch((problem) => {
  if (stopping) return;
  console.error(problem instanceof Stop ? `\n${problem.message}` : problem);
  void shutDown(1);
});
