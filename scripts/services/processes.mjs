import { spawn } from 'node:child_process';
import { createWriteStream, readFileSync, readdirSync } from 'node:fs';
import { mkdir, readFile, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { Stop, say } from './say.mjs';

/** Every process started for a data folder carries it in its environment: that is how left-over ones are known. */
const MARK = 'MIDFRINGE_DATA_FOLDER';

const running = new Set();

/** Starts a long-running child in a process group of its own, so that Ctrl-C reaches it only through us. */
export function startChild(name, command, args, { cwd, env, data, log }) {
  const out = createWriteStream(log, { flags: 'a' });
  const child = spawn(command, args, {
    cwd,
    env: { ...env, [MARK]: data },
    stdio: ['ignore', 'pipe', 'pipe'],
    detached: true,
  });
  child.stdout.pipe(out);
  child.stderr.pipe(out);
  const ended = new Promise((resolve) => {
    child.once('error', (problem) => resolve(problem.message));
    child.once('exit', (code, signal) => resolve(signal ?? `exit code ${code}`));
  });
  const one = { name, child, ended, log, over: false };
  running.add(one);
  void ended.then(() => {
    one.over = true;
    running.delete(one);
  });
  return one;
}

/** Asks the child to end, and after the grace makes it. */
export async function stopChild(one, graceMs = 10_000) {
  if (one.over) return;
  one.child.kill('SIGTERM');
  const inTime = await Promise.race([one.ended.then(() => true), sleep(graceMs, false, { ref: false })]);
  if (!inTime) one.child.kill('SIGKILL');
  await one.ended;
}

/** Runs a command to its end with its output shown or kept; throws a sentence when it fails. */
export async function run(command, args, { cwd, env = process.env, quiet = false, failure }) {
  const child = spawn(command, args, {
    cwd,
    env,
    stdio: quiet ? ['ignore', 'pipe', 'pipe'] : ['ignore', 'inherit', 'inherit'],
  });
  const kept = [];
  if (quiet) {
    child.stdout.on('data', (part) => kept.push(part));
    child.stderr.on('data', (part) => kept.push(part));
  }
  const one = { name: command, child, over: false };
  one.ended = new Promise((resolve) => {
    child.once('error', (problem) => resolve(problem.message));
    child.once('close', (code, signal) => resolve(signal ?? code));
  });
  running.add(one);
  const code = await one.ended;
  one.over = true;
  running.delete(one);
  const output = Buffer.concat(kept).toString();
  if (code !== 0)
    throw new Stop(`${output}${failure} (${typeof code === 'number' ? `exit code ${code}` : code})`);
  return output;
}

/** Ends whatever still runs, for a stop in the middle of starting. */
export async function stopEverything() {
  await Promise.all([...running].map((one) => stopChild(one, 15_000)));
}

/** Under npm, ends with it: when npm is killed, its shell may leave this process behind without a word. */
export function endWithNpm(end) {
  if (!process.env.npm_lifecycle_event) return;
  const parent = process.ppid;
  setInterval(() => {
    if (process.ppid !== parent) end();
  }, 500).unref();
}

/** One start per data folder. A lock whose process is gone is no lock. */
export async function lockFolder(data) {
  const file = path.join(data, 'run', 'start.json');
  await mkdir(path.dirname(file), { recursive: true });
  const held = await readFile(file, 'utf8').then(JSON.parse, () => null);
  if (held && held.pid !== process.pid && startedAt(held.pid) === held.startedAt) {
    throw new Stop(
      `Midfringe is running already with this data folder (process ${held.pid}). Stop it first, or use --data.`,
    );
  }
  await writeFile(file, JSON.stringify({ pid: process.pid, startedAt: startedAt(process.pid) }));
  return () => rm(file, { force: true });
}

/** Kernel's start time of a process in ticks, which tells a number used again from the same process; null when gone. */
function startedAt(pid) {
  try {
    return readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ').at(-1).split(' ')[19];
  } catch (problem) {
    if (problem.code === 'ENOENT' || problem.code === 'ESRCH') return null;
    throw problem;
  }
}

/** Stops what an earlier start of this data folder left behind when it was killed. */
export async function stopLeftOvers(data) {
  const pids = leftOvers(data);
  if (!pids.length) return;
  say(`Stopping ${pids.length} process${pids.length === 1 ? '' : 'es'} an earlier start left behind ...`);
  for (const pid of pids) signal(pid, 'SIGTERM');
  for (let waited = 0; waited < 20_000 && leftOvers(data).length; waited += 100) await sleep(100);
  for (const pid of leftOvers(data)) signal(pid, 'SIGKILL');
}

function leftOvers(data) {
  const mark = `${MARK}=${data}\0`;
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)
    .map(Number)
    .filter((pid) => environOf(pid).includes(mark));
}

function environOf(pid) {
  try {
    return `${readFileSync(`/proc/${pid}/environ`, 'latin1')}\0`;
  } catch (problem) {
    if (['ENOENT', 'ESRCH', 'EACCES', 'EPERM'].includes(problem.code)) return '';
    throw problem;
  }
}

function signal(pid, name) {
  try {
    process.kill(pid, name);
  } catch (problem) {
    if (problem.code !== 'ESRCH') throw problem;
  }
}
