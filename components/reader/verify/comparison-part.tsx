'use client';

import { Button } from '@/components/ui/button';
import type { Comparison } from '@/lib/evidence/finding';
import { PlainList } from './plain-list';

const titles: Record<Comparison['result'], string> = {
  consistent: 'The older file is a beginning of this one',
  forked: 'The older file and this one contradict each other',
  shorter: 'The older file goes further than this one',
  'not-comparable': 'The older file could not be compared',
};

/** What the comparison with an older file found; where the two contradict each other, both signed checkpoints. */
export function ComparisonPart({ comparison }: { comparison: Comparison }) {
  const { result, sentence, notes } = comparison;
  const items = [
    { text: sentence },
    ...notes.flatMap(({ older, newer }) => [
      { text: 'Signed checkpoint out of the older file', technical: older },
      { text: 'Signed checkpoint out of this file', technical: newer },
    ]),
  ];
  return (
    <div data-comparison={result} className={result === 'consistent' ? '' : 'border-l-4 border-l-gap pl-4'}>
      <PlainList title={titles[result]} items={items}>
        {notes.length === 0 ? null : (
          <div className="mt-3 max-w-[70ch]">
            <p className="text-[0.9375rem]">
              One key signed two things that cannot both be true. Keep both files, and these two checkpoints: together
              they show it to anybody.
            </p>
            <div className="not-printed mt-2">
              <Button onClick={() => saveText(bothCheckpoints(comparison), 'both-checkpoints.txt')}>
                Download both checkpoints
              </Button>
            </div>
          </div>
        )}
      </PlainList>
    </div>
  );
}

function bothCheckpoints({ notes }: Comparison): string {
  return notes
    .map(({ log, older, newer }) => `Log ${log}\n\nOut of the older file:\n\n${older}\nOut of the newer file:\n\n${newer}`)
    .join('\n');
} // prettier-ignore

function saveText(text: string, name: string): void {
  const address = URL.createObjectURL(new Blob([text], { type: 'text/plain;charset=utf-8' }));
  const link = document.createElement('a');
  link.href = address;
  link.download = name;
  link.click();
  // Some browsers begin to read only after the click has returned.
  setTimeout(() => URL.revokeObjectURL(address), 60_000);
}
