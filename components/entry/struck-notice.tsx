import Link from 'next/link';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import { formatInstant } from '@/lib/domain/instants';
import type { StruckView } from '@/lib/services/record-view';

export interface StruckNoticeProps {
  struck: StruckView;
  zone: string;
  /** Leads to the strike, where this reader may follow. */
  href?: string | undefined;
  /** A record has entries, a shelf's log has lines. */
  what?: 'entry' | 'line';
}

/** By which entry, when, by whom and why; what is struck stays readable below. */
export function StruckNotice({ struck, zone, href, what = 'entry' }: StruckNoticeProps) {
  const { seq, sealedAt, reason, by } = struck;
  const strike = `${what} ${seq}`;
  return (
    <div className="mb-4">
      <Notice
        tone="gap"
        title={
          <>
            Struck by{' '}
            {href === undefined ? (
              strike
            ) : (
              <Link className="link" href={href}>
                {strike}
              </Link>
            )}{' '}
            on {formatInstant(sealedAt, zone)}
            {by === undefined ? null : (
              <>
                , by <UserText>{by}</UserText>
              </>
            )}
          </>
        }
      >
        {reason === '' ? 'Its reason is withheld here.' : <UserText isMultiline>{reason}</UserText>}
      </Notice>
    </div>
  );
}
