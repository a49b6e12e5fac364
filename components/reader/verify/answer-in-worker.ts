import { checkFile, type CheckAnswer, type CheckRequest } from './check-file';

export type ToWorker = CheckRequest & { id: number };
export type FromWorker =
  | { kind: 'ready' }
  | { kind: 'stage'; id: number; stage: string }
  | { kind: 'answer'; id: number; answer: CheckAnswer }
  | { kind: 'failed'; id: number; message: string };

interface WorkerScope {
  postMessage(message: FromWorker): void;
  addEventListener(type: 'message', listener: (event: MessageEvent<ToWorker>) => void): void;
}

/** Takes requests from the page, one at a time, and answers each by its number. */
export function answerInWorker(): void {
  // The types of a worker and of a page cannot be in force together; these are the two members used.
  const scope = globalThis as unknown as WorkerScope;
  scope.addEventListener('message', ({ data }) => {
    const { id } = data;
    checkFile(data, (stage) => scope.postMessage({ kind: 'stage', id, stage })).then(
      (answer) => scope.postMessage({ kind: 'answer', id, answer }),
      (error: unknown) => scope.postMessage({ kind: 'failed', id, message: String(error) }),
    );
  });
  scope.postMessage({ kind: 'ready' });
}
