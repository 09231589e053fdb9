/** A place of this site to go to after signing in; anything that could lead elsewhere becomes the start. */
export function safeNext(asked: string): string {
  if (
    !asked.startsWith('/') ||
    asked.startsWith('//') ||
    asked.includes('\\') ||
    asked.startsWith('/sign-in')
  )
    return '/';
  return asked;
}
