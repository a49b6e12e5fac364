'use client';

import { useEffect, useRef, useState } from 'react';
import type { FormAction } from '@/components/account/form-shell';
import { DraftProvider } from '@/components/garage/draft-context';
import { DraftNotes } from '@/components/garage/draft-fields';
import type { Garage } from '@/components/garage/garage';
import { GarageProvider, useGarage } from '@/components/garage/garage-context';
import type { OpenDraft } from '@/components/garage/open-draft';
import { Photos } from '@/components/garage/photos';
import { addendumRoles } from '@/components/garage/photo-roles';
import { StatusLine } from '@/components/garage/status-line';
import { addendumFrom, addendumProblems } from '@/lib/domain/addendum';
import type { Fields } from '@/lib/domain/field-changes';
import { SealAddendum } from './seal-addendum';

export interface AddendumFormProps {
  action: FormAction;
  machine: string;
  /** The entry it adds to. */
  seq: number;
  /** One that was begun already, here or on another device. */
  draft: string | undefined;
  mayISeal: boolean;
}

/**
 * An addendum as it is written: kept on this device with every letter and on the server soon after, like a worksheet.
 * There is no review apart from it: what stands in the form is what is sealed.
 */
export function AddendumForm(props: AddendumFormProps) {
  return (
    <GarageProvider>
      <Opening {...props} />
    </GarageProvider>
  );
}

function Opening(props: AddendumFormProps) {
  const { machine, seq, draft } = props;
  const { garage, view } = useGarage();
  const [opened, setOpened] = useState<OpenDraft>();
  const isBegun = useRef(false);
  const isKnown = view.isReady && view.snapshot !== undefined;
  useEffect(() => {
    if (!garage || !isKnown || isBegun.current) return;
    isBegun.current = true;
    void openOrBegin(garage, { machine, seq, draft }).then(setOpened);
  }, [garage, isKnown, machine, seq, draft]);
  if (!opened) return <p className="tag">Opening what was begun</p>;
  return <Writing opened={opened} {...props} />;
}

/** What was typed here and not sent comes first; then what the server has; then an empty one. */
async function openOrBegin(
  garage: Garage,
  { machine, seq, draft }: Pick<AddendumFormProps, 'machine' | 'seq' | 'draft'>,
): Promise<OpenDraft> {
  const here = garage.view.drafts.filter(
    ({ view: { draft: one } }) =>
      one.kind === 'addendum' && one.subject === machine && one.refersToSeq === seq && one.state === 'open',
  );
  const unsent = here.find(({ view }) => view.unsentCount > 0 || view.files.some(({ state }) => state === 'waiting'));
  if (unsent) return unsent;
  const answer = draft === undefined ? undefined : await garage.open(draft);
  if (answer?.ok === true && answer.value.view.draft.state === 'open') return answer.value;
  const empty = here.find(({ view }) => !view.draft.isOnServer);
  return empty ?? garage.create('addendum', machine, undefined, seq);
}

const judge = (fields: Fields): Record<string, string> => addendumProblems(addendumFrom(fields));
const noRole = () => undefined;

function Writing({ opened, action, machine, seq, mayISeal }: AddendumFormProps & { opened: OpenDraft }) {
  const [isTried, setIsTried] = useState(false);
  return (
    <DraftProvider opened={opened} judge={judge} isAllShown={isTried}>
      <div className="max-w-[44rem] space-y-6 pb-24 lg:pb-0">
        <StatusLine opened={opened} />
        <DraftNotes path="text" label="What it adds" rows={8} />
        <div>
          <p className="label mb-1.5">Photos and papers (optional)</p>
          <Photos roles={addendumRoles} takeText="Take a photo" hasPdf pdfRole="document" nextRole={noRole} />
        </div>
        <SealAddendum action={action} machine={machine} seq={seq} mayISeal={mayISeal} onTry={() => setIsTried(true)} />
      </div>
    </DraftProvider>
  );
}
