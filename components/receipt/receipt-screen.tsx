'use client';

import { useCallback, useState } from 'react';
import { DraftProvider } from '@/components/garage/draft-context';
import { useDraft, useGarage } from '@/components/garage/garage-context';
import type { OpenDraft } from '@/components/garage/open-draft';
import { receiptRoles } from '@/components/garage/photo-roles';
import { Photos } from '@/components/garage/photos';
import type { Photo } from '@/components/garage/photos-of';
import { StatusLine } from '@/components/garage/status-line';
import { receiptFrom, receiptProblems, type Fields } from '@/lib/domain/receipt';
import { ConfirmReceipt } from './confirm-receipt';
import { ReceiptFields } from './receipt-fields';
import { SealedReceipt } from './sealed-receipt';

/** The first photo is most likely the front, the second the back. */
function nextRole(photos: readonly Photo[]) {
  return photos.length === 0
    ? ('receipt-front' as const)
    : photos.length === 1
      ? ('receipt-back' as const)
      : ('receipt-page' as const);
}

/** Photo first, before the paper fades; then what it says. */
export function ReceiptScreen({ opened }: { opened: OpenDraft }) {
  const { draft } = useDraft(opened);
  const { view } = useGarage();
  const [fromServer, setFromServer] = useState<Record<string, string>>({});
  const [isAllShown, setIsAllShown] = useState(false);
  const judge = useCallback(
    (fields: Fields) => ({ ...fromServer, ...receiptProblems(receiptFrom(fields), { now: new Date().toISOString() }) }),
    [fromServer],
  );
  if (draft.state !== 'open') return <SealedReceipt draft={draft} />;
  const shelf = view.snapshot?.shelves.find(({ id }) => id === draft.subject);
  return (
    <DraftProvider opened={opened} judge={judge} isAllShown={isAllShown}>
      <header className="mb-5">
        <p className="label">Receipt{shelf ? `, ${shelf.name}` : ''}</p>
        <h1>What did you buy?</h1>
        <StatusLine opened={opened} />
      </header>
      <div className="grid gap-8 pb-24 lg:grid-cols-2 lg:gap-10 lg:pb-0">
        <section>
          <h2 className="mb-2 text-xl">Photo of both sides, or the PDF</h2>
          <Photos roles={receiptRoles} takeText="Photograph it" hasPdf nextRole={nextRole} />
        </section>
        <div>
          <ReceiptFields />
          <ConfirmReceipt
            onTry={() => setIsAllShown(true)}
            onRefused={(fields) => {
              setFromServer(fields);
              setIsAllShown(true);
            }}
          />
        </div>
      </div>
    </DraftProvider>
  );
}
