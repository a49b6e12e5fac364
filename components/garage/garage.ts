import type { DraftKind, KeptDraft, KeptFile } from './draft-store';
import type { Answer, Failure } from './garage-api';
import type { GarageParts, GarageView } from './garage-view';
import { mintId } from './mint-id';
import { OpenDraft } from './open-draft';
import { announceDraft, fetchDraft, sendDraft } from './send-drafts';
import { snapshotFrom, type GarageSnapshot } from './snapshot';
import { sendWaitingFiles } from './upload-files';
import { without } from './without';

const settleInMilliseconds = 1_200;
const firstRetryInMilliseconds = 2_000;
const lastRetryInMilliseconds = 60_000;
const snapshotNote = 'garage';

/** Everything this device keeps and sends. One per page. */
export class Garage {
  #opened = new Map<string, OpenDraft>();
  #listeners = new Set<() => void>();
  #callOff: (() => void) | undefined;
  #sending: Promise<void> | undefined;
  #isWanted = false;
  #firstRefresh: Promise<void> | undefined;
  #retryIn = firstRetryInMilliseconds;
  view: GarageView = { isReady: false, snapshot: undefined, signal: 'unknown', drafts: [], progress: {} };

  constructor(private readonly parts: GarageParts) {}

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  /** Reads what the device keeps; then asks the server, without waiting for it. */
  async start(): Promise<void> {
    const { store } = this.parts;
    const snapshot = snapshotFrom(await store.readNote(snapshotNote));
    for (const draft of await store.readDrafts()) await this.#hold(draft);
    this.#show({ snapshot, isReady: true });
    this.#firstRefresh = this.refresh();
  }

  /** Asks the server for its picture of the garage, sends what waits, and fetches drafts other devices work on. */
  async refresh(): Promise<void> {
    const answer = await this.parts.api.readGarage();
    if (!answer.ok) return this.#failed(answer);
    const snapshot = snapshotFrom(answer.value);
    if (!snapshot) return this.#failed({ ok: false, why: 'no-signal' });
    await this.parts.store.putNote(snapshotNote, snapshot);
    this.#show({ snapshot, signal: 'ok' });
    await this.sendAll();
    await this.#fetchOthers(snapshot);
  }

  async create(kind: DraftKind, subject: string, id = mintId(), refersToSeq?: number): Promise<OpenDraft> {
    const at = this.parts.now().toISOString();
    const person = this.view.snapshot?.person.id ?? '';
    const draft: KeptDraft = {
      id, kind, subject, person, createdAt: at, changedAt: at, isOnServer: false, state: 'open',
      ...(refersToSeq === undefined ? {} : { refersToSeq }),
    }; // prettier-ignore
    await this.parts.store.putDraft(draft);
    return this.#hold(draft);
  }

  /** A draft by id: from this device, else from the server. */
  async open(id: string): Promise<Answer<OpenDraft>> {
    // A draft belongs to a person, so on a fresh device who that is comes first.
    if (!this.view.snapshot) {
      const asked = this.#firstRefresh ?? this.refresh();
      this.#firstRefresh = undefined;
      await asked;
    }
    if (!this.view.snapshot)
      return { ok: false, why: this.view.signal === 'not-signed-in' ? 'not-signed-in' : 'no-signal' };
    const here = this.#opened.get(id);
    if (here) return { ok: true, value: here };
    const answer = await this.parts.api.readDraft(id);
    if (!answer.ok) {
      this.#show({ signal: answer.why === 'refused' ? 'ok' : answer.why });
      return answer;
    }
    const { kind, subject, createdAt, changedAt, refersToSeq } = answer.value.draft;
    const at = this.parts.now().toISOString();
    const person = this.view.snapshot?.person.id ?? '';
    const draft: KeptDraft = {
      id, kind, subject, person, createdAt: createdAt ?? at, changedAt: changedAt ?? at,
      isOnServer: true, state: 'open', ...(typeof refersToSeq === 'number' ? { refersToSeq } : {}),
    }; // prettier-ignore
    const meanwhile = this.#opened.get(id);
    if (meanwhile) return { ok: true, value: meanwhile };
    await this.parts.store.putDraft(draft);
    const opened = await this.#hold(draft);
    await fetchDraft({ ...this.parts.api, readDraft: async () => answer }, opened);
    return { ok: true, value: opened };
  }

  async addFile(opened: OpenDraft, file: Pick<KeptFile, 'name' | 'mediaType'> & { blob: Blob }): Promise<KeptFile> {
    const kept: KeptFile = {
      id: mintId(), draftId: opened.view.draft.id, ...file, bytes: file.blob.size,
      addedAt: this.parts.now().toISOString(), state: 'waiting',
    }; // prettier-ignore
    await this.parts.store.putFile(kept);
    await this.#showFiles(opened);
    this.sendSoon(0);
    return kept;
  }

  async removeFile(opened: OpenDraft, id: string): Promise<void> {
    await this.parts.store.deleteFile(id);
    await this.#showFiles(opened);
  }

  async retryFile(opened: OpenDraft, id: string): Promise<void> {
    const file = await this.parts.store.readFile(id);
    if (!file?.blob) return;
    await this.parts.store.putFile({ ...without(file, 'refusal'), state: 'waiting' });
    await opened.set({ [`photos/${id}/removed`]: null });
    await this.#showFiles(opened);
    this.sendSoon(0);
  }

  /** Discards a draft everywhere. Needs the server once the server knows the draft. */
  async discard(opened: OpenDraft): Promise<Answer<unknown>> {
    const { id, isOnServer } = opened.view.draft;
    const answer = isOnServer ? await this.parts.api.discardDraft(id) : ({ ok: true, value: undefined } as const);
    // Discarded on another device already, or no longer shared: there is nothing left to discard.
    const isGone = !answer.ok && answer.why === 'refused' && ['conflict', 'not-found'].includes(answer.code);
    if (!answer.ok && !isGone) return answer;
    await this.forget(id);
    // The server's picture still lists it.
    void this.refresh();
    return { ok: true, value: undefined };
  }

  /** Moves a worksheet to another machine. Needs the server once the server knows it. */
  async move(opened: OpenDraft, subject: string): Promise<Answer<unknown>> {
    const { id, isOnServer } = opened.view.draft;
    const answer = isOnServer ? await this.parts.api.moveDraft(id, subject) : ({ ok: true, value: undefined } as const);
    if (answer.ok) await opened.settle([], { accepted: [], draft: { subject } });
    return answer;
  }

  /** Sends all there is and seals the receipt on its shelf. */
  async confirmReceipt(opened: OpenDraft): Promise<Answer<{ log: string; seq: number }>> {
    await this.sendAll();
    const { draft, unsentCount, files } = opened.view;
    if (unsentCount > 0 || files.some(({ state }) => state === 'waiting')) {
      return { ok: false, why: this.view.signal === 'not-signed-in' ? 'not-signed-in' : 'no-signal' };
    }
    const answer = await this.parts.api.confirmReceipt(draft.id);
    if (answer.ok) {
      await opened.settle([], { accepted: [], draft: { state: 'sealed', sealed: answer.value } });
      void this.refresh();
    }
    return answer;
  }

  /** Takes a draft off this device, with whatever it holds. */
  async forget(id: string): Promise<void> {
    await this.parts.store.deleteDraft(id);
    this.#opened.delete(id);
    this.#show({});
  }

  /** Sends once typing has paused; typing on puts it off. */
  sendSoon(milliseconds = settleInMilliseconds): void {
    this.#callOff?.();
    this.#callOff = this.parts.later(() => void this.sendAll(), milliseconds);
  }

  /** Sends all that waits. One run at a time; asked meanwhile, it runs once more. */
  async sendAll(): Promise<void> {
    this.#callOff?.();
    this.#isWanted = true;
    this.#sending ??= (async () => {
      try {
        while (this.#isWanted) {
          this.#isWanted = false;
          await this.#sendOnce();
        }
      } finally {
        this.#sending = undefined;
      }
    })();
    return this.#sending;
  }

  async #sendOnce(): Promise<void> {
    const { api, now } = this.parts;
    for (const opened of this.#mine()) {
      const waiting = opened.view.files.filter(({ state }) => state === 'waiting');
      if (opened.view.draft.state !== 'open' || (opened.view.unsentCount === 0 && waiting.length === 0)) continue;
      const failure =
        (await (opened.view.unsentCount > 0 ? sendDraft(api, opened, now) : announceDraft(api, opened))) ??
        (await this.#sendFiles(opened));
      if (failure === undefined) {
        if (opened.view.draft.refusal !== undefined) await opened.clearRefusal();
        this.#show({ signal: 'ok' });
      } else if (failure.why === 'refused') {
        // Sealed, discarded or no longer shared: learn which, and keep what is here.
        await opened.settle([], { accepted: [], draft: { refusal: failure.sentence } });
        if (failure.code === 'already-sealed' || failure.code === 'conflict') await fetchDraft(api, opened);
      } else {
        return this.#failed(failure);
      }
    }
    this.#retryIn = firstRetryInMilliseconds;
  }

  async #sendFiles(opened: OpenDraft): Promise<Failure | undefined> {
    const answer = await sendWaitingFiles(this.parts.store, opened.view.draft.id, this.parts.send, {
      progress: (id, share) => {
        const others = without(this.view.progress, id);
        this.#show({ progress: share === undefined ? others : { ...others, [id]: share } });
      },
      changed: () => this.#showFiles(opened),
    });
    // A file that cannot arrive must not stand in the way of sealing; trying again puts it back.
    for (const { id, state } of opened.view.files) {
      if (state === 'refused') void opened.set({ [`photos/${id}/removed`]: 'yes' });
    }
    return answer.ok ? undefined : answer;
  }

  #failed(failure: Failure): void {
    if (failure.why === 'refused') return;
    this.#show({ signal: failure.why });
    // Signing in is the person's to do; asking again and again would only empty the battery.
    if (failure.why === 'not-signed-in') return;
    this.sendSoon(this.#retryIn);
    this.#retryIn = Math.min(this.#retryIn * 2, lastRetryInMilliseconds);
  }

  async #fetchOthers(snapshot: GarageSnapshot): Promise<void> {
    for (const { id } of snapshot.drafts) {
      const here = this.#opened.get(id);
      const answer = here ? await fetchDraft(this.parts.api, here) : await this.open(id);
      if (answer && !answer.ok && answer.why !== 'refused') return;
    }
    const open = new Set(snapshot.drafts.map(({ id }) => id));
    for (const opened of this.#mine()) {
      const { draft } = opened.view;
      if (draft.isOnServer && draft.state === 'open' && !open.has(draft.id)) {
        const failure = await fetchDraft(this.parts.api, opened);
        if (failure?.why === 'refused') {
          await opened.settle([], { accepted: [], draft: { refusal: failure.sentence } });
        }
      }
    }
    this.#show({});
  }

  async #hold(draft: KeptDraft): Promise<OpenDraft> {
    const opened = await OpenDraft.load(this.parts.store, draft, this.parts.now);
    this.#opened.set(draft.id, opened);
    let unsent = opened.view.unsentCount;
    opened.subscribe(() => {
      if (opened.view.unsentCount > unsent) {
        this.sendSoon();
        this.parts.tell?.(draft.id);
      }
      unsent = opened.view.unsentCount;
      this.#show({});
    });
    this.#show({});
    return opened;
  }

  /** Another tab wrote to a draft on this device. */
  async heard(draftId: string): Promise<void> {
    const here = this.#opened.get(draftId);
    if (here) return here.reload();
    const draft = await this.parts.store.readDraft(draftId);
    if (draft) await this.#hold(draft);
  }

  async #showFiles(opened: OpenDraft): Promise<void> {
    opened.showFiles(await this.parts.store.readFiles(opened.view.draft.id));
  }

  #mine(): OpenDraft[] {
    const person = this.view.snapshot?.person.id;
    return [...this.#opened.values()].filter(({ view }) => view.draft.person === person);
  }

  #show(changed: Partial<GarageView>): void {
    this.view = { ...this.view, ...changed };
    const drafts = this.#mine().sort((a, b) => (a.view.draft.createdAt < b.view.draft.createdAt ? 1 : -1));
    this.view = { ...this.view, drafts };
    for (const listener of this.#listeners) listener();
  }
}
