import { randomUUID } from 'node:crypto';
import type { Metadata } from 'next';
import { seqFrom } from '@/app/(rider)/seq-from';
import { EraseForm } from '@/components/entry/erase-form';
import { EraseReach } from '@/components/entry/erase-reach';
import { shelfEntryTitle } from '@/components/shelf/shelf-line';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { previewErasure } from '@/lib/services/preview-erasure';
import { readShelfEntry } from '@/lib/services/read-shelf-page';
import { eraseLineAction } from './actions';

export const metadata: Metadata = { title: 'Erase a part of a receipt' };

export default async function EraseLinePage({ params }: { params: Promise<{ shelf: string; seq: string }> }) {
  const { shelf, seq: asked } = await params;
  const person = await requirePerson();
  const seq = seqFrom(asked);
  const { parts } = await orNotFound(previewErasure({ person, subject: { shelf }, seq }));
  const { entry, name } = await orNotFound(readShelfEntry({ person, shelf, seq }));
  return (
    <>
      <PageHead
        label={<UserText>{`${name}, line ${seq}: ${shelfEntryTitle(entry)}`}</UserText>}
        title={`Erase a part of line ${seq}`}
        note="For a name, prices or a picture that has to go. What was bought cannot be erased: if it is wrong, strike the line."
        actions={<LinkButton href={paths.shelfEntry(shelf, seq)}>Back to the line</LinkButton>}
      />
      <div className="grid max-w-[44rem] gap-6">
        <EraseReach where="line" />
        <EraseForm
          action={eraseLineAction}
          hidden={{ shelf, seq: String(seq), key: randomUUID() }}
          parts={parts}
          name={`line ${seq}`}
        />
      </div>
    </>
  );
}
