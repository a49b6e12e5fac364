import Link from 'next/link';
import { paths } from '@/lib/paths';
import { SignEntry, type SignEntryProps } from './sign-entry';
import { ownSignatureLimit } from '@/lib/domain/own-signature-words';

export interface SignPartProps extends SignEntryProps {
  /** The person has a key that works here. */
  hasKey: boolean;
}

/** For an owner who has not signed an entry with a key of their own yet. */
export function SignPart({ hasKey, ...rest }: SignPartProps) {
  return (
    <section className="mt-8 print:hidden">
      <h2 className="mb-2">Your own signature</h2>
      <p className="mb-3 max-w-[60ch]">
        {hasKey ? (
          <>
            You have not signed this entry with your own key. A signature made outside this server is added to the
            record as an entry. {ownSignatureLimit}
          </>
        ) : (
          <>
            Entries can be signed with a key of your own, outside this server. You have none that works here:{' '}
            <Link className="link" href={`${paths.account}#own-key`}>
              add one to your account
            </Link>
            .
          </>
        )}
      </p>
      {hasKey ? <SignEntry {...rest} /> : null}
    </section>
  );
}
