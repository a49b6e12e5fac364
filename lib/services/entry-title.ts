import 'server-only';
import type { AuthorPart, CountersignatureBody, ServiceBody } from '@/lib/evidence/format';
import type { OpenedEntry } from '@/lib/services/open-stored-log';

/** The words by which a ledger line names an entry of a machine's log: "Service, withheld" where its body is closed. */
export function entryTitle(entry: OpenedEntry): string {
  const title = titleOf(entry);
  return entry.withheld.includes('body') ? `${title}, withheld` : title;
}

function titleOf({ kind, leaf, values }: OpenedEntry): string {
  const body = values.get('body');
  const name = (values.get('author') as AuthorPart | undefined)?.name;
  const of = leaf.refersTo === null ? '' : ` of entry ${leaf.refersTo.seq}`;
  const to = leaf.refersTo === null ? '' : ` to entry ${leaf.refersTo.seq}`;
  switch (kind) {
    case 'opening':
      return 'Record opened';
    case 'terms':
      return 'Terms';
    case 'service':
      return (body as ServiceBody | undefined)?.title ?? 'Service';
    case 'reading':
      return 'Odometer reading';
    case 'addendum':
      return `Addendum${to}`;
    case 'strike':
      return `Strike${of}`;
    case 'countersignature': {
      const shop = (body as CountersignatureBody | undefined)?.shop.name;
      return shop === undefined ? `Countersignature${of}` : `Countersigned by ${shop}`;
    }
    case 'key':
      return name === undefined ? 'Key of a signer' : `Key of ${name}`;
    case 'signature':
      return name === undefined ? `Signature${of}` : `Entry ${leaf.refersTo?.seq ?? ''} signed by ${name}`;
    case 'handover':
      return 'Handover';
    default:
      return kind;
  }
}
