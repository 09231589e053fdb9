/** Are two results the same, digit for digit? */

export interface Difference {
  /** Where, as "orders.3.xPx". */
  path: string;
  was: unknown;
  is: unknown;
}

/** How long a fit took and which engine made it are no part of what it says. */
const NOT_COMPARED: readonly string[] = ['ms', 'engine'];

/** Everything in which two results differ, as they are written in JSON. Numbers must agree in every digit. */
export function differences(was: unknown, is: unknown, path = ''): Difference[] {
  if (Object.is(was, is) || (was === undefined && is === undefined)) return [];
  if (was === null || is === null || typeof was !== 'object' || typeof is !== 'object')
    return [{ path, was, is }];
  const before = was as Record<string, unknown>;
  const after = is as Record<string, unknown>;
  const keys = [...new Set([...Object.keys(before), ...Object.keys(after)])];
  return keys
    .filter((key) => path !== '' || !NOT_COMPARED.includes(key))
    .flatMap((key) => differences(before[key], after[key], path ? `${path}.${key}` : key));
}

/** The first differences in words, numbers with how far they are apart. */
export function differenceText(found: readonly Difference[], most = 3): string {
  const one = ({ path, was, is }: Difference) => {
    const far =
      typeof was === 'number' && typeof is === 'number' && was !== 0
        ? ` (by ${Math.abs((is - was) / was).toExponential(1)} of it)`
        : '';
    return `${path} ${short(was)} became ${short(is)}${far}`;
  };
  const rest = found.length > most ? `, and ${found.length - most} more` : '';
  return found.slice(0, most).map(one).join('; ') + rest;
}

function short(value: unknown): string {
  const text = JSON.stringify(value) ?? 'nothing';
  return text.length > 40 ? `${text.slice(0, 40)}…` : text;
}
