import { answerInWorker } from './answer-in-worker';

answerInWorker();
