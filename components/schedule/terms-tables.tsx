import { Table } from '@/components/ui/table';
import { UserText } from '@/components/ui/user-text';
import { formatLocalDate } from '@/lib/domain/instants';
import { formatDistance } from '@/lib/domain/units';
import type { ScheduleItem, TermsBody, WarrantyTerm } from '@/lib/evidence/format';
import { actionWords, printedInterval } from './source-words';
import { FastenerTable, FluidPointTable, SourceText, SpecPartTable } from './spec-tables';

/** Everything later services are judged by, as it was sealed. */
export function TermsTables({ terms }: { terms: TermsBody }) {
  return (
    <div className="grid gap-8">
      <ScheduleTable items={terms.schedule} />
      <FluidPointTable points={terms.fluidPoints} />
      <FastenerTable fasteners={terms.fasteners} />
      <SpecPartTable parts={terms.parts} />
      <WarrantyTable terms={terms.warranty} />
    </div>
  );
}

function ScheduleTable({ items }: { items: ScheduleItem[] }) {
  return (
    <Table
      caption="Schedule"
      emptyText="No schedule item is entered."
      columns={[
        { label: 'Item', isRowHead: true },
        { label: 'Action' },
        { label: 'Interval' },
        { label: 'First service' },
        { label: 'Grace' },
        { label: 'Source' },
      ]}
      rows={items.map(({ item, title, action, interval, firstService, grace, source }) => ({
        key: item,
        cells: [
          <UserText key="title">{title}</UserText>,
          actionWords[action],
          printedInterval(interval),
          firstService === undefined ? 'as the interval' : printedInterval(firstService),
          grace === undefined ? 'none' : printedInterval(grace),
          <SourceText key="source" source={source} />,
        ],
      }))}
    />
  );
}

const kindWords: Record<WarrantyTerm['kind'], string> = { factory: 'Factory', extended: 'Extended', part: 'Part' };

function WarrantyTable({ terms }: { terms: WarrantyTerm[] }) {
  return (
    <Table
      caption="Warranty"
      emptyText="No warranty is entered."
      columns={[
        { label: 'Warranty', isRowHead: true },
        { label: 'Kind' },
        { label: 'Starts' },
        { label: 'Months', isNumber: true },
        { label: 'Distance', isNumber: true },
        { label: 'Source' },
      ]}
      rows={terms.map(({ term, title, kind, startsOn, months, distances, source }) => ({
        key: term,
        cells: [
          <UserText key="title">{title}</UserText>,
          kindWords[kind],
          formatLocalDate(startsOn),
          months ?? 'no limit',
          distances?.map((distance) => formatDistance(distance)).join(' / ') ?? 'no limit',
          <SourceText key="source" source={source} />,
        ],
      }))}
    />
  );
}
