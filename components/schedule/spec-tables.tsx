import { Table } from '@/components/ui/table';
import { UserText } from '@/components/ui/user-text';
import { formatBand } from '@/lib/domain/torque';
import type { Fastener, FluidPoint, Source, SpecPart } from '@/lib/evidence/format';
import { printedAmounts, sourceWords } from './source-words';

const none = <span className="whitespace-nowrap text-soft">not stated</span>;

export function SourceText({ source }: { source: Source }) {
  return (
    <span className="tag">
      <UserText>{sourceWords(source)}</UserText>
    </span>
  );
}

/** Kept on one line, so that no figure is parted from its unit. */
function Figure({ children }: { children: string }) {
  return (
    <span className="md:whitespace-nowrap">
      <UserText>{children}</UserText>
    </span>
  );
}

export function FluidPointTable({ points }: { points: FluidPoint[] }) {
  return (
    <Table
      caption="Fluid points"
      emptyText="No fluid point is entered."
      columns={[
        { label: 'Point', isRowHead: true },
        { label: 'Wet fill' },
        { label: 'Dry fill' },
        { label: 'Grade' },
        { label: 'Level is checked' },
        { label: 'Source' },
      ]}
      rows={points.map(
        ({ point, title, wetFill, dryFill, grade, standard, levelPosition, levelTemperature, source }) => {
          const fluid = [grade, standard].filter(Boolean).join(', ');
          const level = [levelPosition, levelTemperature].filter(Boolean).join(', ');
          return {
            key: point,
            cells: [
              <UserText key="title">{title}</UserText>,
              printedAmounts(wetFill) === '' ? none : <Figure key="wet">{printedAmounts(wetFill)}</Figure>,
              printedAmounts(dryFill) === '' ? none : <Figure key="dry">{printedAmounts(dryFill)}</Figure>,
              fluid === '' ? none : <Figure key="grade">{fluid}</Figure>,
              level === '' ? none : <UserText key="level">{level}</UserText>,
              <SourceText key="source" source={source} />,
            ],
          };
        },
      )}
    />
  );
}

export function FastenerTable({ fasteners }: { fasteners: Fastener[] }) {
  return (
    <Table
      caption="Fasteners"
      emptyText="No fastener is entered."
      columns={[
        { label: 'Fastener', isRowHead: true },
        { label: 'Torque' },
        { label: 'Sequence' },
        { label: 'Source' },
      ]}
      rows={fasteners.map(({ fastener, title, bands, sequence, source }) => ({
        key: fastener,
        cells: [
          <UserText key="title">{title}</UserText>,
          bands.map(formatBand).join(' / ') || none,
          sequence === undefined ? none : <UserText key="sequence">{sequence}</UserText>,
          <SourceText key="source" source={source} />,
        ],
      }))}
    />
  );
}

export function SpecPartTable({ parts }: { parts: SpecPart[] }) {
  return (
    <Table
      caption="Parts"
      emptyText="No part is entered."
      columns={[
        { label: 'Part', isRowHead: true },
        { label: 'Part numbers' },
        { label: 'Pieces', isNumber: true },
        { label: 'Source' },
      ]}
      rows={parts.map(({ part, title, partNumbers, quantity, source }) => ({
        key: part,
        cells: [
          <UserText key="title">{title}</UserText>,
          partNumbers.length === 0 ? none : <UserText key="numbers">{partNumbers.join(', ')}</UserText>,
          quantity,
          <SourceText key="source" source={source} />,
        ],
      }))}
    />
  );
}
