import { WitnessMark } from '@/components/mark/witness-mark';
import { UserText } from '@/components/ui/user-text';
import type { Checked } from './check-file';
import { openedWords, outcomeSentence, outcomeTitle, provenSentence } from './outcome-words';

const containers: Record<NonNullable<Checked['container']>, string> = {
  packet: 'packet: the record inside it was checked',
  export: 'export: the record inside it was checked',
  record: 'record',
};
const pageWords: Record<Checked['finding']['pages'], string> = {
  none: '',
  'not-checked': 'The pages of the packet were not checked. Read the entries here, not there.',
  checked: 'The pages of the packet are as they were signed. What counts is still the record inside, shown here.',
  changed: 'The pages of the packet were changed. Read the entries here, not there.',
};

/** The outcome in one sentence, with the witness mark; then how much of the record it is about. */
export function OutcomeHead({ name, checked, isKeyDoubted }: { name: string; checked: Checked; isKeyDoubted: boolean }) {
  const { finding, container, isSwapped } = checked;
  const { outcome, bundle, pages } = finding;
  // No mark where it would say more than was shown: of a file with a doubtful key, only that it is altered.
  const hasMark = outcome === 'altered' || (outcome === 'unchanged' && !isKeyDoubted);
  const opened = openedWords(finding);
  return (
    <header className="mt-4 flex flex-wrap items-center gap-x-5 gap-y-3 sm:flex-nowrap">
      {hasMark ? (
        <WitnessMark state={outcome === 'unchanged' ? 'sealed' : 'altered'} size={104} className="shrink-0" />
      ) : null}
      <div className="min-w-0">
        <p className="label">
          <UserText>{name}</UserText>
          {container === null ? '' : `, ${containers[container]}`}
        </p>
        <h2 id="outcome" className="text-[clamp(1.75rem,1.5rem+1.1vw,2.25rem)]">
          {outcomeTitle(finding, isKeyDoubted)}
        </h2>
        <p className={outcome === 'unchanged' ? '' : 'tone-gap'}>{outcomeSentence(finding)}</p>
        {isSwapped ? (
          <p className="tone-warn">
            The file you gave first is a signed checkpoint. So the other one was checked, and compared with it.
          </p>
        ) : null}
        {bundle === null ? null : (
          <>
            <p className="font-medium">
              {opened.map(({ log, words }, index) => (
                <span key={log.id}>
                  {index === 0 ? '' : '; '}
                  {log.subject === 'machine' ? words : `of a shelf’s receipts, ${words}`}
                </span>
              ))}
              .
            </p>
            <p className="text-[0.9375rem]">{provenSentence(finding)}</p>
            {pageWords[pages] === '' ? null : (
              <p className={pages === 'changed' ? 'tone-gap text-[0.9375rem]' : 'text-[0.9375rem]'}>{pageWords[pages]}</p>
            )}
          </>
        )}
      </div>
    </header>
  );
} // prettier-ignore
