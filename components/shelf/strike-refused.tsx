import Link from 'next/link';
import { Notice } from '@/components/ui/notice';
import { UserText } from '@/components/ui/user-text';
import { paths } from '@/lib/paths';
import type { LotUse } from '@/lib/services/read-shelf-page';

/** Why a receipt cannot be struck, with what uses it. A machine of other people is never named. */
export function StrikeRefused({ refusal, uses }: { refusal: string; uses: LotUse[] }) {
  const own = new Map(
    uses.flatMap(({ machine, seq }) => (machine === null ? [] : [[`${machine.id}:${seq}`, { machine, seq }]])),
  );
  const others = uses.some(({ machine }) => machine === null);
  return (
    <Notice tone="warn" title="This cannot be struck yet">
      <p>{refusal}</p>
      {uses.length === 0 ? null : (
        <ul className="mt-2 grid gap-1">
          {[...own.values()].map(({ machine, seq }) => (
            <li key={`${machine.id}:${seq}`}>
              <Link className="link inline-flex min-h-11 items-center" href={paths.entry(machine.id, seq)}>
                <span>
                  Entry {seq} of the <UserText>{machine.name}</UserText>
                </span>
              </Link>
            </li>
          ))}
          {others ? (
            <li>And entries of a machine that is not shared with you: ask whoever shares this shelf.</li>
          ) : null}
        </ul>
      )}
    </Notice>
  );
}
