import { randomBytes } from 'node:crypto';
import { chmod, mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import path from 'node:path';

/** Passwords and keys of the local services, made once and kept where only this user reads them. */
export async function localSecrets(data) {
  await mkdir(data, { recursive: true });
  const file = path.join(data, 'secrets.json');
  const kept = await readFile(file, 'utf8').then(JSON.parse, () => ({}));
  const secrets = { ...kept };
  for (const name of ['session', 'databaseRoot', 'databaseOwner', 'databaseApp']) {
    secrets[name] ??= randomBytes(32).toString('hex');
  }
  await writeFile(`${file}.new`, JSON.stringify(secrets), { mode: 0o600 });
  await rename(`${file}.new`, file);
  await chmod(file, 0o600);
  return secrets;
}
