import { existsSync } from 'node:fs';
import { rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { run } from './processes.mjs';
import { say } from './say.mjs';
import { emptyData } from './stack.mjs';

/** Stands while demo data are being made: a start that finds it knows that they are half made. */
const begunFile = (data) => path.join(data, 'demo-begun');

/** Half-made demo data are no use to anybody, and nothing else can be in the folder yet. */
export async function clearHalfMadeDemo(data) {
  if (!existsSync(begunFile(data))) return;
  say('The demo data were broken off half way; starting afresh ...');
  await emptyData(data);
  await rm(begunFile(data));
}

async function withDatabase(env, work) {
  const { createConnection } = await import('mariadb');
  const { username, password, hostname, port, pathname } = new URL(env.DATABASE_URL);
  const connection = await createConnection({
    host: hostname,
    port: Number(port || 3306),
    user: decodeURIComponent(username),
    password: decodeURIComponent(password),
    database: decodeURIComponent(pathname.slice(1)),
  });
  try {
    return await work(connection);
  } finally {
    await connection.end();
  }
}

async function hasDemo(env) {
  const rows = await withDatabase(env, (connection) =>
    connection.query("SELECT name FROM settings WHERE name = 'demo'"),
  );
  return rows.length > 0;
}

/** Demo data on the first run: only into an empty database that this command itself made. */
export async function seedWhenEmpty({ root, data, env, wanted }) {
  if (!wanted || (await hasDemo(env))) return;
  const [{ people }] = await withDatabase(env, (connection) =>
    connection.query('SELECT COUNT(*) AS people FROM people'),
  );
  if (Number(people) > 0) return;
  const started = Date.now();
  say('Making the demo data: invented frames, taken, fitted and signed like real ones (about a minute) ...');
  await writeFile(begunFile(data), new Date().toISOString());
  await run(process.execPath, ['--conditions=react-server', '--import', 'tsx', 'scripts/seed.ts'], {
    cwd: root,
    env: { ...process.env, ...env },
    failure: 'The demo data could not be made. Start with --no-demo to go without them.',
  });
  await withDatabase(env, (connection) =>
    connection.query(
      "INSERT INTO settings (name, value_json, changed_at) VALUES ('demo', ?, UTC_TIMESTAMP(3))",
      [JSON.stringify({ invented: true })],
    ),
  );
  await rm(begunFile(data));
  say(`Demo data made in ${Math.round((Date.now() - started) / 1000)} s.`);
}

/** The demo accounts as lines to print; none when there are no demo data. */
export async function demoAccountLines(env) {
  if (!(await hasDemo(env))) return [];
  const { tsImport } = await import('tsx/esm/api');
  const { DEMO_PEOPLE, DEMO_PASSWORD } = await tsImport('../seed/people.ts', import.meta.url);
  return [
    `Demo accounts (invented people), each with the password "${DEMO_PASSWORD}":`,
    ...DEMO_PEOPLE.map(({ email, roles }) => `  ${email.padEnd(30)} ${roles.join(', ')}`),
  ];
}
