import { mkdir, readFile } from 'node:fs/promises';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { startChild, stopChild } from './processes.mjs';
import { Stop } from './say.mjs';

const READY_MS = 60_000;

/** The web server; ready when it answers that everything behind it is. */
export async function startWeb({ root, data, host, port, env, distDir }) {
  const logs = path.join(data, 'logs');
  await mkdir(logs, { recursive: true });
  const server = startChild(
    'The web server',
    process.execPath,
    ['node_modules/next/dist/bin/next', 'start', '--port', String(port), '--hostname', host],
    {
      cwd: root,
      env: {
        ...process.env,
        ...env,
        NODE_ENV: 'production',
        NEXT_TELEMETRY_DISABLED: '1',
        NEXT_DIST_DIR: distDir,
      },
      data,
      log: path.join(logs, 'web.log'),
    },
  );
  const until = Date.now() + READY_MS;
  for (;;) {
    const answer = await fetch(`http://${host === '0.0.0.0' ? '127.0.0.1' : host}:${port}/api/health`).catch(
      () => null,
    );
    if (answer?.ok) break;
    if (server.over || Date.now() > until) {
      const lines = (await readFile(server.log, 'utf8').catch(() => ''))
        .trim()
        .split('\n')
        .slice(-12)
        .join('\n');
      const said = answer ? await answer.text() : '';
      await stopChild(server);
      throw new Stop(`${lines}\n${said}\nThe web server did not start. Its log is ${server.log}`);
    }
    await sleep(100);
  }
  return { server, stop: () => stopChild(server) };
}
