// Types, lint, format and import rules, once for the whole tree. Prints what fails and a line per check.
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import path from 'node:path';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');
const bin = (name) => path.join(root, 'node_modules', '.bin', name);
const folders = ['app', 'components', 'lib', 'models', 'migrations', 'scripts', 'tests'].filter((folder) =>
  existsSync(path.join(root, folder)),
);

const CHECKS = [
  { name: 'types', command: bin('tsc'), args: ['--noEmit', '-p', '.'] },
  { name: 'lint', command: bin('eslint'), args: ['--max-warnings', '0', '.'] },
  {
    name: 'format',
    command: bin('prettier'),
    args: ['--check', '--log-level', 'warn', '**/*.{ts,tsx,mjs,css}'],
  },
  {
    name: 'import rules',
    command: bin('depcruise'),
    args: ['--config', '.dependency-cruiser.cjs', ...folders],
  },
];

/** Runs the named checks (all when none is named) and returns how many passed and failed. */
export function runChecks(wanted = '') {
  const tally = { passed: 0, failed: 0 };
  for (const check of CHECKS.filter((one) => one.name.includes(wanted))) {
    const { status } = spawnSync(check.command, check.args, { cwd: root, stdio: 'inherit' });
    console.log(`${check.name}: ${status === 0 ? 'passed' : 'FAILED'}`);
    if (status === 0) tally.passed += 1;
    else tally.failed += 1;
  }
  return tally;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const { passed, failed } = runChecks(process.argv[2]);
  console.log(`${passed} passed, ${failed} failed`);
  process.exit(failed ? 1 : 0);
}
