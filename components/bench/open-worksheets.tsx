import { AnchorButton } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import { paths } from '@/lib/paths';
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
        {worksheets.length === 1 ? 'Open worksheet' : 'Open worksheets'}
      </h2>
      <ul className="grid gap-3">
        {worksheets.map(({ id, title, changedAt, states }) => (
          <li key={id}>
            <Notice
              tone={states.length > 0 ? 'gap' : 'plain'}
              title={<UserText>{title}</UserText>}
              actions={
                <AnchorButton href={paths.worksheet(id)}>
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
