'use client';

import { useEffect, useState, type ReactNode } from 'react';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { paths } from '@/lib/paths';
import type { Failure } from './garage-api';
import { useGarage } from './garage-context';
import type { OpenDraft } from './open-draft';

interface DraftLoaderProps {
  id: string;
  what: 'worksheet' | 'receipt';
  children: (opened: OpenDraft) => ReactNode;
}

/** Opens a draft this device keeps, else fetches it. */
export function DraftLoader({ id, what, children }: DraftLoaderProps) {
  const { garage, view } = useGarage();
  const here = view.drafts.find(({ view: { draft } }) => draft.id === id);
  const [failure, setFailure] = useState<Failure>();
  useEffect(() => {
    if (here || !garage) return;
    void garage.open(id).then((answer) => setFailure(answer.ok ? undefined : answer));
    // A new signal is worth another try.
  }, [garage, here, id, view.signal]);
  if (here) return children(here);
  if (!failure) return <p className="tag">Fetching the {what}</p>;
  return (
    <Notice tone="warn" title={`This ${what} is not on this phone`} actions={<WayOn why={failure.why} />}>
      {reason(failure, what)}
    </Notice>
  );
}

function reason(failure: Failure, what: string): string {
  if (failure.why === 'refused') return failure.sentence;
  if (failure.why === 'not-signed-in') return `Sign in to fetch the ${what} from the server.`;
  return `It was begun on another device and is fetched as soon as there is signal.`;
}

function WayOn({ why }: { why: Failure['why'] }) {
  if (why === 'not-signed-in')
    return (
      <LinkButton href={paths.signIn} prefetch={false}>
        Sign in
      </LinkButton>
    );
  return (
    <a className="link" href="#list">
      Open worksheets and receipts
    </a>
  );
}
