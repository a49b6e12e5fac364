import Link from 'next/link';
import type { ReactNode } from 'react';
import { WitnessMark } from '@/components/mark/witness-mark';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { describeDelay, formatInstant } from '@/lib/domain/instants';
import { mayBeStruck } from '@/lib/domain/standing';
import type { EntryView as Entry } from '@/lib/services/record-view';
import { Addenda } from './addenda';
import { Countersignature } from './countersignature';
import { EntryBody } from './entry-body';
import type { EntryFacts, EntryLinks } from './entry-facts';
import { HeldBy } from './held-by';
import { SignedByPart } from './own-signature';
import { StruckNotice } from './struck-notice';

export interface EntryViewProps {
  entry: Entry;
  facts: EntryFacts;
  links: EntryLinks;
  actions?: ReactNode;
  /** Plays the seal once. */
  isJustSealed?: boolean;
}

/** One entry with everything it says, shown alike to its owner, to a shop and to the reader of a viewing link. */
export function EntryView({ entry, facts, links, actions, isJustSealed }: EntryViewProps) {
  const { seq, title, state, leafHash, sealedAt, struckBy, countersignatures, refersTo } = entry;
  const { zone } = facts;
  const delay =
    entry.kind === 'service' && entry.body !== null ? `, ${describeDelay(entry.body.finishedAt, sealedAt)}` : '';
  return (
    <article>
      <PageHead
        mark={<WitnessMark state={state} leafHash={leafHash} size={92} animate={isJustSealed} />}
        label={`Entry ${seq}, sealed ${formatInstant(sealedAt, zone)}${delay}`}
        title={struckBy === null ? <UserText>{title}</UserText> : <StruckTitle>{title}</StruckTitle>}
        note={<StateWords entry={entry} links={links} />}
        actions={actions}
      />
      {struckBy === null ? null : <StruckNotice struck={struckBy} zone={zone} href={links.entry?.(struckBy.seq)} />}
      {refersTo === null ? null : (
        <p className="mb-4">
          About <EntryLink seq={refersTo.seq} links={links} />.
        </p>
      )}
      <EntryBody {...{ entry, facts, links }} />
      {countersignatures.length === 0 ? null : (
        <section className="mt-8">
          <h2 className="mb-3">{countersignatures.length === 1 ? 'Countersignature' : 'Countersignatures'}</h2>
          <div className="grid gap-4">
            {countersignatures.map((one) => (
              <Countersignature key={one.seq} {...one} zone={zone} entry={links.entry} />
            ))}
          </div>
        </section>
      )}
      {entry.signedBy === undefined ? null : <SignedByPart signedBy={entry.signedBy} zone={zone} links={links} />}
      <Addenda entry={entry} facts={facts} links={links} />
      <HeldBy
        leafHash={leafHash}
        previous={entry.previous}
        tokens={entry.tokens}
        stampsToCome={entry.stampsToCome}
        withheld={entry.withheld}
        erasures={entry.erasures}
        entry={links.entry}
        log={facts.log}
        zone={zone}
      />
    </article>
  );
}

function StruckTitle({ children }: { children: string }) {
  return (
    <s className="text-soft decoration-2">
      <span className="sr-only">Struck: </span>
      <UserText>{children}</UserText>
    </s>
  );
}

/** What the mark says, in words; no more than the record itself tells. */
function StateWords({ entry, links }: { entry: Entry; links: EntryLinks }) {
  if (entry.state === 'struck') return 'Withdrawn; it stays readable.';
  if (entry.state === 'waiting') return 'Sealed. Its time stamp is still to come.';
  if (entry.state === 'sealed') {
    return mayBeStruck(entry.kind)
      ? 'Sealed. It can be added to or struck, never edited.'
      : 'Sealed. It can be added to, never edited.';
  }
  return (
    <>
      Sealed, and countersigned
      {entry.countersignatures.map(({ seq, body }) => (
        <span key={seq}>
          {' '}
          by <UserText>{body.shop.name}</UserText> in <EntryLink seq={seq} links={links} />
        </span>
      ))}
      .
    </>
  );
}

function EntryLink({ seq, links }: { seq: number; links: EntryLinks }) {
  const href = links.entry?.(seq);
  return href === undefined ? (
    <>entry {seq}</>
  ) : (
    <Link className="link" href={href}>
      entry {seq}
    </Link>
  );
}
