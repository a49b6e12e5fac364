import { LedgerLine, type LedgerLineProps } from '@/components/ledger/ledger-line';
import type { ThumbProps } from '@/components/ledger/thumb';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate, localDateOf } from '@/lib/domain/instants';
import { formatAmount, formatDistance, sumAmounts } from '@/lib/domain/units';
import type { Attachment, ServiceBody } from '@/lib/evidence/format';
import type { EntryView } from '@/lib/services/record-view';
import { platesOfPurchase, type EntryFacts, type EntryLinks } from './entry-facts';
import { roleWords } from '@/lib/domain/record-words';
import { quietDetail } from './line-words';
import { addedWords, counted, plateKind, stateWords } from './words';

export interface RecordLineProps {
  entry: EntryView;
  facts: Pick<EntryFacts, 'zone' | 'purchases'>;
  links: EntryLinks;
}

/** One entry of a machine's record as a ledger line, the same for its owner and for the reader of a viewing link. */
export function RecordLine({ entry, facts, links }: RecordLineProps) {
  const { seq, title, state, leafHash, struckBy } = entry;
  const service = entry.kind === 'service' ? entry.body : null;
  const on = service?.finishedAt.date ?? localDateOf(entry.sealedAt, facts.zone);
  return (
    <LedgerLine
      seq={seq}
      href={links.entry?.(seq)}
      date={formatLocalDate(on)}
      dateTime={on}
      odometer={service?.odometer && formatDistance(service.odometer)}
      title={<UserText>{title}</UserText>}
      {...detailOf(entry, facts.zone)}
      thumbs={thumbsOf(entry, facts, links)}
      mark={{ state, leafHash }}
      {...markWords(entry)}
      isStruck={struckBy !== null}
      isQuiet={service === null}
    />
  );
}

function markWords({ kind, body, state }: EntryView): Pick<LedgerLineProps, 'words' | 'wordsTone'> {
  const isLate =
    kind === 'service' && body?.checks.some(({ key, result }) => key === 'logged-soon' && result === 'gap') === true;
  if (state === 'sealed' && isLate) return { words: 'sealed late', wordsTone: 'warn' };
  return { words: stateWords[state], wordsTone: state === 'waiting' ? 'warn' : 'soft' };
}

function detailOf(entry: EntryView, zone: string): Pick<LedgerLineProps, 'detail' | 'detailTone'> {
  if (entry.struckBy !== null) {
    const { seq, sealedAt, reason } = entry.struckBy;
    const on = formatLocalDate(localDateOf(sealedAt, zone));
    return {
      detail: (
        <>
          Struck by entry {seq} on {on}
          {reason === '' ? '.' : ': '}
          <UserText>{reason}</UserText>
        </>
      ),
    };
  }
  const said =
    entry.kind === 'service' && entry.body !== null
      ? serviceDetail(entry.body)
      : { detail: <UserText>{quietDetail(entry)}</UserText> };
  return entry.addenda.length === 0
    ? said
    : {
        ...said,
        detail: (
          <>
            {said.detail} Added to in {addedWords(entry.addenda)}.
          </>
        ),
      };
}

function serviceDetail(body: ServiceBody): Pick<LedgerLineProps, 'detail' | 'detailTone'> {
  const amounts = body.tasks.flatMap(({ fills }) =>
    fills.flatMap((fill) => (fill.amounts.length === 0 ? [] : [formatAmount(sumAmounts(fill.amounts))])),
  );
  const parts = body.tasks.flatMap((task) => task.parts).length;
  const used = [...amounts, parts === 0 ? '' : counted(parts, 'part', 'parts')].filter((one) => one !== '');
  const gaps = body.checks.filter(({ result }) => result === 'gap');
  const [first] = gaps;
  const start = used.length === 0 ? '' : `${used.join(', ')}. `;
  if (first === undefined) return { detail: `${start}No gap.` };
  const more = gaps.length === 1 ? '' : ` And ${counted(gaps.length - 1, 'more gap', 'more gaps')}.`;
  return {
    detail: (
      <>
        {start}
        <span className="tone-gap">
          Gap: <UserText>{first.detail}</UserText>.{more}
        </span>
      </>
    ),
  };
}

/** What was photographed for the entry, then the receipts of what it drew. */
function thumbsOf(entry: EntryView, { purchases }: RecordLineProps['facts'], links: EntryLinks): ThumbProps[] {
  const receipts = receiptsOf(entry, purchases).flatMap((one) => platesOfPurchase(one).slice(0, 1));
  return [...receipts, ...entry.attachments].flatMap((attachment) => thumbOf(attachment, links.file));
}

export function thumbOf(attachment: Attachment, file: EntryLinks['file']): ThumbProps[] {
  const src = file(attachment.sha256, 'thumb');
  return src === undefined ? [] : [{ src, alt: roleWords[attachment.role], kind: plateKind(attachment) }];
}

/** The purchases an entry draws from, in the order of the shelf. */
export function receiptsOf<P extends { log: string; seq: number }>(entry: EntryView, purchases: readonly P[]): P[] {
  if (entry.kind !== 'service' || entry.body === null) return [];
  const drawn = new Set(
    entry.body.tasks
      .flatMap(({ fills, parts }) => [...fills, ...parts])
      .flatMap(({ draws }) => draws.map(({ purchase }) => `${purchase.log}:${purchase.seq}`)),
  );
  return purchases.filter(({ log, seq }) => drawn.has(`${log}:${seq}`));
}
