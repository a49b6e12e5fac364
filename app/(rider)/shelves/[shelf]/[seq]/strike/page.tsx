import { randomUUID } from 'node:crypto';
import type { Metadata } from 'next';
import { seqFrom } from '@/app/(rider)/seq-from';
import { StrikeEffects } from '@/components/entry/strike-effects';
import { StrikeForm } from '@/components/entry/strike-form';
import { StrikeRefused } from '@/components/shelf/strike-refused';
import { shelfEntryTitle } from '@/components/shelf/shelf-line';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { UserText } from '@/components/ui/user-text';
import { orNotFound } from '@/lib/auth/guard';
import { requirePerson } from '@/lib/auth/session';
import { paths } from '@/lib/paths';
import { previewStrike } from '@/lib/services/preview-strike';
import { readShelfEntry } from '@/lib/services/read-shelf-page';
import { strikeLineAction } from './actions';

export const metadata: Metadata = { title: 'Strike a receipt' };

export default async function StrikeLinePage({ params }: { params: Promise<{ shelf: string; seq: string }> }) {
  const { shelf, seq: asked } = await params;
  const person = await requirePerson();
  const seq = seqFrom(asked);
  const preview = await orNotFound(previewStrike({ person, subject: { shelf }, seq }));
  const { entry, name } = await orNotFound(readShelfEntry({ person, shelf, seq }));
  const what = entry.purchase === undefined ? `line ${seq}` : `receipt ${seq}`;
  return (
    <>
      <PageHead
        label={<UserText>{`${name}, line ${seq}: ${shelfEntryTitle(entry)}`}</UserText>}
        title={`Strike ${what}?`}
        note="A strike withdraws a line of the shelf’s log for a reason. Both stay readable."
        actions={<LinkButton href={paths.shelfEntry(shelf, seq)}>Back to {what}</LinkButton>}
      />
      {preview.refusal === null ? (
        <div className="grid max-w-[44rem] gap-6">
          <StrikeEffects preview={preview} what="line" />
          <StrikeForm action={strikeLineAction} hidden={{ shelf, seq: String(seq), key: randomUUID() }} name={what} />
        </div>
      ) : (
        <StrikeRefused refusal={preview.refusal} uses={preview.uses} />
      )}
    </>
  );
}
