// Types, lint, format and import rules, once for the whole tree. Prints what fails and a line per check.
import { spawn } from 'node:child_process';
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

/** One check; what it says is shown whole when it ends, so that checks side by side do not mix their lines. */
function runCheck({ name, command, args }) {
  return new Promise((resolve) => {
    const child = spawn(command, args, { cwd: root, stdio: ['ignore', 'pipe', 'pipe'] });
    const said = [];
    child.stdout.on('data', (part) => said.push(part));
    child.stderr.on('data', (part) => said.push(part));
    child.once('error', (problem) => said.push(Buffer.from(`${problem.message}\n`)));
    child.once('close', (code) => {
      if (code !== 0) process.stdout.write(Buffer.concat(said));
      console.log(`${name}: ${code === 0 ? 'passed' : 'FAILED'}`);
      resolve(code === 0);
    });
  });
}

/** Runs the named checks (all when none is named) and answers how many passed and failed. */
export async function runChecks(wanted = '') {
  const results = await Promise.all(CHECKS.filter(({ name }) => name.includes(wanted)).map(runCheck));
  const passed = results.filter(Boolean).length;
  return { passed, failed: results.length - passed };
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const { passed, failed } = await runChecks(process.argv[2]);
  console.log(`${passed} passed, ${failed} failed`);
  process.exit(failed ? 1 : 0);
}
