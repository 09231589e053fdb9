import 'server-only';
import { hash, verify } from '@node-rs/argon2';

// argon2id with 19 MiB, 2 passes, 1 lane: the least that OWASP's password storage sheet recommends.
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

export function hashPassword(password: string): Promise<string> {
  return hash(password, COST);
}

export function isPassword(hashed: string, password: string): Promise<boolean> {
  return verify(hashed, password);
}

let decoy: Promise<string> | undefined;

/** Takes as long as a real comparison, for an e-mail nobody has: the answer's time tells nothing. */
export async function comparePretend(password: string): Promise<false> {
  decoy ??= hashPassword('nobody has this password');
  await isPassword(await decoy, password);
  return false;
}
