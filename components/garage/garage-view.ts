import type { DraftStore } from './draft-store';
import type { GarageApi } from './garage-api';
import type { OpenDraft } from './open-draft';
import type { Signal } from './send-drafts';
import type { GarageSnapshot } from './snapshot';
import type { SendFile } from './upload-files';

export interface GarageView {
  /** False until the device's own store has been read. */
  isReady: boolean;
  snapshot: GarageSnapshot | undefined;
  signal: Signal;
  /** Drafts of this person that are on this device, latest first. */
  drafts: readonly OpenDraft[];
  /** Shares sent, 0 to 1, of files on their way. */
  progress: Readonly<Record<string, number>>;
}

export interface GarageParts {
  store: DraftStore;
  api: GarageApi;
  send: SendFile;
  now: () => Date;
  /** Runs `work` later and gives back how to call it off. */
  later: (work: () => void, milliseconds: number) => () => void;
  /** Tells other tabs of the same browser that a draft changed on this device. */
  tell?: (draftId: string) => void;
}
