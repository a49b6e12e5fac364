'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import type { AboutLines } from '@/lib/evidence/about-lines';
import type { Finding, LogFinding } from '@/lib/evidence/finding';
import { laterLines } from './about-lines';
import { EntryLine } from './entry-line';
import { linesAtOnce } from './limits';

interface FindingEntriesProps {
  finding: Finding;
  about: AboutLines;
  /** Nothing is altered and the key is not in doubt: a line with nothing found may be called unchanged. */
  isTrusted: boolean;
}

/** Every line of every log in the file, the machine’s first: in words, with the technical line beneath. */
export function FindingEntries(props: FindingEntriesProps) {
  return props.finding.logs.map((log) => <LogEntries key={log.id} log={log} {...props} />);
}

function LogEntries({ log, finding, about, isTrusted }: FindingEntriesProps & { log: LogFinding }) {
  const [shown, setShown] = useState(linesAtOnce);
  const own = finding.entries.filter((entry) => entry.log === log.id);
  const later = laterLines(own, about);
  const rest = own.length - shown;
  return (
    <section className="mt-8">
      <h3 className="mb-1">{log.subject === 'machine' ? 'Entry by entry' : 'Receipts: lines of a shelf'}</h3>
      <p className="mb-2 font-mono text-sm break-all text-soft">
        {log.origin}/{log.id}
      </p>
      <ol
        role="list"
        className="relative border border-line bg-sheet before:absolute before:inset-y-0 before:left-12 before:border-l before:border-margin"
      >
        {own.slice(0, shown).map((entry) => (
          <EntryLine
            key={entry.seq}
            entry={entry}
            about={about[`${log.id}/${entry.seq}`]}
            later={later.get(entry.seq)}
            isTrusted={isTrusted}
            names={finding}
          />
        ))}
      </ol>
      {rest > 0 ? (
        <div className="mt-3">
          <p className="tag">
            {shown} of {own.length} lines are shown. All were checked.
          </p>
          <Button className="not-printed mt-2" onClick={() => setShown(shown + linesAtOnce)}>
            Show {Math.min(rest, linesAtOnce)} more
          </Button>
        </div>
      ) : null}
    </section>
  );
}
