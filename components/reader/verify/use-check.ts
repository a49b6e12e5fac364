'use client';

import { useCallback, useEffect, useRef, useState } from 'react';
import type { CheckAnswer } from './check-file';
import type { Checker, LoadChecker } from './checker';
import { maxCheckMilliseconds, maxFileBytes, maxFileWords } from './limits';

export interface GivenFiles {
  file: File;
  key: string;
  against: File | null;
  roots: File | null;
  place?: { log: string; seq: number };
}

export type CheckState =
  | { at: 'loading' }
  | { at: 'ready' }
  | { at: 'checking'; name: string; stage: string }
  | { at: 'done'; name: string; answer: CheckAnswer; checkedAt: Date }
  | { at: 'failed'; name: string; sentence: string };

const tooLarge = (file: File) =>
  `“${file.name}” is larger than ${maxFileWords}, more than this page takes. Check it with verify.mjs on your own computer.`;
const tooLong = `This file took longer than ${maxCheckMilliseconds / 60_000} minutes, so the check was stopped and nothing is said about it. No real record takes that long; verify.mjs on your own computer has no such limit.`;

/**
 * Loads the check when the page opens and runs it on whatever file is given; of two files only the last counts. A
 * second checker is kept ready, so that one can be stopped and the next file checked without a connection.
 */
export function useCheck(load: LoadChecker) {
  const [state, setState] = useState<CheckState>({ at: 'loading' });
  const checkers = useRef<Promise<Checker>[]>([]);
  const turn = useRef(0);
  const isRunning = useRef(false);

  useEffect(() => {
    const loaded = [load(), load()];
    checkers.current = loaded;
    Promise.all(loaded).then(
      () => setState((now) => (now.at === 'loading' ? { at: 'ready' } : now)),
      () => setState({ at: 'failed', name: '', sentence: 'The check could not be loaded. Reload the page.' }),
    );
    return () => {
      for (const one of checkers.current) void one.then((checker) => checker.stop()).catch(() => {});
    };
  }, [load]);

  /** Stops what runs now. What is left in its place is loaded again when there is a connection. */
  const stop = useCallback(() => {
    isRunning.current = false;
    const running = checkers.current.shift();
    checkers.current.push(load());
    checkers.current.at(-1)?.catch(() => {});
    void running?.then((checker) => checker.stop()).catch(() => {});
  }, [load]);

  const cancel = useCallback(() => {
    turn.current += 1;
    stop();
    setState({ at: 'ready' });
  }, [stop]);

  const check = useCallback(
    (given: GivenFiles) => {
      const mine = ++turn.current;
      const { name } = given.file;
      const show = (next: CheckState) => {
        if (turn.current === mine) setState(next);
      };
      const large = [given.file, given.against, given.roots].find((one) => one !== null && one.size > maxFileBytes);
      if (large) return show({ at: 'failed', name, sentence: tooLarge(large) });
      if (isRunning.current) stop();
      isRunning.current = true;
      const limit = setTimeout(() => {
        if (turn.current !== mine) return;
        show({ at: 'failed', name, sentence: tooLong });
        turn.current += 1;
        stop();
      }, maxCheckMilliseconds);
      run(given, checkers.current[0] ?? load(), (stage) => show({ at: 'checking', name, stage }))
        .then((answer) => show({ at: 'done', name, answer, checkedAt: new Date() }))
        .catch(() => show({ at: 'failed', name, sentence: unreadable }))
        .finally(() => {
          clearTimeout(limit);
          if (turn.current === mine) isRunning.current = false;
        });
    },
    [load, stop],
  );

  return { state, check, cancel };
}

const unreadable =
  'This file could not be read to its end. It may have been moved or changed meanwhile, or be too large for this browser. Choose it again.';

async function run(given: GivenFiles, checker: Promise<Checker>, tell: (stage: string) => void): Promise<CheckAnswer> {
  tell('Reading the file');
  const { key, place } = given;
  const [file, against, roots] = await Promise.all([
    given.file.arrayBuffer(),
    given.against?.arrayBuffer() ?? null,
    given.roots?.arrayBuffer() ?? null,
  ]);
  return (await checker).check({ file, key, against, roots, ...(place === undefined ? {} : { place }) }, tell);
}
