import { WitnessMark } from '@/components/mark/witness-mark';
import { Hash } from '@/components/ui/hash';
import { UserText } from '@/components/ui/user-text';
import { alterationCodes } from '@/lib/evidence/codes';
import type { EntryFinding, Finding } from '@/lib/evidence/finding';
import { entryWords, instantWords, momentWords } from './finding-words';

/** Every line of every log in the file, the machine's first: in words, with the technical line beneath. */
export function FindingEntries({ finding: { entries, logs, outcome } }: { finding: Finding }) {
  return logs.map(({ id, subject, origin }) => (
    <section key={id} className="mt-8">
      <h3 className="mb-1">{subject === 'machine' ? 'Entry by entry' : 'Receipts: lines of a shelf'}</h3>
      <p className="mb-2 font-mono text-sm break-all text-soft">
        {origin}/{id}
      </p>
      <ol
        role="list"
        className="relative border border-line bg-sheet before:absolute before:inset-y-0 before:left-12 before:border-l before:border-margin"
      >
        {entries
          .filter(({ log }) => log === id)
          .map((entry) => (
            <EntryLine key={entry.seq} entry={entry} isAllUnchanged={outcome === 'unchanged'} />
          ))}
      </ol>
    </section>
  ));
}

/** Where something else in the file is wrong, a line with nothing found is not called unchanged. */
function EntryLine({ entry, isAllUnchanged }: { entry: EntryFinding; isAllUnchanged: boolean }) {
  const { seq, leafHash, problems, withheldParts, sealedAt, claimed, earliestStamp } = entry;
  const { title, says, gaps } = entryWords(entry);
  const isAltered = problems.length > 0;
  const finished = momentWords(claimed?.finishedAt ?? claimed?.startedAt);
  return (
    <li className="kept-together grid grid-cols-[3rem_minmax(0,1fr)_5.5rem] border-b border-hair py-3 last:border-b-0">
      <span className="figure pr-2.5 text-right text-xl font-medium text-soft">
        <span className="sr-only">Line </span>
        {seq}
      </span>
      <div className="min-w-0 px-3">
        <p className="font-semibold">
          <UserText>{title}</UserText>
        </p>
        {says.map((line, index) => (
          <p key={index} className="text-[0.9375rem]">
            <UserText isMultiline>{line}</UserText>
          </p>
        ))}
        {gaps.map((line, index) => (
          <p key={index} className="tone-gap text-[0.9375rem]">
            Gap: <UserText>{line}</UserText>
          </p>
        ))}
        {problems.map((code) => (
          <p key={code} className="tone-gap">
            {alterationCodes[code]}
          </p>
        ))}
        <p className="tag">
          {finished === '' ? '' : `Claimed ${finished}. `}Sealed{' '}
          {sealedAt === null ? 'at a time that cannot be read' : instantWords(sealedAt)}.{' '}
          {earliestStamp === null
            ? 'Not proven: no time stamp covers it.'
            : `Not proven: a time stamp says ${instantWords(earliestStamp.genTime)}, and who made it is not established here.`}
          {withheldParts.length === 0 ? '' : ` Withheld: ${withheldParts.join(', ')}.`}
        </p>
        <details className="tag">
          <summary className="inline-flex min-h-7 items-center underline underline-offset-4">Technical line</summary>
          <p>
            {entry.kind ?? 'unreadable'}; parts opened: {entry.openedParts.map(({ name }) => name).join(' ') || 'none'}
          </p>
          <Hash value={leafHash} what="leaf hash" />
          {earliestStamp === null ? null : (
            <p className="break-all">
              Time stamp: serial {earliestStamp.serial}, policy {earliestStamp.policy}, on the checkpoint of size{' '}
              {earliestStamp.size}
            </p>
          )}
        </details>
      </div>
      <div className="flex flex-col items-center gap-1 text-center">
        <WitnessMark state={isAltered ? 'altered' : 'sealed'} leafHash={leafHash} title={null} size={48} />
        <span className={isAltered ? 'tone-gap text-sm' : 'text-sm text-soft'}>
          {isAltered ? 'altered' : isAllUnchanged ? 'unchanged' : 'nothing found here'}
        </span>
      </div>
    </li>
  );
}
