import type { FromWorker, ToWorker } from './answer-in-worker';
import type { CheckAnswer, CheckRequest } from './check-file';

export interface Checker {
  /** Rejects when it is stopped. */
  check(request: CheckRequest, tell: (stage: string) => void): Promise<CheckAnswer>;
  stop(): void;
}
/** Makes a checker. Fetches whatever it needs, whole, so that it works with the cable pulled afterwards. */
export type LoadChecker = () => Promise<Checker>;

/** Waits until the worker says that it is there; a browser that refuses it, or a policy, says so by an error. */
export function inWorker(worker: Worker): Promise<Checker> {
  return new Promise((resolve, reject) => {
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
  let giveUp: ((reason: Error) => void) | undefined;
  return {
    stop: () => {
      worker.terminate();
      giveUp?.(new Error('The check was stopped.'));
    },
    check: (request, tell) =>
      new Promise((resolve, reject) => {
        const id = ++lastId;
        giveUp = reject;
        worker.onerror = (event) => reject(new Error(event.message));
        worker.onmessage = ({ data }: MessageEvent<FromWorker>) => {
          // What an earlier file still has to say is of no interest any more.
          if (data.kind === 'ready' || data.id !== id) return;
          if (data.kind === 'stage') tell(data.stage);
          else if (data.kind === 'answer') resolve(data.answer);
          else reject(new Error(data.message));
        };
        const handed = [request.file, request.against, request.roots].filter((one) => one !== null);
        worker.postMessage({ ...request, id } satisfies ToWorker, handed);
      }),
  };
}
