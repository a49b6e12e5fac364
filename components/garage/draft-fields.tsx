'use client';

import type { ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { NumberInput } from '@/components/ui/number-input';
import { Segments, type SegmentOption } from '@/components/ui/segments';
import { Select, type SelectOption } from '@/components/ui/select';
import { Textarea } from '@/components/ui/textarea';
import { TextInput } from '@/components/ui/text-input';
import type { UnitCode } from '@/lib/evidence/format';
import { units } from '@/lib/domain/units';
import { useDraftField, useDraftInScreen, useDraftSet } from './draft-context';

interface Common {
  path: string;
  label: ReactNode;
  hint?: ReactNode;
  isOptional?: boolean;
  className?: string;
}

export function DraftText({ path, type, ...rest }: Common & { type?: 'text' | 'date' | 'time'; placeholder?: string }) {
  const { value, set, error } = useDraftField(path);
  return (
    <TextInput
      {...rest}
      size="big"
      {...(type ? { type } : {})}
      name={path}
      autoComplete="off"
      value={value}
      error={error}
      onChange={(event) => set(event.target.value)}
    />
  );
}

export function DraftNotes({ path, rows = 3, ...rest }: Common & { rows?: number }) {
  const { value, set, error } = useDraftField(path);
  return (
    <Textarea
      {...rest}
      rows={rows}
      name={path}
      value={value}
      error={error}
      onChange={(event) => set(event.target.value)}
    />
  );
}

interface FigureProps extends Common {
  /** Where the unit is kept, and which are offered. */
  unitPath?: string;
  offered?: readonly UnitCode[];
  /** Taken with the first figure when none was tapped; it shows as chosen from the start. */
  usualUnit?: UnitCode;
  unit?: string;
  isWhole?: boolean;
}

/** A large figure with the numeric keypad. The unit is one tap. */
export function DraftFigure({ path, unitPath, offered, usualUnit, ...rest }: FigureProps) {
  const setAll = useDraftSet();
  const figure = useDraftField(path);
  const unit = useDraftField(unitPath ?? path);
  const choice =
    unitPath && offered
      ? {
          units: offered.map((code) => ({
            code,
            label: <span className="whitespace-nowrap">{units[code].label}</span>,
          })),
          unitName: unitPath,
          unitValue: unit.value || usualUnit || '',
          onUnitChange: unit.set,
        }
      : {};
  return (
    <NumberInput
      {...rest}
      {...choice}
      size="big"
      name={path}
      value={figure.value}
      error={figure.error ?? (unitPath ? unit.error : undefined)}
      onChange={(event) => {
        const isFirst = unitPath !== undefined && usualUnit !== undefined && unit.value === '';
        setAll({ [path]: event.target.value, ...(isFirst ? { [unitPath]: usualUnit } : {}) });
      }}
    />
  );
}

export function DraftChoice({ path, options, ...rest }: Common & { options: SegmentOption[] }) {
  const { value, set, error } = useDraftField(path);
  return (
    <Segments {...rest} size="big" isWide name={path} options={options} value={value} error={error} onChange={set} />
  );
}

export function DraftSelect({ path, options, ...rest }: Common & { options: SelectOption[] }) {
  const { value, set, error } = useDraftField(path);
  return (
    <Select
      {...rest}
      size="big"
      name={path}
      options={options}
      value={value}
      error={error}
      onChange={(event) => set(event.target.value)}
    />
  );
}

/** Takes an item out of its collection. It stays in the draft's history, so that another device cannot bring it back by halves. */
export function RemoveItem({ path, children }: { path: string; children: ReactNode }) {
  const { set } = useDraftField(`${path}/removed`);
  return (
    <Button look="quiet" size="big" onClick={() => set('yes')}>
      {children}
    </Button>
  );
}

/** Empties an item that has the same key on every device, so that it can be filled in again. */
export function ClearItem({ path, children }: { path: string; children: ReactNode }) {
  const { opened, view } = useDraftInScreen();
  const held = Object.keys(view.fields).filter((field) => field.startsWith(`${path}/`));
  if (held.length === 0) return null;
  return (
    <Button
      look="quiet"
      size="big"
      onClick={() => void opened.set(Object.fromEntries(held.map((field) => [field, null])))}
    >
      {children}
    </Button>
  );
}
