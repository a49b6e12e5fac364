import { AnchorButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { OpenWorksheet } from '@/lib/services/read-bench';

export interface OpenWorksheetsProps {
  worksheets: OpenWorksheet[];
  zone: string;
}

/** Work that was begun and not sealed, with the state the machine was left in. */
export function OpenWorksheets({ worksheets, zone }: OpenWorksheetsProps) {
  if (worksheets.length === 0) return null;
  return (
    <section aria-labelledby="open-worksheets" className="mb-6">
      <h2 id="open-worksheets" className="mb-3">
        {headingOf(worksheets)}
      </h2>
      <ul className="grid gap-3">
        {worksheets.map(({ id, href, title, changedAt, states }) => (
          <li key={id}>
            <Notice
              tone={states.length > 0 ? 'gap' : 'plain'}
              title={<UserText>{title}</UserText>}
              actions={
                <AnchorButton href={href}>
                  Go on<span className="sr-only"> with {title}</span>
                </AnchorButton>
              }
            >
              {states.map((state) => (
                <p key={state} className="tone-gap">
                  {state}
                </p>
              ))}
              <p className="tag">Last changed {formatInstant(changedAt, zone)}</p>
            </Notice>
          </li>
        ))}
      </ul>
    </section>
  );
}

/** An addendum is none of the worksheets, and says itself what it is. */
function headingOf(open: readonly OpenWorksheet[]): string {
  if (open.some(({ isAddendum }) => isAddendum)) return 'Begun, not sealed';
  return open.length === 1 ? 'Open worksheet' : 'Open worksheets';
}
