/** Stands in for next/navigation outside a request: a redirect becomes an error that names its address. */
export function redirect(to: string): never {
  throw new Error(`REDIRECT ${to}`);
}

export function notFound(): never {
  throw new Error('NOT FOUND');
}
