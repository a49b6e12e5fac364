import { Definition } from '@/components/ui/definition';
import { Notice } from '@/components/ui/notice';
import type { Finding } from '@/lib/evidence/finding';
import type { KeyVerdict } from './key-verdict';

/** Said first of all: the key is not the one it should be. */
export function KeyAlarm({ alarm }: { alarm: NonNullable<KeyVerdict['alarm']> }) {
  return (
    <div className="border-4 border-gap" data-alarm>
      <Notice tone="gap" title={<span className="text-xl leading-tight">{alarm.title}</span>}>
        {alarm.sentences.map((sentence) => (
          <p key={sentence} className="mt-1">
            {sentence}
          </p>
        ))}
      </Notice>
    </div>
  );
}

/** Whose key it is: three questions, answered apart. */
export function KeyPart({ verdict, used }: { verdict: KeyVerdict; used: Finding['key'] }) {
  const { rows, fileKey } = verdict;
  return (
    <section aria-labelledby="whose-key" className="mt-6">
      <h3 id="whose-key" className="mb-2">
        Whose key?
      </h3>
      <Definition
        label="Whose key"
        items={[
          ...rows.map(({ term, words, tone }) => ({ term, detail: words, tone })),
          ...(fileKey === null ? [] : keyItems(used?.source === 'reader' ? 'in the file' : 'it was checked with', fileKey)),
          ...(used?.source === 'reader' && used.verifierKey !== fileKey?.verifierKey ? keyItems('you typed', used) : []),
        ]}
      />
    </section>
  );
} // prettier-ignore

function keyItems(which: string, key: { verifierKey: string; fingerprint: string }) {
  return [
    { term: `Fingerprint of the key ${which}`, detail: <span className="font-mono text-sm">{key.fingerprint}</span> },
    {
      term: `The key ${which}`,
      detail: (
        <bdi dir="ltr" className="font-mono text-sm break-all">
          {key.verifierKey}
        </bdi>
      ),
    },
  ];
}
