import type { CheckAnswer, CheckRequest } from './check-file';
import type { FromWorker, ToWorker } from './check.worker';

export interface Checker {
  check(request: CheckRequest, tell: (stage: string) => void): Promise<CheckAnswer>;
  stop(): void;
}

/**
 * Fetches the check, whole, so that it works with the cable pulled afterwards. It runs beside the page, which stays
 * usable while a large packet is taken apart; where a browser refuses that, in the page itself.
 */
export async function loadChecker(): Promise<Checker> {
  try {
    return await inWorker();
  } catch {
    const { checkFile } = await import('./check-file');
    return { check: checkFile, stop: () => {} };
  }
}

function inWorker(): Promise<Checker> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(new URL('./check.worker.ts', import.meta.url), { type: 'module' });
    worker.onerror = () => {
      worker.terminate();
      reject(new Error('The check could not be started beside the page.'));
    };
    worker.onmessage = ({ data }: MessageEvent<FromWorker>) => {
      if (data.kind === 'ready') resolve(checkerOf(worker));
    };
  });
}

function checkerOf(worker: Worker): Checker {
  let lastId = 0;
  return {
    stop: () => worker.terminate(),
    check: (request, tell) =>
      new Promise((resolve, reject) => {
        const id = ++lastId;
        worker.onerror = (event) => reject(new Error(event.message));
        worker.onmessage = ({ data }: MessageEvent<FromWorker>) => {
          // What an earlier file still has to say is of no interest any more.
          if (data.kind === 'ready' || data.id !== id) return;
          if (data.kind === 'stage') tell(data.stage);
          else if (data.kind === 'answer') resolve(data.answer);
          else reject(new Error(data.message));
        };
        const handed = request.against === null ? [request.file] : [request.file, request.against];
        worker.postMessage({ ...request, id } satisfies ToWorker, handed);
      }),
  };
}
