import { delayInDays, localDateOf } from '@/lib/domain/instants';
import { latestReading, type OdometerReading } from '@/lib/domain/odometer';
import type { MachineHistory } from '@/lib/domain/schedule-limits';
import type { WarrantyState } from '@/lib/domain/warranty';
import type { RecordView } from '@/lib/services/record-view';
import { isService, type PacketContent, type ServiceEntry } from './content';
import { gapsOf, isProven, wholeGaps, type Gap } from './summary/gaps';
import { headlineOf } from './summary/headline';
import { doneOf, historyOf } from './summary/history';
import { itemsOf, type ItemSummary } from './summary/items';
import { openedOf, type Opened } from './summary/opened';
import { usesOf, type UseSummary } from './summary/uses';
import { warrantyOf } from './summary/warranty';

const promptDays = 7;

export interface PacketSummary {
  headline: string;
  opened: Opened;
  items: ItemSummary[];
  history: MachineHistory;
  /** The latest opened reading. */
  now: OdometerReading | undefined;
  warranty: WarrantyState[];
  uses: UseSummary[];
  gaps: Gap[];
  counts: { entries: string; prompt: string; proven: string; countersigned: string };
}

const isOpen = (entry: ServiceEntry) => entry.body !== null && entry.struckBy === null;

/** What the record amounts to, from its opened entries. Struck services count for nothing. */
export function summarise({ record, madeAt, zone }: Pick<PacketContent, 'record' | 'madeAt' | 'zone'>): PacketSummary {
  const opened = openedOf(record);
  const services = record.entries.filter(isService).filter(isOpen);
  const history = historyOf(record, localDateOf(madeAt, zone));
  const items = itemsOf(record.terms?.schedule ?? [], doneOf(services), history, opened);
  return {
    headline: headlineOf(items, services.length, opened),
    opened,
    items,
    history,
    now: latestReading(history.readings, history.today),
    warranty: warrantyOf(record.terms?.warranty ?? [], history.readings, { now: madeAt, zone }, opened),
    uses: usesOf(record, services, opened),
    gaps: [...wholeGaps(record, opened), ...gapsOf(items, services)],
    counts: countsOf(record, services, opened),
  };
}

function countsOf(record: RecordView, services: ServiceEntry[], opened: Opened): PacketSummary['counts'] {
  const prompt = services.filter(
    ({ body, sealedAt }) => body !== null && delayInDays(body.finishedAt, sealedAt) <= promptDays,
  );
  const proven = record.entries.filter(isProven).length;
  const countersigned = services.filter(({ countersignatures }) => countersignatures.length > 0).length;
  return {
    entries: `${opened.entries} of ${opened.of}`,
    prompt: `${prompt.length} of ${services.length}`,
    proven: proven === 0 ? 'none' : `${proven} of ${record.entries.length}`,
    countersigned: `${countersigned} of ${services.length}`,
  };
}
