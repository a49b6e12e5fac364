'use client';

import { createContext, use, useCallback, useMemo, type ReactNode } from 'react';
import { DraftProvider, useDraftInScreen } from '@/components/garage/draft-context';
import { useGarage } from '@/components/garage/garage-context';
import type { OpenDraft } from '@/components/garage/open-draft';
import type { GarageMachine, GaragePerson } from '@/components/garage/snapshot';
import type { Fields } from '@/lib/domain/field-changes';
import { balanceAfter, type Lot } from '@/lib/domain/shelf';
import { units } from '@/lib/domain/units';
import { fieldProblems, worksheetFrom, type Worksheet, type WorksheetDraw } from '@/lib/domain/worksheet';
import { readAmount } from './fill-figures';

interface WorksheetInScreen {
  id: string;
  worksheet: Worksheet;
  machine: GarageMachine | undefined;
  person: GaragePerson | undefined;
  lots: readonly Lot[];
}

const WorksheetContext = createContext<WorksheetInScreen | undefined>(undefined);

export function WorksheetProvider(props: { opened: OpenDraft; isAllShown: boolean; children: ReactNode }) {
  const { opened, isAllShown, children } = props;
  const { view } = useGarage();
  const { snapshot } = view;
  const { subject } = opened.view.draft;
  const machine = snapshot?.machines.find(({ id }) => id === subject);
  const lots = useMemo(() => snapshot?.shelves.flatMap((shelf) => shelf.lots) ?? [], [snapshot]);
  const judge = useCallback(
    (fields: Fields) =>
      fieldProblems(worksheetFrom(fields), {
        now: new Date().toISOString(),
        ...(machine?.terms ? { terms: machine.terms } : {}),
        ...(machine?.lastReading ? { readings: [machine.lastReading] } : {}),
        lots,
      }),
    [machine, lots],
  );
  return (
    <DraftProvider opened={opened} judge={judge} isAllShown={isAllShown}>
      <Inner id={opened.view.draft.id} machine={machine} person={snapshot?.person} lots={lots}>
        {children}
      </Inner>
    </DraftProvider>
  );
}

function Inner({
  children,
  id,
  machine,
  person,
  lots,
}: Omit<WorksheetInScreen, 'worksheet'> & { children: ReactNode }) {
  const { view } = useDraftInScreen();
  const worksheet = useMemo(() => worksheetFrom(view.fields), [view.fields]);
  const value = useMemo(() => ({ id, worksheet, machine, person, lots }), [id, worksheet, machine, person, lots]);
  return <WorksheetContext value={value}>{children}</WorksheetContext>;
}

export function useWorksheet(): WorksheetInScreen {
  const value = use(WorksheetContext);
  if (!value) throw new Error('This stands outside a worksheet.');
  return value;
}

/** Every draw of the worksheet, each with the item it belongs to (`tasks/<id>/fills/<id>`). */
export function drawsOf(worksheet: Worksheet): { item: string; draw: WorksheetDraw }[] {
  return worksheet.tasks.flatMap((task) => [
    ...task.fills.flatMap(({ id, draws }) => draws.map((draw) => ({ item: `tasks/${task.id}/fills/${id}`, draw }))),
    ...task.parts.flatMap(({ id, draws }) => draws.map((draw) => ({ item: `tasks/${task.id}/parts/${id}`, draw }))),
  ]);
}

/** Lots with what this worksheet takes already taken off; with `item`, only what it takes elsewhere. */
export function lotsBeside(lots: readonly Lot[], worksheet: Worksheet, item?: string): Lot[] {
  const others = drawsOf(worksheet).filter((one) => one.item !== item);
  return lots.map((lot) => {
    const taken = others.flatMap(({ draw }) => {
      const amount = draw.lot === lot.key ? readAmount(draw) : undefined;
      return amount && units[amount.unit].dimension === units[lot.unit].dimension ? [amount] : [];
    });
    return taken.length === 0 ? lot : { ...lot, balance: balanceAfter(lot.balance, taken) };
  });
}
