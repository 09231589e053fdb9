/** Runs once when the server process starts; not in the build, not where there is no Node. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME !== 'nodejs' || process.env.NEXT_PHASE === 'phase-production-build') return;
  const { startWork } = await import('@/lib/server/start-work');
  await startWork();
}
