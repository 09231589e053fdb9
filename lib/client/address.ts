/** Filters live in the address: these read it and write it, leaving out what is at its rest value. */
export type SearchParams = Record<string, string | string[] | undefined>;

export function textParam(params: SearchParams, name: string): string {
  const value = params[name];
  return (Array.isArray(value) ? value[0] : value) ?? '';
}

/** A positive whole number, or null. */
export function idParam(params: SearchParams, name: string): number | null {
  const value = Number(textParam(params, name));
  return Number.isInteger(value) && value > 0 ? value : null;
}

export function addressOf(path: string, values: Record<string, string | number | boolean | null>): string {
  const query = new URLSearchParams();
  for (const [name, value] of Object.entries(values)) {
    if (value !== null && value !== '' && value !== false && value !== 0) query.set(name, String(value));
  }
  const text = query.toString();
  return text ? `${path}?${text}` : path;
}
