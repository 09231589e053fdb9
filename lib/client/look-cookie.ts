import type { Theme } from './light';

/** Cookies of the look: what the server needs to draw the first paint right. No person's data is in them. */
export const LOOK_COOKIE = 'look';
export const ZONE_COOKIE = 'zone';

export function readLook(value: string | undefined): { theme: Theme; goggles: boolean } {
  const [theme, light] = (value ?? '').split('.');
  return { theme: theme === 'paper' ? 'paper' : 'dark', goggles: light === 'neutral' };
}

/** A time zone this server knows, or UTC. */
export function readZone(value: string | undefined): string {
  if (!value) return 'UTC';
  try {
    new Intl.DateTimeFormat('en-GB', { timeZone: value });
    return value;
  } catch (problem) {
    if (problem instanceof RangeError) return 'UTC';
    throw problem;
  }
}
