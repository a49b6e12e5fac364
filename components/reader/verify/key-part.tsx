import { Definition } from '@/components/ui/definition';
import type { Finding } from '@/lib/evidence/finding';
import type { PublishedKeys } from './use-published-keys';

export interface KeyPartProps {
  usedKey: Finding['key'];
  published: PublishedKeys;
}

/** Which key it was checked with, and how far that key can be known from here. */
export function KeyPart({ usedKey, published }: KeyPartProps) {
  if (usedKey === null) return null;
  const isPublished = published?.some(({ verifierKey }) => verifierKey === usedKey.verifierKey);
  const comparison =
    isPublished === undefined
      ? 'The keys of the installation that serves this page could not be fetched, so they were not compared.'
      : isPublished
        ? 'The installation that serves this page publishes this same key. But this page comes from the installation being checked, so that alone proves nothing: compare the fingerprint with one from a mail about this record, an older packet, or the people who made it.'
        : 'The installation that serves this page does not publish this key: the record comes from another installation, or somebody else made this file.';
  return (
    <section className="mt-6">
      <h3 className="mb-2">The key</h3>
      <Definition
        label="The key"
        items={[
          {
            term: 'Checked with',
            detail: usedKey.source === 'reader' ? 'the key you gave' : 'the key that the file itself carries',
            tone: usedKey.source === 'reader' ? 'plain' : 'warn',
          },
          {
            term: 'Fingerprint',
            detail: <span className="font-mono text-sm">{usedKey.fingerprint}</span>,
          },
          {
            term: 'Verifier key',
            detail: (
              <bdi dir="ltr" className="font-mono text-sm break-all">
                {usedKey.verifierKey}
              </bdi>
            ),
          },
          { term: 'This installation', detail: comparison, tone: isPublished === false ? 'gap' : 'plain' },
        ]}
      />
    </section>
  );
}
