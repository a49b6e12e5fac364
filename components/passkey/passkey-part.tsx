import type { FormAction } from '@/components/account/form-shell';
import { ConfirmButton } from '@/components/proof/confirm-button';
import { Hash } from '@/components/ui/hash';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import type { PasskeyLine } from '@/lib/services/list-passkeys';
import { AddPasskeyForm } from './add-passkey-form';
import { ownSignatureLimit } from '@/lib/domain/own-signature-words';

export interface PasskeyPartProps {
  /** Times in words. */
  keys: (Omit<PasskeyLine, 'createdAt' | 'lastUsedAt'> & { added: string; used: string | null })[];
  /** Why no key can be added at this address; null if it can. */
  refusal: string | null;
  begin: FormAction;
  finish: FormAction;
  remove: FormAction;
  email: string;
}

/** A person's own keys: what they are for, which there are, and how to add or remove one. */
export function PasskeyPart({ keys, refusal, begin, finish, remove, email }: PasskeyPartProps) {
  return (
    <div className="grid gap-5">
      <p>
        A key (a passkey) lives in your phone, computer or security key, not on this server. With one you sign yourself
        what you seal or countersign. Whoever has your key’s fingerprint from you can tell that a statement was signed
        with it; that a key is yours, a record alone says by this installation’s word. {ownSignatureLimit}
      </p>
      {keys.length === 0 ? null : (
        <ul className="border-t border-line">
          {keys.map((key) => (
            <KeyLine key={key.id} line={key} remove={remove} />
          ))}
        </ul>
      )}
      {refusal === null ? (
        <AddPasskeyForm {...{ begin, finish, email }} />
      ) : (
        <Notice tone="warn" title="No key can be added at this address">
          {refusal}
        </Notice>
      )}
    </div>
  );
}

function KeyLine({ line, remove }: { line: PasskeyPartProps['keys'][number]; remove: FormAction }) {
  const { id, name, fingerprint, added, used, madeFor } = line;
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 border-b border-line py-3">
      <div className="min-w-0">
        <p className="font-medium">
          <UserText>{name}</UserText>
        </p>
        <p className="tag">
          Added {added}, {used === null ? 'not used yet' : `last used ${used}`}
        </p>
        {madeFor === null ? null : (
          <p className="tone-warn text-[0.9375rem]">Made for {madeFor}: it does not work here.</p>
        )}
        <Hash value={fingerprint} what="fingerprint of the key" />
      </div>
      <ConfirmButton
        action={remove}
        name="passkey"
        value={id}
        text="Remove"
        busyText="Removing"
        label={`Remove the key ${name}`}
        title={
          <>
            Remove <UserText>{name}</UserText>
          </>
        }
      >
        <p>
          Nothing can be signed with it here any more. What was signed with it stays signed, and the records that name
          the key keep naming it. Your device may still list it: delete it there too.
        </p>
      </ConfirmButton>
    </li>
  );
}
