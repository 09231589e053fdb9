/**
 * The benchmark as the product runs the engine: bundled into plain JavaScript first. Through a loader that compiles while it
 * runs, numeric loops are up to twice as slow.
 */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');

if (!existsSync(path.join(root, 'node_modules', 'sharp'))) {
  process.stderr.write('The packages are not there yet. Run npm ci (or npm start) first.\n');
  process.exit(2);
}

const { build, stop } = await import('esbuild');
await build({
  absWorkingDir: root,
  entryPoints: ['scripts/bench.ts', 'scripts/bench/memory.ts'],
  outdir: '.build/bench',
  entryNames: '[name]',
  outExtension: { '.js': '.cjs' },
  bundle: true,
  platform: 'node',
  format: 'cjs',
  target: 'node20',
  external: ['sharp'],
  alias: { '@': root },
  logLevel: 'error',
});
await stop();

const bench = path.join(root, '.build', 'bench', 'bench.cjs');
const { status } = spawnSync(process.execPath, [bench, ...process.argv.slice(2)], {
  cwd: root,
  stdio: 'inherit',
});
process.exitCode = status ?? 2;
