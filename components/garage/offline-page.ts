/** Whether this browser can open the page without signal, and if not, what is missing. */
export function offlineProblem(): string | undefined {
  if (!window.isSecureContext) {
    return 'Opened over plain http: without signal this page will not open again. What you type is kept; open the app over https to use it in a garage with no signal.';
  }
  if (!('serviceWorker' in navigator)) {
    return 'This browser does not keep pages: without signal this page will not open again. What you type is kept.';
  }
  return undefined;
}

/** Has the service worker keep this page and its assets. The worker exists only in a built installation. */
export async function keepPageOffline(): Promise<void> {
  if (process.env.NODE_ENV !== 'production' || offlineProblem() !== undefined) return;
  try {
    await navigator.serviceWorker.register('/garage-worker.js', { scope: '/', updateViaCache: 'none' });
  } catch {
    // Private windows refuse workers; the page works on while it stays open.
  }
}
