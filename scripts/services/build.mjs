import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { mkdir, readFile, readdir, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { run } from './processes.mjs';
import { say } from './say.mjs';

const SOURCES = [
  'app',
  'components',
  'lib',
  'models',
  'public',
  'types',
  'instrumentation.ts',
  'proxy.ts',
  'next.config.mjs',
  'postcss.config.mjs',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json',
];

/** One hash over everything the build is made from. */
async function sourcesHash(root) {
  const hash = createHash('sha256').update(process.versions.node);
  const add = async (relative) => {
    const full = path.join(root, relative);
    hash.update(`\0${relative}\0`).update(await readFile(full));
  };
  for (const source of SOURCES) {
    const full = path.join(root, source);
    if (!existsSync(full)) continue;
    if (path.extname(source)) await add(source);
    else {
      const names = await readdir(full, { recursive: true, withFileTypes: true });
      const files = names
        .filter((entry) => entry.isFile())
        .map((entry) => path.join(entry.parentPath ?? entry.path, entry.name));
      for (const file of files.sort()) await add(path.relative(root, file));
    }
  }
  return hash.digest('hex');
}

/** The thread that decodes and fits, as one file beside the build. Takes a fraction of a second. */
export async function bundleWorker(root, outfile) {
  const { build, stop } = await import('esbuild');
  await mkdir(path.dirname(outfile), { recursive: true });
  await build({
    absWorkingDir: root,
    entryPoints: ['lib/measure/worker-entry.ts'],
    outfile,
    bundle: true,
    platform: 'node',
    format: 'cjs',
    target: 'node20',
    external: ['sharp'],
    logLevel: 'error',
  });
  await stop(); // its helper process has nothing more to do
}

/** Builds the pages into `folder` (inside the clone) unless it was built from these very sources. */
export async function buildWhenStale(root, folder) {
  const hash = await sourcesHash(root);
  const stamp = path.join(root, folder, 'built-from');
  if ((await readFile(stamp, 'utf8').catch(() => '')) === hash) return;
  await rm(stamp, { force: true });
  const started = Date.now();
  say('Building the pages (about half a minute) ...');
  await run(process.execPath, ['node_modules/next/dist/bin/next', 'build'], {
    cwd: root,
    env: { ...process.env, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1', NEXT_DIST_DIR: folder },
    quiet: true,
    failure: 'The pages could not be built.',
  });
  await writeFile(stamp, hash);
  say(`Built in ${Math.round((Date.now() - started) / 1000)} s.`);
}
