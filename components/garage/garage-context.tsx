'use client';

import { createContext, use, useEffect, useState, useSyncExternalStore, type ReactNode } from 'react';
import { browserStore } from './browser-store';
import { Garage } from './garage';
import type { GarageView } from './garage-view';
import { garageApi } from './garage-api';
import { memoryStore } from './memory-store';
import type { DraftView, OpenDraft } from './open-draft';
import { keepPageOffline } from './offline-page';
import { sendFile } from './upload-files';

interface GarageInPage {
  garage: Garage | undefined;
  /** False where the browser refuses to keep anything: what is typed then lasts as long as the page. */
  isKept: boolean;
}

const GarageContext = createContext<GarageInPage>({ garage: undefined, isKept: true });
const channelName = 'witnessmark-garage';

const nothing: GarageView = { isReady: false, snapshot: undefined, signal: 'unknown', drafts: [], progress: {} };

function listen(garage: Garage): () => void {
  const again = () => void garage.refresh();
  const seen = () => {
    if (document.visibilityState === 'visible') again();
    else void garage.sendAll();
  };
  window.addEventListener('online', again);
  document.addEventListener('visibilitychange', seen);
  return () => {
    window.removeEventListener('online', again);
    document.removeEventListener('visibilitychange', seen);
  };
}

async function openGarage(channel: BroadcastChannel | undefined): Promise<GarageInPage> {
  const kept = await browserStore().catch(() => undefined);
  const garage = new Garage({
    store: kept ?? memoryStore(),
    api: garageApi,
    send: sendFile,
    now: () => new Date(),
    later: (work, milliseconds) => {
      const timer = setTimeout(work, milliseconds);
      return () => clearTimeout(timer);
    },
    tell: (draftId) => channel?.postMessage(draftId),
  });
  if (channel) channel.onmessage = ({ data }) => void garage.heard(String(data));
  await garage.start();
  // Asks the browser not to clear this site's storage when space runs low.
  void navigator.storage?.persist?.().catch(() => false);
  return { garage, isKept: kept !== undefined };
}

/** Opens what this device keeps, once per page, and keeps talking to the server while the page is open. */
export function GarageProvider({ children }: { children: ReactNode }) {
  const [inPage, setInPage] = useState<GarageInPage>({ garage: undefined, isKept: true });
  useEffect(() => {
    let isGone = false;
    let stop: (() => void) | undefined;
    const channel = 'BroadcastChannel' in window ? new BroadcastChannel(channelName) : undefined;
    void openGarage(channel).then((opened) => {
      if (isGone || !opened.garage) return;
      stop = listen(opened.garage);
      setInPage(opened);
    });
    void keepPageOffline();
    return () => {
      isGone = true;
      stop?.();
      channel?.close();
    };
  }, []);
  return <GarageContext value={inPage}>{children}</GarageContext>;
}

const neverChanges = () => () => undefined;

export function useGarage(): { garage: Garage | undefined; view: GarageView; isKept: boolean } {
  const { garage, isKept } = use(GarageContext);
  const view = useSyncExternalStore(
    garage?.subscribe ?? neverChanges,
    () => garage?.view ?? nothing,
    () => nothing,
  );
  return { garage, view, isKept };
}

/** The draft as it is now; a change anywhere in it shows at once. */
export function useDraft(opened: OpenDraft): DraftView {
  return useSyncExternalStore(
    opened.subscribe,
    () => opened.view,
    () => opened.view,
  );
}

/** The hash, as it is now. Empty until the page has woken up. */
export function useHash(): string {
  return useSyncExternalStore(
    (changed) => {
      window.addEventListener('hashchange', changed);
      return () => window.removeEventListener('hashchange', changed);
    },
    () => window.location.hash,
    () => '',
  );
}
