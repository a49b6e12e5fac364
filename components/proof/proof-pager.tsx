import { Pager } from '@/components/ui/pager';
import { paths } from '@/lib/paths';

export interface ProofPagerProps {
  machine: string;
  what: 'packets' | 'links';
  page: number;
  /** The page of the other list, which stays. */
  other: number;
  perPage: number;
  total: number;
}

/** Two lists on one page, each with its own pages. */
export function ProofPager({ machine, what, page, other, perPage, total }: ProofPagerProps) {
  const addressOf = (wanted: number) => {
    const [packets, links] = what === 'packets' ? [wanted, other] : [other, wanted];
    return `${paths.proof(machine)}?packets=${packets}&links=${links}#${what}`;
  };
  const last = Math.min(page * perPage, total);
  const title = what === 'packets' ? 'Packets' : 'Viewing links';
  return (
    <Pager
      label={title.toLowerCase()}
      words={`${title} ${Math.min((page - 1) * perPage + 1, total)} to ${last} of ${total}`}
      previousHref={page > 1 ? addressOf(page - 1) : undefined}
      nextHref={last < total ? addressOf(page + 1) : undefined}
    />
  );
}
