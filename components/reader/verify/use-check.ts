'use client';

import { useCallback, useEffect, useRef, useState } from 'react';
import type { CheckAnswer } from './check-file';
import { loadChecker, type Checker } from './load-checker';

export interface GivenFiles {
  file: File;
  key: string;
  against: File | null;
}

export type CheckState =
  | { at: 'loading' }
  | { at: 'ready' }
  | { at: 'checking'; name: string; stage: string }
  | { at: 'done'; name: string; answer: CheckAnswer }
  | { at: 'failed'; name: string; sentence: string };

/** Loads the check when the page opens and runs it on whatever file is given; of two files only the last counts. */
export function useCheck(): { state: CheckState; check: (given: GivenFiles) => void } {
  const [state, setState] = useState<CheckState>({ at: 'loading' });
  const checker = useRef<Promise<Checker>>(undefined);
  const turn = useRef(0);

  useEffect(() => {
    const loaded = loadChecker();
    checker.current = loaded;
    loaded.then(
      () => setState((now) => (now.at === 'loading' ? { at: 'ready' } : now)),
      () => setState({ at: 'failed', name: '', sentence: 'The check could not be loaded. Reload the page.' }),
    );
    return () => void loaded.then((one) => one.stop()).catch(() => {});
  }, []);

  const check = useCallback(({ file, key, against }: GivenFiles) => {
    const mine = ++turn.current;
    const show = (next: CheckState) => {
      if (turn.current === mine) setState(next);
    };
    const run = async () => {
      show({ at: 'checking', name: file.name, stage: 'Reading the file' });
      const [bytes, older, one] = await Promise.all([
        file.arrayBuffer(),
        against?.arrayBuffer() ?? null,
        checker.current ?? loadChecker(),
      ]);
      const answer = await one.check({ file: bytes, key, against: older }, (stage) =>
        show({ at: 'checking', name: file.name, stage }),
      );
      show({ at: 'done', name: file.name, answer });
    };
    run().catch(() => {
      const sentence =
        'This file could not be read to its end. It may have been moved, or be too large for this browser.';
      show({ at: 'failed', name: file.name, sentence });
    });
  }, []);

  return { state, check };
}
