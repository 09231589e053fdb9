import { createRequire } from 'node:module';
import { mkdir } from 'node:fs/promises';
import path from 'node:path';

const ACCESS = 'S3RVER'; // the fake's fixed key; it listens on loopback only
const BUCKET = 'midfringe';

/** How the product reaches the local store. */
export function localStoreEnv(port, bucket = BUCKET) {
  return {
    S3_ENDPOINT: `http://127.0.0.1:${port}`,
    S3_REGION: 'us-east-1',
    S3_BUCKET: bucket,
    S3_ACCESS_KEY_ID: ACCESS,
    S3_SECRET_ACCESS_KEY: ACCESS,
  };
}

/** A local S3 store that keeps objects as files. */
export async function startStore({ data, port, bucket = BUCKET }) {
  const S3rver = createRequire(import.meta.url)('s3rver');
  const directory = path.join(data, 's3');
  await mkdir(directory, { recursive: true });
  const server = new S3rver({
    address: '127.0.0.1',
    port,
    silent: true,
    directory,
    configureBuckets: [{ name: bucket, configs: [] }],
  });
  await server.run();
  return {
    env: localStoreEnv(port, bucket),
    stop: () => {
      server.httpServer.closeAllConnections();
      return server.close();
    },
  };
}
