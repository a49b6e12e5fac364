import Link from 'next/link';
import { itemAnchor } from '@/components/bench/due-rules';
import { Box, Boxes } from '@/components/ui/box';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate } from '@/lib/domain/instants';
import type { AdherenceInterval, Mark } from '@/lib/domain/schedule';
import { formatDistance } from '@/lib/domain/units';
import { paths } from '@/lib/paths';
import type { ScheduleLine } from '@/lib/services/read-schedule';
import { actionWords, printedInterval, sourceWords } from './source-words';

/** One schedule item: what is printed, when it was done, when it is due, and how every interval was kept. */
export function ScheduleItemBoxes({ line, machine }: { line: ScheduleLine; machine: string }) {
  const { item, title, words, isDue, printed, due, intervals, summary } = line;
  const lastDone = due.since?.what === 'done' ? due.since : undefined;
  return (
    <section id={itemAnchor(item)} aria-labelledby={`${itemAnchor(item)}-title`} className="scroll-mt-20">
      <h2 id={`${itemAnchor(item)}-title`} className="mb-2">
        <UserText>{title}</UserText>
      </h2>
      <Boxes columns={4} label={title}>
        <Box label="Due" tone={isDue ? 'gap' : 'plain'} note={due.isFirstService ? 'its first service' : undefined}>
          {capitalised(words)}
        </Box>
        <Box label="Last done" note={lastDone?.odometer && `at ${formatDistance(lastDone.odometer)}`}>
          {lastDone === undefined ? (
            'Not in this record'
          ) : (
            <>
              {formatLocalDate(lastDone.on)}
              {lastDone.seq === undefined ? null : (
                <>
                  , <EntryLink seq={lastDone.seq} machine={machine} />
                </>
              )}
            </>
          )}
        </Box>
        <Box label="Interval, as printed" note={actionWords[printed.action]}>
          {capitalised(printedInterval(printed.interval))}
        </Box>
        <Box label="First service" note={printed.grace && `grace ${printedInterval(printed.grace)}`}>
          {printed.firstService === undefined ? 'As the interval' : printedInterval(printed.firstService)}
        </Box>
        <Box
          label={`How it was kept: ${summary.sentence}`}
          span="all"
          note={<UserText>{`Interval from: ${sourceWords(printed.source)}`}</UserText>}
        >
          {intervals.length === 0 ? (
            'Nothing to judge yet'
          ) : (
            <ol className="text-base font-normal">
              {intervals.map((interval) => (
                <Kept key={`${interval.from.on} ${interval.to.on} ${interval.to.seq}`} {...{ interval, machine }} />
              ))}
            </ol>
          )}
        </Box>
      </Boxes>
    </section>
  );
}

const capitalised = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

const tones: Partial<Record<AdherenceInterval['result'], string>> = {
  late: 'tone-gap',
  'not-known': 'tone-warn',
  'within-grace': 'tone-warn',
};

function Kept({ interval, machine }: { interval: AdherenceInterval; machine: string }) {
  return (
    <li className="flex flex-wrap gap-x-4 py-0.5">
      <span className="w-64 text-soft">
        <MarkWords mark={interval.from} machine={machine} /> to <MarkWords mark={interval.to} machine={machine} />
      </span>
      <span className={tones[interval.result]}>{interval.sentence}</span>
    </li>
  );
}

function MarkWords({ mark, machine }: { mark: Mark; machine: string }) {
  if (mark.what === 'done' && mark.seq !== undefined) return <EntryLink seq={mark.seq} machine={machine} />;
  const words = { 'first-use': 'first use', 'record-start': 'start of the record', now: 'today', done: 'done' };
  return words[mark.what];
}

function EntryLink({ seq, machine }: { seq: number; machine: string }) {
  return (
    <Link className="link" href={paths.entry(machine, seq)}>
      entry {seq}
    </Link>
  );
}
