import 'server-only';
import { createHash, randomUUID } from 'node:crypto';
import { mkdir, open, readdir, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { AppError } from '@/lib/domain/errors';
import { env } from './env';
import { FIRST_BYTES, mediaTypeOf } from './media-type';

/** A body written to disk and hashed on the way. */
export interface Spooled {
  path: string;
  sha256: string;
  bytes: number;
  mediaType: string;
}

/**
 * Streams a body into a file of the spool, hashing as it goes, and makes it durable. Never holds more than one part
 * in memory. Throws NOT_A_PICTURE (or what `typeOf` says) as soon as the first bytes tell, TOO_LARGE at the cap;
 * nothing is left then.
 */
export async function spoolBody(
  body: AsyncIterable<Uint8Array>,
  capBytes: number,
  typeOf: (first: Uint8Array) => string = mediaTypeOf,
): Promise<Spooled> {
  const folder = env().SPOOL_FOLDER;
  await mkdir(folder, { recursive: true });
  const file = path.join(folder, randomUUID());
  const handle = await open(file, 'wx', 0o600);
  const hash = createHash('sha256');
  const first = Buffer.alloc(FIRST_BYTES);
  let bytes = 0;
  let mediaType: string | null = null;
  try {
    for await (const part of body) {
      if (bytes < FIRST_BYTES) Buffer.from(part).copy(first, bytes);
      bytes += part.length;
      if (bytes > capBytes) {
        throw new AppError('TOO_LARGE', `This file is larger than ${capBytes / 1024 / 1024} MB.`);
      }
      if (!mediaType && bytes >= FIRST_BYTES) mediaType = typeOf(first);
      hash.update(part);
      await handle.write(part);
    }
    mediaType ??= typeOf(first.subarray(0, bytes));
    await handle.sync();
  } catch (problem) {
    await handle.close();
    await dropSpool(file);
    throw broken(problem);
  }
  await handle.close();
  await syncFolder(folder);
  return { path: file, sha256: hash.digest('hex'), bytes, mediaType };
}

/** What stopped a body half way, in words: a full disk, or a line that broke. */
function broken(problem: unknown): unknown {
  if (problem instanceof AppError || !(problem instanceof Error)) return problem;
  const { code } = problem as NodeJS.ErrnoException;
  if (code === 'ENOSPC' || code === 'EDQUOT') {
    const full = new AppError(
      'STORE_DOWN',
      'The disk of the server is full, so the file was not taken. Tell whoever looks after it.',
    );
    return Object.assign(full, { cause: problem });
  }
  const lineBroke = code === 'ECONNRESET' || code === 'ECONNABORTED' || /abort/i.test(problem.name);
  return lineBroke ? brokeOff() : problem;
}

export function brokeOff(): AppError {
  return new AppError('BAD_INPUT', 'The upload broke off before the whole file was here. Send it again.');
}

/** A new file is durable only when its folder is. */
async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r');
  await handle.sync();
  await handle.close();
}

export async function dropSpool(file: string): Promise<void> {
  await rm(file, { force: true });
}

export async function spoolHas(file: string, bytes: number): Promise<boolean> {
  const found = await stat(file).catch((problem: NodeJS.ErrnoException) => {
    if (problem.code === 'ENOENT') return null;
    throw problem;
  });
  return found?.size === bytes;
}

/** Removes files no row names any more, when they are older than `olderThanMs`. */
export async function sweepSpool(
  named: ReadonlySet<string>,
  now: Date,
  olderThanMs: number,
): Promise<number> {
  const folder = env().SPOOL_FOLDER;
  await mkdir(folder, { recursive: true });
  let swept = 0;
  for (const name of await readdir(folder)) {
    const file = path.join(folder, name);
    if (named.has(file)) continue;
    const { mtimeMs } = await stat(file);
    if (now.getTime() - mtimeMs < olderThanMs) continue;
    await dropSpool(file);
    swept += 1;
  }
  return swept;
}
