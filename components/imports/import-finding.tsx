import type { ReactNode } from 'react';
import { AlterationList } from '@/components/reader/verify/alteration-list';
import { instantWords } from '@/components/reader/verify/finding-words';
import { openedWords, provenSentence } from '@/components/reader/verify/outcome-words';
import { PlainList } from '@/components/reader/verify/plain-list';
import { Definition } from '@/components/ui/definition';
import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import { signedRoot } from '@/lib/evidence/finding';
import type { ImportNote } from '@/lib/services/staged-import';

/** What the check found, apart from the entries: opened parts, key, remarks, and which file it was. */
export function ImportFinding({ note, children }: { note: ImportNote; children?: ReactNode }) {
  const { finding, sha256, checkedAt } = note;
  const { outcome, bundle, logs, key, remarks, notChecked } = finding;
  const isReadable = outcome !== 'unreadable';
  return (
    <>
      <AlterationList finding={finding} />
      {children}
      {isReadable ? (
        <section className="mt-6">
          <h2 className="mb-2">Where it comes from</h2>
          <Definition
            label="Where it comes from"
            items={[
              ...logs.map(({ id, subject, origin, checkpoint }) => ({
                term: subject === 'machine' ? 'Origin and log' : 'A shelf’s log',
                detail: (
                  <span className="font-mono text-sm break-all">
                    <bdi>{origin}</bdi>/{id}
                    {checkpoint === null ? '' : `, size ${checkpoint.size}, root ${signedRoot(checkpoint)}`}
                  </span>
                ),
              })),
              {
                term: 'Checked with',
                detail:
                  key?.source === 'reader'
                    ? 'the key you gave'
                    : 'the key in the file itself: anybody could have made this file with a key of their own',
                tone: key?.source === 'reader' ? ('plain' as const) : ('warn' as const),
              },
              { term: 'Fingerprint of the key', detail: <span className="font-mono text-sm">{key?.fingerprint}</span> },
              {
                term: 'The export',
                detail: <UserText>{`${bundle?.number ?? ''}, made ${instantWords(bundle?.madeAt ?? '')}`}</UserText>,
              },
              { term: 'SHA-256 of the file', detail: <Hash value={sha256} what="SHA-256 of the file" /> },
              { term: 'Checked here', detail: instantWords(checkedAt) },
              {
                term: 'Opened',
                detail: openedWords(finding)
                  .map(({ log, words }) => (log.subject === 'machine' ? words : `of a shelf’s receipts, ${words}`))
                  .join('; '),
              },
            ]}
          />
        </section>
      ) : null}
      {isReadable ? <p className="mt-4 max-w-[70ch]">{provenSentence(finding)}</p> : null}
      <PlainList
        title="Know this, too"
        items={remarks.map(({ sentence, code }) => ({ text: sentence, technical: code }))}
      />
      <PlainList title="Not checked" items={notChecked.map((text) => ({ text }))} />
    </>
  );
}
