import Link from 'next/link';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { EntryView } from '@/lib/services/record-view';
import type { EntryFacts, EntryLinks } from './entry-facts';
import { Plates } from './plates';
import { addedWords, addendumText, authorWords } from './words';

export interface AddendaProps {
  entry: EntryView;
  facts: EntryFacts;
  links: EntryLinks;
}

/** What was added to an entry later, whole: its words, its pictures, when it was sealed and whose it is. */
export function Addenda({ entry, facts, links }: AddendaProps) {
  const { seq, addenda } = entry;
  if (facts.entries === undefined && addenda.length > 0) {
    return <p className="mt-6">Added to later, in {addedWords(addenda)}.</p>;
  }
  const added = facts.entries?.filter((one) => one.kind === 'addendum' && one.refersTo?.seq === seq) ?? [];
  if (added.length === 0) return null;
  return (
    <section className="mt-8">
      <h2 className="mb-3">{added.length === 1 ? 'Added later' : `Added later, ${added.length} times`}</h2>
      <div className="grid gap-4">
        {added.map((one) => (
          <Addendum key={one.seq} addendum={one} facts={facts} links={links} />
        ))}
      </div>
    </section>
  );
}

function Addendum({ addendum, facts, links }: Omit<AddendaProps, 'entry'> & { addendum: EntryView }) {
  const { seq, sealedAt, author, attachments, struckBy } = addendum;
  const href = links.entry?.(seq);
  const name = `Addendum, entry ${seq}`;
  return (
    <article id={`entry-${seq}`} aria-label={name} className="kept-together border border-line bg-sheet px-4 py-3">
      <p className="label">
        {href === undefined ? (
          name
        ) : (
          <Link className="link" href={href}>
            {name}
          </Link>
        )}
        , sealed {formatInstant(sealedAt, facts.zone)}
        {author === null ? null : (
          <>
            , <UserText>{authorWords(author)}</UserText>
          </>
        )}
      </p>
      {struckBy === null ? null : (
        <p className="tone-gap mt-1">
          Struck by entry {struckBy.seq}: <UserText>{struckBy.reason}</UserText>
        </p>
      )}
      <p className="mt-1 max-w-[70ch]">{wordsOf(addendum)}</p>
      {attachments.length === 0 || struckBy !== null ? null : (
        <div className="mt-4">
          <Plates attachments={attachments} zone={facts.zone} file={links.file} label={`Plates of addendum ${seq}`} />
        </div>
      )}
    </article>
  );
}

function wordsOf({ body, struckBy }: EntryView) {
  const text = addendumText(body);
  if (text === undefined) return 'Its text is withheld.';
  if (struckBy === null) return <UserText isMultiline>{text}</UserText>;
  return (
    <s className="text-soft">
      <UserText isMultiline>{text}</UserText>
    </s>
  );
}
