import { foldChanges, type FieldChange, type Fields } from '@/lib/domain/field-changes';
import type { DraftStore, KeptChange, KeptDraft, KeptFile, UploadAnswer } from './draft-store';
import { mintId } from './mint-id';
import { without } from './without';

/** One draft at one moment, for the screen. A new object whenever anything changed. */
export interface DraftView {
  draft: KeptDraft;
  fields: Fields;
  files: readonly KeptFile[];
  /** Uploads the server has that came from other devices. */
  uploads: readonly UploadAnswer[];
  unsentCount: number;
  /** When the last change was written on this device, and when the server last confirmed having all of them. */
  savedHereAt: string | undefined;
  savedThereAt: string | undefined;
  /** Set when this device could not write the last change; it is then only in the open page. */
  keepProblem: string | undefined;
  refusals: readonly { field: string; sentence: string }[];
}

/** A draft held in memory while its page is open. What is set is written to the store at once, in order. */
export class OpenDraft {
  #latest = new Map<string, KeptChange>();
  #unsent = new Map<string, KeptChange>();
  #refused: KeptChange[] = [];
  #inFlight = new Set<string>();
  #unwritten = new Map<string, KeptChange>();
  #dropped = new Set<string>();
  #writes: Promise<void> = Promise.resolve();
  #lastStamp = 0;
  #listeners = new Set<() => void>();
  view: DraftView;

  private constructor(
    private readonly store: DraftStore,
    private readonly now: () => Date,
    draft: KeptDraft,
  ) {
    this.view = {
      draft, fields: {}, files: [], uploads: [], unsentCount: 0, savedHereAt: undefined, savedThereAt: undefined,
      keepProblem: undefined, refusals: [],
    }; // prettier-ignore
  }

  static async load(store: DraftStore, draft: KeptDraft, now: () => Date): Promise<OpenDraft> {
    const opened = new OpenDraft(store, now, draft);
    await opened.reload();
    return opened;
  }

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  /** Reads the store again, after another tab or the sender wrote to it. */
  async reload(): Promise<void> {
    await this.#writes;
    const { id } = this.view.draft;
    const [draft, changes, files] = await Promise.all([
      this.store.readDraft(id),
      this.store.readChanges(id),
      this.store.readFiles(id),
    ]);
    // What was set while the store was being read, or could not be written, is in memory only and must stay.
    const all = [...changes.filter(({ id: own }) => !this.#unwritten.has(own)), ...this.#unwritten.values()];
    this.#latest = latestOf(all);
    this.#unsent = new Map(all.filter(({ isSent }) => !isSent).map((change) => [change.id, change]));
    this.#refused = all.filter(({ refusal }) => refusal !== undefined);
    this.#show({ draft: draft ?? this.view.draft, files });
  }

  /** Changes fields; null or '' clears one. Resolves once this device has written it. */
  set(entries: Record<string, string | null>): Promise<void> {
    let isChanged = false;
    for (const [field, typed] of Object.entries(entries)) {
      const value = typed === '' ? null : typed;
      const earlier = this.#latest.get(field);
      if ((earlier?.value ?? null) === value) continue;
      // A later change must win whatever the clocks of the devices say, so it is stamped after what it replaces.
      const stamp = Math.max(this.now().getTime(), this.#lastStamp + 1, Date.parse(earlier?.deviceAt ?? '') + 1 || 0);
      this.#lastStamp = Math.max(this.#lastStamp, stamp);
      const { id: draftId } = this.view.draft;
      const deviceAt = new Date(stamp).toISOString();
      const change: KeptChange = { id: mintId(), field, value, deviceAt, draftId, isSent: false };
      // Keystrokes of one field that were never sent come to their last one.
      if (earlier && !earlier.isSent && !this.#inFlight.has(earlier.id)) {
        this.#dropped.add(earlier.id);
        this.#unwritten.delete(earlier.id);
        this.#unsent.delete(earlier.id);
      }
      this.#latest.set(field, change);
      this.#unsent.set(change.id, change);
      this.#unwritten.set(change.id, change);
      isChanged = true;
    }
    if (!isChanged) return this.#writes;
    this.#show({});
    return this.#write();
  }

  /** Writes what is not written yet; what fails is tried again with the next change. */
  #write(): Promise<void> {
    this.#writes = this.#writes.then(async () => {
      const added = [...this.#unwritten.values()];
      const dropped = [...this.#dropped];
      if (added.length === 0 && dropped.length === 0) return;
      try {
        await this.store.putChanges(this.view.draft.id, added, dropped);
      } catch (error) {
        this.#show({ keepProblem: error instanceof Error ? error.message : String(error) });
        return;
      }
      // One that was replaced or sent meanwhile has another object under its id, or none.
      for (const change of added) if (this.#unwritten.get(change.id) === change) this.#unwritten.delete(change.id);
      for (const id of dropped) this.#dropped.delete(id);
      const isOwn = added.some(({ isSent }) => !isSent);
      this.#show({ keepProblem: undefined, ...(isOwn ? { savedHereAt: this.now().toISOString() } : {}) });
    });
    return this.#writes;
  }

  /** The oldest unsent changes, marked as on their way until `settle` is called with them. */
  takeUnsent(most: number): KeptChange[] {
    const batch = [...this.#unsent.values()].slice(0, most);
    for (const change of batch) this.#inFlight.add(change.id);
    return batch;
  }

  /** What became of a batch, and what other devices wrote meanwhile. */
  async settle(
    batch: KeptChange[],
    outcome: {
      accepted: string[];
      refused?: Record<string, string>;
      others?: FieldChange[];
      draft?: Partial<KeptDraft>;
    },
  ): Promise<void> {
    const accepted = new Set(outcome.accepted);
    const settled = batch.flatMap((change): KeptChange[] => {
      if (accepted.has(change.id)) return [{ ...change, isSent: true }];
      const refusal = outcome.refused?.[change.id];
      return refusal === undefined ? [] : [{ ...change, isSent: true, refusal }];
    });
    for (const change of batch) this.#inFlight.delete(change.id);
    const { id: draftId } = this.view.draft;
    const others = (outcome.others ?? []).map((change): KeptChange => ({ ...change, draftId, isSent: true }));
    const draft = outcome.draft ? { ...this.view.draft, ...outcome.draft } : undefined;
    for (const change of settled) {
      this.#unsent.delete(change.id);
      if (this.#latest.get(change.field)?.id === change.id) this.#latest.set(change.field, change);
      if (change.refusal !== undefined) this.#refused.push(change);
    }
    this.#latest = latestOf([...this.#latest.values(), ...others]);
    for (const change of [...settled, ...others]) this.#unwritten.set(change.id, change);
    await this.#write();
    if (draft) {
      this.#show({ draft });
      await this.store.putDraft(draft);
    }
    this.#show({});
  }

  async clearRefusal(): Promise<void> {
    const draft = without(this.view.draft, 'refusal');
    this.#show({ draft });
    await this.store.putDraft(draft);
  }

  isAllSent(at: string): void {
    this.#show({ savedThereAt: at });
  }

  showFiles(files: readonly KeptFile[], uploads: readonly UploadAnswer[] = this.view.uploads): void {
    this.#show({ files, uploads });
  }

  #show(changed: Partial<DraftView>): void {
    this.view = {
      ...this.view,
      ...changed,
      fields: foldChanges([...this.#latest.values()]),
      unsentCount: this.#unsent.size,
      refusals: this.#refused.map(({ field, refusal }) => ({ field, sentence: refusal ?? '' })),
    };
    for (const listener of this.#listeners) listener();
  }
}

/** Per field the change that wins, by the same rule as `foldChanges`. */
function latestOf(changes: readonly KeptChange[]): Map<string, KeptChange> {
  const byField = new Map<string, KeptChange[]>();
  for (const change of changes) byField.set(change.field, [...(byField.get(change.field) ?? []), change]);
  const latest = new Map<string, KeptChange>();
  for (const [field, rivals] of byField) {
    const winner = rivals.reduce((best, rival) => (beats(rival, best) ? rival : best));
    latest.set(field, winner);
  }
  return latest;
}

function beats(rival: KeptChange, best: KeptChange): boolean {
  if (rival.id === best.id) return rival.isSent && !best.isSent;
  // Asked of the one rule itself: which of the two is left when both are folded? Marked apart by their ids.
  const folded = foldChanges([
    { ...best, value: best.id },
    { ...rival, value: rival.id },
  ]);
  return folded[best.field] === rival.id;
}
