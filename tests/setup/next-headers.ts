/** Stands in for next/headers outside a request: the cookie jar a test signs in with. */
const jar = new Map<string, string>();
const sent = new Map<string, string>();

export function testCookies(): Map<string, string> {
  return jar;
}

export function testHeaders(): Map<string, string> {
  return sent;
}

export async function cookies() {
  return {
    get: (name: string) => (jar.has(name) ? { name, value: jar.get(name) ?? '' } : undefined),
    set: (name: string, value: string) => void jar.set(name, value),
    delete: (name: string) => void jar.delete(name),
  };
}

export async function headers() {
  return new Headers([...sent.entries()]);
}
