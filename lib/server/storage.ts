import 'server-only';
import type { Readable } from 'node:stream';
import { setImmediate as nextTurn } from 'node:timers/promises';
import {
  GetObjectCommand,
  HeadBucketCommand,
  HeadObjectCommand,
  NotFound,
  PutObjectCommand,
  S3Client,
  S3ServiceException,
} from '@aws-sdk/client-s3';
import { AppError } from '@/lib/domain/errors';
import { env } from './env';

const held = globalThis as { midfringeStore?: S3Client };

function store(): S3Client {
  const { S3_ENDPOINT, S3_REGION, S3_ACCESS_KEY_ID, S3_SECRET_ACCESS_KEY } = env();
  held.midfringeStore ??= new S3Client({
    endpoint: S3_ENDPOINT,
    region: S3_REGION,
    credentials: { accessKeyId: S3_ACCESS_KEY_ID, secretAccessKey: S3_SECRET_ACCESS_KEY },
    forcePathStyle: true,
    // With the default, a store that does not know streamed checksums keeps their framing inside the object.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
    maxAttempts: 4,
  });
  return held.midfringeStore;
}

const Bucket = (): string => env().S3_BUCKET;

/** Where the bytes of a frame lie: under their own hash, so the same bytes are one object. */
export function originalKey(sha256: string): string {
  return `frames/${sha256.slice(0, 2)}/${sha256}`;
}

export function previewKey(sha256: string, engine: string): string {
  return `derived/${sha256}-${engine}.webp`;
}

/** Where a band stack lies: under the hash of its bytes. */
export function stackKey(sha256: string): string {
  return `stacks/${sha256}`;
}

/** Where a certificate lies: under the hash of its bytes. */
export function certificateKey(sha256: string): string {
  return `certificates/${sha256}`;
}

/** The object's size in bytes, or null when there is none. */
export async function sizeOf(key: string): Promise<number | null> {
  return reach(async () => {
    try {
      const head = await store().send(new HeadObjectCommand({ Bucket: Bucket(), Key: key }));
      return head.ContentLength ?? 0;
    } catch (problem) {
      if (isMissing(problem)) return null;
      throw problem;
    }
  });
}

export async function putObject(
  key: string,
  body: Readable | Uint8Array,
  bytes: number,
  type: string,
): Promise<void> {
  await reach(() =>
    store().send(
      new PutObjectCommand({
        Bucket: Bucket(),
        Key: key,
        Body: body,
        ContentLength: bytes,
        ContentType: type,
      }),
    ),
  );
}

/** The object as a stream, or null when there is none. */
export async function openObject(key: string): Promise<{ body: Readable; bytes: number } | null> {
  return reach(async () => {
    try {
      const got = await store().send(new GetObjectCommand({ Bucket: Bucket(), Key: key }));
      return { body: got.Body as Readable, bytes: got.ContentLength ?? 0 };
    } catch (problem) {
      if (isMissing(problem)) return null;
      throw problem;
    }
  });
}

/** So much of an object is taken in before others have their turn: some milliseconds' work. */
const TURN_BYTES = 512 * 1024;

/** The whole object in memory: for the fit, which needs all of it at once. */
export async function readObject(key: string): Promise<Uint8Array<ArrayBuffer> | null> {
  const open = await openObject(key);
  if (!open) return null;
  const bytes = new Uint8Array(open.bytes);
  let at = 0;
  for await (const part of open.body as AsyncIterable<Uint8Array>) {
    bytes.set(part, at);
    at += part.length;
    // A store nearby delivers faster than it is taken in: the loop would never wait, and nobody else would be heard.
    if (Math.floor(at / TURN_BYTES) > Math.floor((at - part.length) / TURN_BYTES)) await nextTurn();
  }
  if (at !== open.bytes)
    throw new AppError('STORE_DOWN', 'The store broke off while a frame was read. Try again.');
  return bytes;
}

export async function storeAnswers(): Promise<boolean> {
  try {
    await store().send(new HeadBucketCommand({ Bucket: Bucket() }));
    return true;
  } catch (problem) {
    if (problem instanceof Error) return false;
    throw problem;
  }
}

function isMissing(problem: unknown): boolean {
  return (
    problem instanceof NotFound ||
    (problem instanceof S3ServiceException && problem.$metadata.httpStatusCode === 404)
  );
}

/** A store that cannot be reached is one plain error; what it answered stays as it is. */
async function reach<T>(call: () => Promise<T>): Promise<T> {
  try {
    return await call();
  } catch (problem) {
    if (problem instanceof AppError) throw problem;
    const answered = problem instanceof S3ServiceException && (problem.$metadata.httpStatusCode ?? 500) < 500;
    if (answered) throw problem;
    throw Object.assign(
      new AppError('STORE_DOWN', 'The picture store cannot be reached. Nothing is lost; try again.'),
      {
        cause: problem,
      },
    );
  }
}
