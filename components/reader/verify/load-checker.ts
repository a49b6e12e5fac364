import { type Checker, inWorker } from './checker';

/**
 * The check on a served page. It runs beside the page, which stays usable while a large packet is taken apart; where a
 * browser refuses that, in the page itself.
 */
export async function loadChecker(): Promise<Checker> {
  try {
    return await inWorker(new Worker(new URL('./check.worker.ts', import.meta.url), { type: 'module' }));
  } catch {
    const { checkFile } = await import('./check-file');
    return { check: checkFile, stop: () => {} };
  }
}
