import Link from 'next/link';
import { ownSignatureLimit, ownSignatureWords } from '@/lib/domain/own-signature-words';
import { Box, Boxes } from '@/components/ui/box';
import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { EntryView, SignedBy } from '@/lib/services/record-view';
import type { EntryLinks } from './entry-facts';

type Finding = EntryView['ownSignature'];

/** A signature made outside the server, as a cell among others; also that there is none, where one was possible. */
export function OwnSignatureBox({ found, entry }: { found: Finding; entry?: EntryLinks['entry'] }) {
  if (found === undefined) {
    return (
      <Box label="Own signature" span="all">
        None was made outside this server
      </Box>
    );
  }
  if (found.result === 'fails') {
    return (
      <Box label="Own signature" span="all" tone="gap" note={found.reason}>
        The signature it carries does not hold
      </Box>
    );
  }
  const { result } = found;
  return (
    <Box
      label="Own signature"
      span="all"
      tone={result === 'holds' ? 'plain' : 'warn'}
      note={
        <>
          {result === 'holds' ? (
            <HeldWords found={found} entry={entry} />
          ) : (
            'Whose key it is cannot be checked: the entry that names it is withheld here. '
          )}
          {ownSignatureLimit}
        </>
      }
    >
      {ownSignatureWords}
    </Box>
  );
}

function HeldWords({ found, entry }: { found: Extract<Finding, { result: 'holds' }>; entry: EntryLinks['entry'] }) {
  const { site, keySeq, keyFingerprint } = found.signature;
  const href = entry?.(keySeq);
  return (
    <>
      Approved on <UserText>{site}</UserText> with the key <Hash value={keyFingerprint} isShort />, named in{' '}
      {href === undefined ? (
        `entry ${keySeq}`
      ) : (
        <Link className="link" href={href}>
          entry {keySeq}
        </Link>
      )}
      .{' '}
    </>
  );
}

/** What a `signature` entry says. */
export function SignatureEntry({ found, entry }: { found: Finding; entry?: EntryLinks['entry'] }) {
  return (
    <Boxes label="What it says">
      <OwnSignatureBox found={found} entry={entry} />
    </Boxes>
  );
}

/** What a `key` entry says. */
export function KeyEntry({ fingerprint, name }: { fingerprint: string; name: string | null }) {
  return (
    <Boxes label="What it says">
      <Box label="Key" note="Statements that are signed with it later are checked by this entry.">
        {name === null ? 'A key of a person not named here' : <UserText>{`A key of ${name}`}</UserText>}
      </Box>
      <Box
        label="SHA-256 of the public key"
        note="Whose key it is, is this installation’s word: compare this with one you have from its holder."
      >
        <Hash value={fingerprint} what="fingerprint of the key" />
      </Box>
    </Boxes>
  );
}

/** Those who signed an entry in entries of their own. */
export function SignedByPart({ signedBy, zone, links }: { signedBy: SignedBy[]; zone: string; links: EntryLinks }) {
  return (
    <section className="mt-8">
      <h2 className="mb-3">{signedBy.length === 1 ? 'Own signature' : 'Own signatures'}</h2>
      <div className="grid gap-4">
        {signedBy.map(({ seq, sealedAt, author, ownSignature }) => (
          <Boxes key={seq} label={`Own signature, entry ${seq}`}>
            <Box label="Signed by" note={`Sealed ${formatInstant(sealedAt, zone)} as entry ${seq}`}>
              {author === null ? 'Name withheld' : <UserText>{`${author.name}, ${author.role}`}</UserText>}
            </Box>
            <OwnSignatureBox found={ownSignature} entry={links.entry} />
          </Boxes>
        ))}
      </div>
    </section>
  );
}
