'use client';

import { classes } from '@/components/ui/classes';
import { paths } from '@/lib/paths';
import { useDraft, useGarage } from './garage-context';
import type { OpenDraft } from './open-draft';
import { statusWords } from './status-words';

/** Where what was typed is now. Heard by a screen reader when it changes, seen at the top of every screen. */
export function StatusLine({ opened }: { opened: OpenDraft }) {
  const draft = useDraft(opened);
  const { view } = useGarage();
  const waitingFiles = draft.files.filter(({ state }) => state === 'waiting').length;
  const { words, tone, needsSignIn } = statusWords(draft, view.signal, waitingFiles);
  return (
    <p
      role="status"
      className={classes('min-h-6 text-[0.9375rem] leading-snug', tone === 'plain' ? 'text-soft' : `tone-${tone}`)}
    >
      {words}
      {needsSignIn ? (
        <>
          {' '}
          <a className="link inline-flex min-h-11 items-center" href={paths.signIn}>
            Sign in
          </a>
        </>
      ) : null}
    </p>
  );
}
