import { existsSync } from 'node:fs';
import { mkdir, open, readFile, rm, statfs } from 'node:fs/promises';
import path from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { run } from './processes.mjs';
import { Stop, say } from './say.mjs';

const LEAST_NODE = [20, 9];

export function requireNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major > LEAST_NODE[0] || (major === LEAST_NODE[0] && minor >= LEAST_NODE[1])) return;
  throw new Stop(
    `Midfringe needs Node ${LEAST_NODE.join('.')} or newer; this is ${process.versions.node}. Install a newer Node and try again.`,
  );
}

/** Refuses to begin what would run out of room half way. */
export async function requireRoom(folder, megabytes, what) {
  await mkdir(folder, { recursive: true }).catch((problem) => {
    throw new Stop(`The folder ${folder} cannot be made: ${problem.message}`);
  });
  const { bavail, bsize } = await statfs(folder);
  const free = Math.floor((bavail * bsize) / 1024 / 1024);
  if (free < megabytes)
    throw new Stop(
      `${what} needs ${megabytes} MB, and the disk of ${folder} has ${free} MB left. Make room and try again.`,
    );
}

/** Two commands in one clone do not install or build at the same time; the lock of a dead process is none. */
export async function whileLocked(root, work) {
  const file = path.join(root, '.build', 'setup.lock');
  await mkdir(path.dirname(file), { recursive: true });
  for (let said = false; ;) {
    const handle = await open(file, 'wx').catch((problem) => {
      if (problem.code === 'EEXIST') return null;
      throw problem;
    });
    if (handle) {
      await handle.writeFile(String(process.pid));
      await handle.close();
      break;
    }
    const holder = Number(await readFile(file, 'utf8').catch(() => ''));
    if (!holder || !existsSync(`/proc/${holder}`)) await rm(file, { force: true });
    else if (!said) {
      say(`Waiting for process ${holder}, which is installing or building ...`);
      said = true;
    }
    await sleep(300);
  }
  try {
    return await work();
  } finally {
    await rm(file, { force: true });
  }
}

/** Installs the packages of the lock file when they are missing or others. */
export async function ensurePackages(root) {
  if (await packagesMatch(root)) return;
  await requireRoom(root, 2000, 'Installing the packages');
  say('Installing packages (about a minute) ...');
  await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    failure: 'The packages could not be installed. Is there a network? Then try again.',
  });
}

async function packagesMatch(root) {
  const read = (file) => readFile(path.join(root, file), 'utf8').then(JSON.parse, () => null);
  const wanted = await read('package-lock.json');
  const there = await read('node_modules/.package-lock.json'); // npm writes it last
  if (!wanted) throw new Stop('package-lock.json is missing: this is not a whole clone.');
  if (!there) return false;
  return Object.entries(wanted.packages).every(([name, entry]) => {
    if (name === '' || entry.link) return true;
    const installed = there.packages[name];
    return installed ? installed.version === entry.version : Boolean(entry.optional);
  });
}

const PLACES = ['/usr/sbin', '/usr/bin', '/usr/local/sbin', '/usr/local/bin'];

export function findProgram(name) {
  return PLACES.map((place) => path.join(place, name)).find((file) => existsSync(file)) ?? null;
}

/** Installs a program from Debian's packages when it is missing: as root or through sudo, else says how. */
export async function ensureProgram(name, packages, what) {
  const found = findProgram(name);
  if (found) return found;
  const install = `apt-get -o DPkg::Lock::Timeout=400 install -y --no-install-recommends ${packages.join(' ')}`;
  const prefix = process.getuid() === 0 ? [] : (await canSudo()) ? ['sudo', '-n'] : null;
  if (!prefix) {
    throw new Stop(
      `${what} is missing, and this user may not install it. Run this, then try again:\n\n  sudo apt-get update && sudo ${install}\n`,
    );
  }
  say(`Installing ${what} from Debian's packages ...`);
  const apt = async (args, failure) => {
    const [command, ...rest] = [
      ...prefix,
      'env',
      'DEBIAN_FRONTEND=noninteractive',
      'apt-get',
      '-o',
      'DPkg::Lock::Timeout=400',
      ...args,
    ];
    await run(command, rest, { quiet: true, failure });
  };
  await apt(['update', '-qq'], "Debian's package lists could not be read.");
  await apt(
    ['install', '-y', '-qq', '--no-install-recommends', ...packages],
    `${what} could not be installed.`,
  );
  const installed = findProgram(name);
  if (!installed) throw new Stop(`${what} was installed, but ${name} is nowhere to be found.`);
  return installed;
}

async function canSudo() {
  return run('sudo', ['-n', 'true'], { quiet: true, failure: 'no sudo' }).then(
    () => true,
    () => false,
  );
}
