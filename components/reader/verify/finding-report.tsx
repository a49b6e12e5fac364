'use client';

import { useEffect, useRef } from 'react';
import { Button } from '@/components/ui/button';
import { whatIsShown } from '@/lib/evidence/format';
import { AlterationList } from './alteration-list';
import type { Checked } from './check-file';
import { ComparisonPart } from './comparison-part';
import { FindingEntries } from './finding-entries';
import { gapItems, struckItems } from './gap-items';
import { KeyAlarm, KeyPart } from './key-part';
import { keyVerdict } from './key-verdict';
import { OutcomeHead } from './outcome-head';
import { PlainList } from './plain-list';
import { ThisCheck, type CheckedWith } from './this-check';
import { usePrintOpen } from './use-print-open';
import type { PublishedKeys } from './use-published-keys';

export interface FindingReportProps {
  name: string;
  checked: Checked;
  checkedAt: Date;
  published: PublishedKeys;
  checkedWith: CheckedWith;
}

/** What the check found: the outcome, whose key, what is altered, gaps and remarks, then every entry. */
export function FindingReport({ name, checked, checkedAt, published, checkedWith }: FindingReportProps) {
  const { finding, fileKeys, about } = checked;
  const { outcome, alterations, remarks, against, notChecked, bundle } = finding;
  const verdict = keyVerdict({ used: finding.key, fileKeys, published });
  const isReadable = outcome !== 'unreadable';
  const top = useRef<HTMLElement>(null);
  // What came is what counts now; whoever reads by ear is led to its beginning.
  useEffect(() => top.current?.focus(), [checked]);
  usePrintOpen(top);
  return (
    <section
      ref={top}
      tabIndex={-1}
      data-outcome={outcome}
      aria-labelledby="outcome"
      className="mt-8 border-t border-line pt-6 outline-none print:mt-0 print:border-t-0 print:pt-0 print:[&_.tone-gap]:text-ink print:[&_.tone-warn]:text-ink"
    >
      {isReadable && verdict.alarm !== null ? <KeyAlarm alarm={verdict.alarm} /> : null}
      <OutcomeHead name={name} checked={checked} isKeyDoubted={verdict.alarm !== null} />
      {isReadable ? <KeyPart verdict={verdict} used={finding.key} /> : null}
      <AlterationList finding={finding} />
      {against === null ? null : <ComparisonPart comparison={against} />}
      <PlainList title="Gaps that the record names itself" items={gapItems(finding, about)} />
      <PlainList title="Struck: withdrawn, and still readable" items={struckItems(finding, about)} />
      <PlainList
        title="Know this, too"
        items={remarks
          .filter(({ code }) => code !== 'key-from-file' || verdict.alarm === null)
          .map(({ sentence, code }) => ({ text: sentence, technical: code }))}
      />
      <PlainList title="Not checked" items={notChecked.map((text) => ({ text }))} />
      <ThisCheck name={name} checked={checked} checkedAt={checkedAt} checkedWith={checkedWith} />
      {finding.entries.length === 0 ? null : (
        <FindingEntries finding={finding} about={about} isTrusted={outcome === 'unchanged' && verdict.alarm === null} />
      )}
      {bundle === null ? null : (
        <p className="kept-together mt-8 max-w-[70ch] border-l-4 border-l-petrol pl-4">{whatIsShown}</p>
      )}
      <div className="not-printed mt-6">
        <Button onClick={() => window.print()}>Print this report</Button>
      </div>
      {alterations.length < 500 ? null : <p className="tag mt-2">No more than 500 alterations are listed.</p>}
    </section>
  );
}
