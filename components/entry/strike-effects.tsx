import type { ReactNode } from 'react';
import { UserText } from '@/components/ui/user-text';
import type { StrikePreview } from '@/lib/services/preview-strike';

/** What will happen, before it happens. */
export function StrikeEffects({ preview, what = 'entry' }: { preview: StrikePreview; what?: 'entry' | 'line' }) {
  const { seq, kind, standingAgain, due, returned, takenAgain, countersigned, termsAfter } = preview;
  return (
    <section aria-labelledby="effects" className="border border-line bg-sheet px-4 py-3">
      <h2 id="effects" className="mb-2">
        What will happen
      </h2>
      <ul className="grid list-disc gap-2 pl-5">
        <li>
          {what === 'entry' ? 'Entry' : 'Line'} {seq} stays readable for ever, under a single line, with your reason
          beside it. It cannot be taken away.
        </li>
        {standingAgain.map((one) => (
          <li key={one}>
            {what === 'entry' ? 'Entry' : 'Line'} {one} stands again.
          </li>
        ))}
        {kind === 'service' ? (
          <li>It counts as not done, and its odometer reading no longer counts: forecasts may move by some days.</li>
        ) : null}
        {kind === 'purchase' ? <li>Its lots leave the shelf.</li> : null}
        {termsAfter === null ? null : <li>The terms of entry {termsAfter} hold again.</li>}
        {countersigned ? (
          <li>A shop has countersigned it. Its countersignature stays in the record and readable as well.</li>
        ) : null}
        <Listed
          title="On the schedule:"
          items={due.map(({ title, before, after }) => ({ title, text: `${title}: ${after}; until now ${before}` }))}
        />
        <Listed title="Back to the shelf:" items={returned.map((text) => ({ title: text, text }))} />
        <Listed title="Taken from the shelf again:" items={takenAgain.map((text) => ({ title: text, text }))} />
        <li>Should it turn out to have been right, the strike can be struck in turn. Nothing is ever unsaid.</li>
      </ul>
    </section>
  );
}

function Listed({ title, items }: { title: ReactNode; items: { title: string; text: string }[] }) {
  if (items.length === 0) return null;
  return (
    <li>
      {title}
      <ul className="mt-1 grid list-[square] gap-1 pl-5">
        {items.map(({ title: key, text }, index) => (
          <li key={`${index} ${key}`}>
            <UserText>{text}</UserText>
          </li>
        ))}
      </ul>
    </li>
  );
}
