/**
 * Command line of the engine: one JSON line per frame on stdout, nothing else there.
 * Plain Node, so that it starts at once: scripts/analyse.ts is bundled into .build/ when a source is newer.
 */
import { existsSync, readdirSync, statSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');
const bundle = path.join(root, '.build', 'analyse.mjs');
const folders = ['lib/imaging', 'lib/fit', 'lib/measure', 'lib/quantity', 'lib/domain'];

if (!existsSync(path.join(root, 'node_modules', 'sharp'))) {
  process.stderr.write('The packages are not there yet. Run npm ci (or npm start) first.\n');
  process.exit(2);
}

function newestSource() {
  let newest = statSync(path.join(root, 'scripts', 'analyse.ts')).mtimeMs;
  for (const folder of folders) {
    for (const name of readdirSync(path.join(root, folder)))
      newest = Math.max(newest, statSync(path.join(root, folder, name)).mtimeMs);
  }
  return newest;
}

if (!existsSync(bundle) || statSync(bundle).mtimeMs < newestSource()) {
  const { build } = await import('esbuild');
  const { mkdirSync, renameSync } = await import('node:fs');
  mkdirSync(path.dirname(bundle), { recursive: true });
  // Written beside and renamed, so that another run never reads half a file.
  const fresh = path.join(path.dirname(bundle), `analyse.${process.pid}.mjs`);
  await build({
    entryPoints: [path.join(root, 'scripts', 'analyse.ts')],
    outfile: fresh,
    bundle: true,
    platform: 'node',
    format: 'esm',
    target: 'node20',
    external: ['sharp'],
    alias: { '@': root },
    banner: {
      js: "import { createRequire } from 'node:module'; const require = createRequire(import.meta.url);",
    },
    logLevel: 'error',
  });
  renameSync(fresh, bundle);
}

const { main } = await import(pathToFileURL(bundle).href);
process.exitCode = await main(process.argv.slice(2));
