/** Called once when a server starts. A build collects pages without data, so it starts nothing. */
export async function register(): Promise<void> {
  // Written so that the bundler can leave the server's code out of every other runtime.
  if (process.env.NEXT_RUNTIME === 'nodejs') {
    if (process.env.NEXT_PHASE === 'phase-production-build') return;
    const { startServerWork } = await import('@/lib/services/start-server-work');
    await startServerWork();
  }
}
