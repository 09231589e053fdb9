import path from 'node:path';
import { Stop } from './say.mjs';

const USAGE = `npm start -- [--port 3000] [--host 127.0.0.1] [--data .data] [--no-demo]`;

/** Reads the command's arguments; anything unknown is a sentence, not a surprise. */
export function readArguments(argv, root) {
  const options = { port: 3000, host: '127.0.0.1', data: path.join(root, '.data'), demo: true };
  const rest = [...argv];
  while (rest.length) {
    const [name, inline] = rest.shift().split('=', 2);
    const value = () => {
      const given = inline ?? rest.shift();
      if (!given) throw new Stop(`${name} needs a value.\n${USAGE}`);
      return given;
    };
    if (name === '--port') options.port = portOf(value());
    else if (name === '--host') options.host = value();
    else if (name === '--data') options.data = path.resolve(root, value());
    else if (name === '--no-demo') options.demo = false;
    else throw new Stop(`Unknown option ${name}.\n${USAGE}`);
  }
  return options;
}

function portOf(text) {
  const port = Number(text);
  if (!Number.isInteger(port) || port < 1 || port > 65535)
    throw new Stop(`--port ${text}: a port lies between 1 and 65535.`);
  return port;
}
