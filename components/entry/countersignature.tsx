import Link from 'next/link';
import { Box, Boxes } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatInstant, formatLocalDate, localDateOf } from '@/lib/domain/instants';
import type { AuthorPart, CountersignatureBody } from '@/lib/evidence/format';
import type { StatementFinding } from '@/lib/evidence/verify-statements';
import type { EntryLinks } from './entry-facts';
import { capacityWords } from '@/lib/domain/record-words';
import { OwnSignatureBox } from './own-signature';
import { confirmedWords } from './words';

export interface CountersignatureProps {
  seq: number;
  sealedAt: string;
  author: AuthorPart | null;
  body: CountersignatureBody;
  ownSignature?: StatementFinding | undefined;
  zone: string;
  /** Leads to the entry of the countersignature, where it is shown beside the entry it is about. */
  entry?: EntryLinks['entry'];
}

/** What a shop vouches for, in which capacity, and how far the shop itself is known. */
export function Countersignature({ seq, sealedAt, author, body, ownSignature, zone, entry }: CountersignatureProps) {
  const { shop, capacity, statement, invitedBy } = body;
  const href = entry?.(seq);
  return (
    <Boxes columns={3} isOneColumnOnPhone label={`Countersignature, entry ${seq}`}>
      <Box label="Shop" note={shop.address ? <UserText>{shop.address}</UserText> : undefined}>
        <UserText>{shop.name}</UserText>
        {shop.registration === undefined ? null : (
          <span className="tag block">
            Registration <UserText>{shop.registration}</UserText>
          </span>
        )}
      </Box>
      <Box label="In which capacity" note={author === null ? undefined : <UserText>{author.name}</UserText>}>
        {capacityWords[capacity].charAt(0).toUpperCase() + capacityWords[capacity].slice(1)}
      </Box>
      <Box
        label="Signed"
        note={
          href === undefined ? (
            `Entry ${seq}`
          ) : (
            <Link className="link" href={href}>
              Entry {seq}
            </Link>
          )
        }
      >
        {formatInstant(sealedAt, zone)}
      </Box>
      <Box label="Its words" span="all">
        <UserText isMultiline>{statement}</UserText>
      </Box>
      <OwnSignatureBox found={ownSignature} entry={entry} />
      <Box
        label="Account of the shop"
        note={
          <>
            Invited by <UserText>{invitedBy}</UserText>
          </>
        }
        tone={shop.confirmedBy === null ? 'warn' : 'plain'}
        span="all"
      >
        Since {formatLocalDate(localDateOf(shop.accountSince, zone))};{' '}
        <UserText>{confirmedWords(shop.confirmedBy)}</UserText>
      </Box>
    </Boxes>
  );
}
