import type { EntryFinding, Stamp } from '@/lib/evidence/finding';
import { cut } from './cut';
import { instantWords, momentWords } from './finding-words';

/** Claimed, sealed, proven: three times, never merged. */
export function EntryTimes({ entry }: { entry: EntryFinding }) {
  const { claimed, sealedAt, proven, earliestStamp, openedParts } = entry;
  const finished = momentWords(claimed?.finishedAt ?? claimed?.startedAt);
  const isOpened = openedParts.some(({ name }) => name === 'body');
  const times = [
    { term: 'Claimed', words: finished !== '' ? finished : isOpened ? 'no time' : 'closed', note: finished === '' ? '' : 'its author’s word' },
    { term: 'Sealed', words: sealedAt === null ? 'cannot be read' : instantWords(sealedAt), note: 'the installation’s word' },
    proven === null
      ? { term: 'Proven', words: 'not proven', note: stampWords(earliestStamp) }
      : { term: 'Proven', words: `no later than ${instantWords(proven.genTime)}`, note: `time stamp by ${proven.signer ?? 'an authority without a name'}, under your root ${proven.root?.name ?? ''}` },
  ];
  return (
    <dl className="my-1.5 grid gap-x-5 gap-y-1 sm:grid-cols-3">
      {times.map(({ term, words, note }) => (
        <div key={term} className="min-w-0">
          <dt className="label">{term}</dt>
          <dd className="text-[0.9375rem] leading-snug font-medium">
            <bdi>{cut(words)}</bdi>
          </dd>
          {note === '' ? null : (
            <dd className="tag leading-snug">
              <bdi>{cut(note)}</bdi>
            </dd>
          )}
        </div>
      ))}
    </dl>
  );
} // prettier-ignore

function stampWords(stamp: Stamp | null): string {
  if (stamp === null) return 'no time stamp covers it';
  const when = `a time stamp says ${instantWords(stamp.genTime)}`;
  return stamp.trust === 'own'
    ? `${when}, by an installation’s own test authority: not independent`
    : `${when}, and who made it is not established here`;
}
