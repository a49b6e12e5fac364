import { AddPasskeyForm, type AddPasskeyFormProps } from '@/components/passkey/add-passkey-form';
import { ownSignatureLimit } from '@/lib/domain/own-signature-words';

export interface OfferKeyProps extends AddPasskeyFormProps {
  /** Why no key can be added at this address; null if it can. */
  refusal: string | null;
}

/** Beside an answer: a key of one's own, in one step. */
export function OfferKey({ refusal, begin, finish, email }: OfferKeyProps) {
  return (
    <details className="mt-6 border border-line bg-sheet">
      <summary className="flex min-h-11 cursor-pointer items-center px-4 font-medium">
        Sign with a key of your own instead
      </summary>
      <div className="grid gap-4 border-t border-line p-4">
        <p>
          A key (a passkey) lives in your phone, computer or security key. With it you sign your statement yourself,
          outside this server. {ownSignatureLimit}
        </p>
        {refusal === null ? (
          <AddPasskeyForm {...{ begin, finish, email }} />
        ) : (
          <p className="tone-warn">No key can be added at this address. {refusal}</p>
        )}
      </div>
    </details>
  );
}
