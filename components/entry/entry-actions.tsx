import { LinkButton } from '@/components/ui/button';
import { mayBeStruck } from '@/lib/domain/standing';
import { paths } from '@/lib/paths';
import type { EntryView } from '@/lib/services/record-view';

export interface EntryActionsProps {
  machine: string;
  entry: EntryView;
  relation: 'owner' | 'helper';
}

/** What one may do with an entry: never edit it, but add to it, withdraw it, or have a shop vouch for it. */
export function EntryActions({ machine, entry, relation }: EntryActionsProps) {
  const { seq, kind, struckBy } = entry;
  const isStanding = struckBy === null;
  const isOwner = relation === 'owner';
  return (
    <>
      {isOwner && kind === 'service' && isStanding ? (
        <LinkButton href={paths.inviteShop(machine, seq)}>Ask a shop to countersign</LinkButton>
      ) : null}
      <LinkButton href={paths.addendum(machine, seq)}>
        {kind === 'opening' ? 'Correct a detail' : 'Add an addendum'}
      </LinkButton>
      {isOwner && isStanding && mayBeStruck(kind) ? (
        <LinkButton href={paths.strike(machine, seq)}>Strike</LinkButton>
      ) : null}
    </>
  );
}
