import { UserText } from '@/components/ui/user-text';
import type { AuthorPart, ServiceBody } from '@/lib/evidence/format';
import { authorWords } from './words';

export interface SaidProps {
  notes: string | null;
  statement?: string | undefined;
  author: AuthorPart | null;
  recorded?: ServiceBody['recorded'];
}

/** In the author's own words, and whose they are. */
export function Said({ notes, statement, author, recorded }: SaidProps) {
  return (
    <>
      {notes === null ? null : (
        <section className="mt-8">
          <h2 className="mb-1">Notes</h2>
          <p className="max-w-[70ch]">
            <UserText isMultiline>{notes}</UserText>
          </p>
        </section>
      )}
      {statement === undefined ? null : (
        <section className="mt-8">
          <h2 className="mb-1">Statement</h2>
          <p className="max-w-[70ch]">
            <UserText isMultiline>{statement}</UserText>
          </p>
          {recorded === 'from-paper' ? <p className="tag mt-1">Recorded later, from paper.</p> : null}
        </section>
      )}
      {author === null ? null : (
        <p className="tag mt-3">
          Author: <UserText>{authorWords(author)}</UserText>
        </p>
      )}
    </>
  );
}
