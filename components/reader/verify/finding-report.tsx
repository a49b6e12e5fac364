'use client';

import { useEffect, useRef } from 'react';
import { WitnessMark } from '@/components/mark/witness-mark';
import { Box, Boxes } from '@/components/ui/box';
import { Button } from '@/components/ui/button';
import { UserText } from '@/components/ui/user-text';
import { alterationCodes } from '@/lib/evidence/codes';
import { signedRoot, type Alteration, type Finding, type LogFinding } from '@/lib/evidence/finding';
import { whatIsShown } from '@/lib/evidence/format';
import { FindingEntries } from './finding-entries';
import { KeyPart } from './key-part';
import type { PublishedKeys } from './use-published-keys';

export interface FindingReportProps {
  name: string;
  finding: Finding;
  container: 'packet' | 'record' | null;
  published: PublishedKeys;
}

const titles: Record<Finding['outcome'], string> = {
  unchanged: 'Unchanged since it was sealed',
  altered: 'Altered: this is not what was sealed',
  unreadable: 'This is no record that can be read',
};

/** What the check found: the outcome, what it rests on, then every entry. */
export function FindingReport({ name, finding, container, published }: FindingReportProps) {
  const { outcome, alterations, remarks, against, notChecked, bundle, logs } = finding;
  const title = useRef<HTMLHeadingElement>(null);
  useEffect(() => title.current?.focus(), [finding]);
  return (
    <section data-outcome={outcome} aria-labelledby="outcome" className="mt-8 border-t border-line pt-6">
      <header className="flex items-center gap-5">
        {outcome === 'unreadable' ? null : (
          <WitnessMark state={outcome === 'unchanged' ? 'sealed' : 'altered'} size={104} className="shrink-0" />
        )}
        <div className="min-w-0">
          <p className="label">
            <UserText>{name}</UserText>
            {container === 'packet' ? ', the record inside the packet' : ''}
          </p>
          <h2
            id="outcome"
            ref={title}
            tabIndex={-1}
            className="text-[clamp(1.75rem,1.5rem+1.1vw,2.25rem)] outline-none"
          >
            {titles[outcome]}
          </h2>
          <p className={outcome === 'unchanged' ? '' : 'tone-gap'}>{finding.sentence}</p>
          {outcome === 'unchanged' && finding.key?.source === 'file' ? (
            <p className="tone-warn">
              The key is the file’s own: it fits itself, and who made it is still to be established.
            </p>
          ) : null}
        </div>
      </header>
      <Alterations alterations={alterations} logs={logs} />
      <Plain
        title="Know this, too"
        items={remarks.map(({ sentence, code }) => ({ text: sentence, technical: code }))}
      />
      <KeyPart usedKey={finding.key} published={published} />
      {bundle === null ? null : <Counts finding={finding} />}
      {against === null ? null : (
        <Plain
          title="Compared with the older file"
          items={[
            { text: against.sentence, technical: against.result },
            ...against.notes.flatMap(({ older, newer }) => [
              { text: 'The older signed checkpoint', technical: older },
              { text: 'The newer signed checkpoint', technical: newer },
            ]),
          ]}
        />
      )}
      {finding.entries.length === 0 ? null : <FindingEntries finding={finding} />}
      <Plain title="Not checked" items={notChecked.map((text) => ({ text }))} />
      {bundle === null ? null : <p className="mt-8 max-w-[70ch] border-l-4 border-l-petrol pl-4">{whatIsShown}</p>}
      <div className="not-printed mt-6">
        <Button onClick={() => window.print()}>Print this report</Button>
      </div>
    </section>
  );
}

function Alterations({ alterations, logs }: { alterations: Alteration[]; logs: LogFinding[] }) {
  if (alterations.length === 0) return null;
  const whose = (log: string | undefined) => logs.find(({ id }) => id === log)?.subject ?? 'machine';
  return (
    <section className="mt-6">
      <h3 className="mb-2">
        {alterations.length === 1 ? 'What is not as sealed' : `${alterations.length} things are not as sealed`}
      </h3>
      <ol className="divide-y divide-line border-y border-line">
        {alterations.map(({ code, sentence, technical, log, seq, part }, index) => (
          <li key={index} className="kept-together py-3">
            <p className="tone-gap">
              {seq === undefined
                ? ''
                : `${whose(log) === 'shelf' ? 'Shelf, line' : 'Entry'} ${seq}${part === undefined ? '' : `, ${part}`}: `}
              <UserText>{sentence}</UserText>
            </p>
            <details className="tag">
              <summary className="inline-flex min-h-7 items-center underline underline-offset-4">
                Technical line
              </summary>
              <p className="font-mono text-sm break-all">
                {code}: <bdi>{technical}</bdi>
              </p>
              <p>{alterationCodes[code]}</p>
            </details>
          </li>
        ))}
      </ol>
    </section>
  );
}

function Plain({ title, items }: { title: string; items: { text: string; technical?: string }[] }) {
  if (items.length === 0) return null;
  return (
    <section className="mt-6">
      <h3 className="mb-2">{title}</h3>
      <ul className="divide-y divide-line border-y border-line">
        {items.map(({ text, technical }, index) => (
          <li key={index} className="py-2.5">
            <UserText>{text}</UserText>
            {technical === undefined ? null : (
              <span className="block font-mono text-sm break-all whitespace-pre-line text-soft">
                <bdi>{technical}</bdi>
              </span>
            )}
          </li>
        ))}
      </ul>
    </section>
  );
}

function Counts({ finding: { counts, bundle, logs } }: { finding: Finding }) {
  const machine = logs.find(({ subject }) => subject === 'machine') ?? logs[0];
  return (
    <div className="mt-6">
      <Boxes columns={4} label="What was read">
        <Box label="Entries opened" isMeasure note={logs.length > 1 ? 'of all logs in the file' : undefined}>
          {counts.entriesOpened} of {counts.entries}
        </Box>
        <Box label="Parts opened" isMeasure>
          {counts.partsOpened}
        </Box>
        <Box label="Parts withheld" isMeasure>
          {counts.partsWithheld}
        </Box>
        <Box label="Logs" isMeasure>
          {logs.length}
        </Box>
        <Box label="Made" span={2} note={bundle?.purpose ? <UserText>{`For: ${bundle.purpose}`}</UserText> : undefined}>
          <UserText>{`${bundle?.number ?? ''}, ${bundle?.madeAt ?? ''}`}</UserText>
        </Box>
        {machine?.checkpoint ? (
          <Box label={`Root at size ${machine.checkpoint.size}`} span={2}>
            <span className="font-mono text-sm break-all">{signedRoot(machine.checkpoint)}</span>
          </Box>
        ) : null}
      </Boxes>
    </div>
  );
}
