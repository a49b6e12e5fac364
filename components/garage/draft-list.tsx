'use client';

import { useSyncExternalStore } from 'react';
import { LinkButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';
import { draftTitle, unfinishedStates } from './draft-words';
import { useDraft, useGarage } from './garage-context';
import { HashButton } from './hash-button';
import { offlineProblem } from './offline-page';
import type { OpenDraft } from './open-draft';
import { StatusLine } from './status-line';

/** Open worksheets, receipts and addenda of this person, and what this device cannot do. */
export function DraftList({ isPart = false }: { isPart?: boolean }) {
  const { view } = useGarage();
  const open = view.drafts.filter(({ view: { draft } }) => draft.state === 'open');
  // A fresh device has no list yet; an empty one would say that nothing is open.
  const isKnown = open.length > 0 || view.snapshot !== undefined || view.signal !== 'unknown';
  const worksheets = open.filter(({ view: { draft } }) => draft.kind === 'worksheet');
  const receipts = open.filter(({ view: { draft } }) => draft.kind === 'receipt');
  // One that was only looked at holds nothing and is on no other device.
  const addenda = open.filter(
    ({ view: { draft, fields } }) => draft.kind === 'addendum' && (draft.isOnServer || Object.keys(fields).length > 0),
  );
  return (
    <>
      {isPart ? null : (
        <PageHead title={isKnown ? newsOf(worksheets.length, receipts.length) : 'Fetching your worksheets'} />
      )}
      <div className="mb-6 grid gap-2.5 sm:grid-cols-2">
        <HashButton size="big" look="main" href="#new-worksheet">
          Begin a worksheet
        </HashButton>
        <HashButton size="big" href="#new-receipt">
          Add a receipt
        </HashButton>
      </div>
      <Missing />
      <Drafts title="Worksheets" drafts={worksheets} />
      <Drafts title="Receipts" drafts={receipts} />
      <Drafts title="Addenda" drafts={addenda} />
    </>
  );
}

function newsOf(worksheets: number, receipts: number): string {
  const words = [
    worksheets === 0 ? '' : worksheets === 1 ? 'One worksheet' : `${worksheets} worksheets`,
    receipts === 0 ? '' : receipts === 1 ? 'one receipt' : `${receipts} receipts`,
  ].filter(Boolean);
  if (words.length === 0) return 'No worksheet is open';
  const text = `${words.join(' and ')} open`;
  return text.charAt(0).toUpperCase() + text.slice(1);
}

function Drafts({ title, drafts }: { title: string; drafts: readonly OpenDraft[] }) {
  if (drafts.length === 0) return null;
  return (
    <section className="mb-8">
      <h2 className="mb-1">{title}</h2>
      <ul className="border-t border-line">
        {drafts.map((opened) => (
          <DraftLine key={opened.view.draft.id} opened={opened} />
        ))}
      </ul>
    </section>
  );
}

/** One open draft; an interrupted service says in what condition the machine was left. */
export function DraftLine({ opened }: { opened: OpenDraft }) {
  const { draft, fields } = useDraft(opened);
  const { view } = useGarage();
  const subject = view.snapshot?.machines.find(({ id }) => id === draft.subject)?.name;
  const states = draft.kind === 'worksheet' ? unfinishedStates(fields) : [];
  return (
    <li className="border-b border-line py-2">
      <a href={placeOf(draft)} className="block min-h-14">
        {subject ? (
          <span className="label">
            <UserText>{subject}</UserText>
          </span>
        ) : null}
        <span className="figure block text-[1.375rem] text-petrol underline underline-offset-4">
          <UserText>{draftTitle(draft, fields)}</UserText>
        </span>
        {states.map((state) => (
          <span key={state} className="tone-gap block text-lg">
            {state}
          </span>
        ))}
      </a>
      <StatusLine opened={opened} />
    </li>
  );
}

/** An addendum is written on the page of its entry. */
function placeOf({ kind, id, subject, refersToSeq }: OpenDraft['view']['draft']): string {
  return kind === 'addendum' ? paths.addendum(subject, refersToSeq ?? 0) : `#${kind}/${id}`;
}

const neverChanges = () => () => undefined;

function Missing() {
  const { view, isKept } = useGarage();
  const offline = useSyncExternalStore(neverChanges, offlineProblem, () => undefined);
  const lines = [
    ...(isKept
      ? []
      : ['This browser keeps nothing: what you type lasts only while this page is open, until it is sent.']),
    ...(offline ? [offline] : []),
  ];
  const isSignedOut = view.signal === 'not-signed-in';
  return (
    <div className="mb-6 space-y-3 empty:hidden">
      {isSignedOut ? (
        <Notice
          tone="warn"
          title="Not signed in"
          actions={
            <LinkButton href={paths.signIn} prefetch={false}>
              Sign in
            </LinkButton>
          }
        >
          Everything you type is kept on this phone and sent once you have signed in.
        </Notice>
      ) : null}
      {lines.map((line) => (
        <p key={line} className="tag">
          {line}
        </p>
      ))}
    </div>
  );
}
