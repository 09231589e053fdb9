import { readFile, writeFile } from 'node:fs/promises';
import { createServer } from 'node:net';
import path from 'node:path';

/** Is nobody listening there? */
export function isFree(port, host = '127.0.0.1') {
  return new Promise((resolve) => {
    const server = createServer();
    server.once('error', () => resolve(false));
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(true)));
  });
}

function anyFree() {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once('error', reject);
    server.listen({ port: 0, host: '127.0.0.1' }, () => {
      const { port } = server.address();
      server.close(() => resolve(port));
    });
  });
}

/** A port for each name, the same as last time where it is still free. */
export async function rememberedPorts(data, names) {
  const file = path.join(data, 'ports.json');
  const before = await readFile(file, 'utf8').then(JSON.parse, () => ({}));
  const ports = {};
  for (const name of names) {
    const wanted = before[name];
    ports[name] = wanted && (await isFree(wanted)) ? wanted : await anyFree();
  }
  await writeFile(file, JSON.stringify(ports));
  return ports;
}
