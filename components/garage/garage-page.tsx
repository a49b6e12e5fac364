'use client';

import { AppShell, type Place } from '@/components/shell/app-shell';
import { NewReceipt } from '@/components/receipt/new-receipt';
import { ReceiptScreen } from '@/components/receipt/receipt-screen';
import { NewWorksheet } from '@/components/worksheet/new-worksheet';
import { WorksheetScreen } from '@/components/worksheet/worksheet-screen';
import { DraftList } from './draft-list';
import { DraftLoader } from './draft-loader';
import { GarageProvider, useGarage, useHash } from './garage-context';
import { NoSignal } from './no-signal';
import { placeFrom, type GaragePlace } from './place';

/** The garage: worksheets and receipts, with or without signal. */
export function GaragePage() {
  return (
    <GarageProvider>
      <InShell />
    </GarageProvider>
  );
}

function InShell() {
  const { view } = useGarage();
  const place = placeFrom(useHash());
  const { snapshot } = view;
  const draft = 'id' in place ? view.drafts.find(({ view: { draft: one } }) => one.id === place.id) : undefined;
  const wanted = place.show === 'new-worksheet' ? place.machine : draft?.view.draft.subject;
  const machines = snapshot?.machines.map(({ id, name }) => ({ id, name })) ?? [];
  const current: Place = place.show === 'receipt' || place.show === 'new-receipt' ? 'receipt' : 'worksheet';
  return (
    <AppShell
      machines={machines}
      machine={machines.find(({ id }) => id === wanted) ?? machines[0]}
      shelf={snapshot?.shelves[0]?.id}
      person={{ name: snapshot?.person.name ?? '', isSteward: snapshot?.person.isSteward ?? false }}
      current={current}
      demo={snapshot?.demo ?? 'none'}
    >
      {view.isReady ? <Shown place={place} /> : <p className="tag">Opening what this phone keeps</p>}
    </AppShell>
  );
}

function Shown({ place }: { place: GaragePlace }) {
  switch (place.show) {
    case 'list':
      return <DraftList />;
    case 'no-signal':
      return <NoSignal />;
    case 'new-worksheet':
      return <NewWorksheet machineId={place.machine} />;
    case 'new-receipt':
      return <NewReceipt />;
    case 'worksheet':
      return (
        <DraftLoader key={place.id} id={place.id} what="worksheet">
          {(opened) => <WorksheetScreen opened={opened} screen={place.screen} step={place.step} />}
        </DraftLoader>
      );
    case 'receipt':
      return (
        <DraftLoader key={place.id} id={place.id} what="receipt">
          {(opened) => <ReceiptScreen opened={opened} />}
        </DraftLoader>
      );
  }
}
