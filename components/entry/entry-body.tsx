import { TermsTables } from '@/components/schedule/terms-tables';
import { Notice } from '@/components/ui/notice';
import { fromBase64Url } from '@/lib/evidence/bytes';
import { sha256Hex } from '@/lib/evidence/hash';
import { isKeyBody } from '@/lib/evidence/statement';
import type { EntryView } from '@/lib/services/record-view';
import { Countersignature } from './countersignature';
import type { EntryFacts, EntryLinks } from './entry-facts';
import { OpeningBoxes } from './opening-entry';
import { OtherEntry } from './other-entry';
import { KeyEntry, SignatureEntry } from './own-signature';
import { Plates } from './plates';
import { Said } from './said';
import { ServiceEntry } from './service-entry';
import { ThreeTimes } from './three-times';

export interface EntryBodyProps {
  entry: EntryView;
  facts: EntryFacts;
  links: EntryLinks;
}

/** What an entry says, by its kind. */
export function EntryBody({ entry, facts, links }: EntryBodyProps) {
  if (entry.kind === 'service' && entry.body !== null)
    return <ServiceEntry {...{ entry, facts, links }} body={entry.body} />;
  const { zone } = facts;
  return (
    <>
      <ThreeTimes sealedAt={entry.sealedAt} tokens={entry.tokens} zone={zone} />
      <div className="mt-4">
        {entry.body === null || entry.body === undefined ? (
          <Notice title="Its text is withheld">
            It is part of the record and counted, but not opened here. Its leaf hash stands below.
          </Notice>
        ) : (
          <KindBody {...{ entry, zone, links }} />
        )}
      </div>
      {entry.attachments.length === 0 ? null : (
        <div className="mt-6">
          <Plates
            attachments={entry.attachments}
            zone={zone}
            file={links.file}
            label="Plates"
            blackOut={(copy) => links.blackOut?.(entry.seq, copy)}
          />
        </div>
      )}
      <Said notes={entry.notes} author={entry.author} />
    </>
  );
}

function KindBody({ entry, zone, links }: { entry: EntryView; zone: string; links: EntryLinks }) {
  if (entry.kind === 'opening' && entry.body !== null) return <OpeningBoxes body={entry.body} />;
  if (entry.kind === 'terms' && entry.body !== null) return <TermsTables terms={entry.body} />;
  if (entry.kind === 'countersignature' && entry.body !== null) {
    const { seq, sealedAt, author, body, ownSignature } = entry;
    return <Countersignature {...{ seq, sealedAt, author, body, ownSignature, zone }} />;
  }
  if (entry.kind === 'signature') return <SignatureEntry found={entry.ownSignature} entry={links.entry} />;
  if (entry.kind === 'key' && isKeyBody(entry.body)) {
    const fingerprint = sha256Hex(fromBase64Url(entry.body.publicKey));
    return <KeyEntry fingerprint={fingerprint} name={entry.author?.name ?? null} />;
  }
  return <OtherEntry body={entry.body} />;
}
