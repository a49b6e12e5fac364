import { Sheet } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { ListedLink } from '@/lib/services/list-proof';
import type { FormState } from '@/lib/form-state';
import { ConfirmButton } from './confirm-button';

export interface LinkListProps {
  links: ListedLink[];
  zone: string;
  revoke: (previous: FormState, form: FormData) => Promise<FormState>;
}

function stateWords({ state, expiresAt, revokedAt }: ListedLink, zone: string): string {
  if (state === 'revoked') return `Revoked ${formatInstant(revokedAt ?? '', zone)}`;
  if (expiresAt === null) return 'Open until revoked';
  return `${state === 'run-out' ? 'Ran out' : 'Open until'} ${formatInstant(expiresAt, zone)}`;
}

function openedWords({ timesOpened, lastOpenedAt }: ListedLink, zone: string): string {
  if (lastOpenedAt === null) return 'Never opened';
  const times = timesOpened === 1 ? 'once' : `${timesOpened} times`;
  return `Opened ${times}, last ${formatInstant(lastOpenedAt, zone)}`;
}

/** Every viewing link there ever was, newest first: for whom, how long, how often it was opened. */
export function LinkList({ links, zone, revoke }: LinkListProps) {
  if (links.length === 0) return <p className="tag">No viewing link has been made yet.</p>;
  return (
    <Sheet>
      <ul role="list" className="divide-y divide-hair">
        {links.map((link) => (
          <li key={link.id} className="flex flex-wrap items-center justify-between gap-x-5 gap-y-2 px-4 py-3">
            <div className="min-w-0 flex-1 basis-56">
              <p className={link.state === 'open' ? 'font-semibold' : 'text-soft'}>
                <UserText>{link.label}</UserText>
              </p>
              <p className="tag">
                {stateWords(link, zone)}. Made {formatInstant(link.createdAt, zone)}. {openedWords(link, zone)}.
              </p>
              <p className="tag">
                Opens: <UserText>{link.opens}</UserText>
              </p>
            </div>
            {link.state === 'open' ? (
              <ConfirmButton
                action={revoke}
                name="link"
                value={link.id}
                text="Revoke"
                busyText="Revoking"
                label={`Revoke the viewing link “${link.label}”`}
                title="Revoke this viewing link?"
              >
                <p>
                  <UserText>{link.label}</UserText> stops opening the record at the next request, for everybody who has
                  the address. It cannot be opened again; you can make a new one.
                </p>
                {link.isOfPacket ? (
                  <p className="tone-warn">Its QR code stands in a packet: that code will then lead to nothing.</p>
                ) : null}
              </ConfirmButton>
            ) : null}
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
