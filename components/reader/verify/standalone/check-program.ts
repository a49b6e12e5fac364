import { answerInWorker } from '../answer-in-worker';
import { checkFile } from '../check-file';

/** Where the page finds the check when it has to run it itself. */
export const placeInPage = '__witnessmarkCheck';

// The same text runs beside the page, and in it where a browser refuses that: one program, one hash.
if (typeof document === 'undefined') answerInWorker();
else Object.assign(globalThis, { [placeInPage]: checkFile });
