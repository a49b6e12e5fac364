import { Definition } from '@/components/ui/definition';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { InvitedEntry } from '@/lib/services/read-invited-entry';

/** Who asks, about what, and what a countersignature is, before the entry itself. */
export function CountersignMeaning({ invited: { invitation, machine, entry, zone } }: { invited: InvitedEntry }) {
  return (
    <section aria-labelledby="asked" className="mb-8 border-b border-line pb-6">
      <p className="figure mb-1 text-2xl" id="asked">
        <UserText>{invitation.invitedBy}</UserText> asks you to countersign entry {entry.seq}
      </p>
      <p className="mb-4 max-w-[70ch]">
        A countersignature is your shop’s own signed statement about this one entry: in which capacity you vouch for it,
        and in your words for what. It becomes an entry of the record, under your name and your shop’s, and is shown to
        everybody who reads the record. It is no warranty and no inspection report, and it says nothing about other
        entries. Sign only what you know to be so.
      </p>
      <Definition
        label="The invitation"
        items={[
          {
            term: 'Machine',
            detail: <UserText>{[machine.name, machine.vin].filter((one) => one !== null).join(', ')}</UserText>,
          },
          {
            term: 'Asked',
            detail: `${formatInstant(invitation.createdAt, zone)}${
              invitation.answer === null ? `, can be answered until ${formatInstant(invitation.expiresAt, zone)}` : ''
            }`,
          },
          ...(invitation.message === ''
            ? []
            : [{ term: 'They write', detail: <UserText isMultiline>{invitation.message}</UserText> }]),
        ]}
      />
    </section>
  );
}
