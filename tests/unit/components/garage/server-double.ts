import type { DraftAnswer, Failure, GarageApi } from '@/components/garage/garage-api';

/** A server of one person, held in memory, that answers by the drafts contract. */
export class ServerDouble implements GarageApi {
  drafts = new Map<string, DraftAnswer>();
  requests: string[] = [];
  /** While set, every request fails this way. */
  failing: Failure | undefined;
  /** Fields the server will not have. */
  badFields = new Set<string>();
  /** Whether one such field has the whole request refused. */
  refusesWhole = false;
  #clock = Date.parse('2026-04-18T12:00:00.000Z');

  constructor(readonly person = 'imke') {}

  #stamp(): string {
    this.#clock += 1;
    return new Date(this.#clock).toISOString();
  }

  async readGarage() {
    if (this.failing) return this.failing;
    const drafts = [...this.drafts.values()].map(({ draft }) => ({ ...draft, title: '' }));
    return { ok: true, value: { person: { id: this.person }, machines: [], shelves: [], drafts } } as const;
  }
  async openDraft({ id, kind, subject }: Parameters<GarageApi['openDraft']>[0]) {
    this.requests.push(`open ${id}`);
    if (this.failing) return this.failing;
    const draft = { id, kind, subject, state: 'open' as const };
    if (!this.drafts.has(id)) this.drafts.set(id, { draft, changes: [], uploads: [], at: this.#stamp() });
    return { ok: true, value: {} } as const;
  }
  async readDraft(id: string) {
    if (this.failing) return this.failing;
    const value = this.drafts.get(id);
    return value
      ? ({ ok: true, value: structuredClone(value) } as const)
      : refusal('not-found', 'There is no such draft.');
  }
  async sendChanges(...[id, changes, since]: Parameters<GarageApi['sendChanges']>) {
    this.requests.push(`send ${changes.map(({ field }) => field).join(' ')}`);
    if (this.failing) return this.failing;
    const held = this.drafts.get(id);
    if (!held) return refusal('not-found', 'There is no such draft.');
    if (held.draft.state === 'sealed') return refusal('already-sealed', 'This worksheet is sealed as entry 12.');
    const bad = changes.filter(({ field }) => this.badFields.has(field));
    if (bad.length > 0 && this.refusesWhole) return refusal('invalid-input', 'This text is too long.');
    const serverAt = this.#stamp();
    const own = new Set(changes.map((change) => change.id));
    for (const change of changes) {
      if (bad.includes(change)) own.delete(change.id);
      else if (!held.changes.some((one) => one.id === change.id)) held.changes.push({ ...change, serverAt });
    }
    const others = held.changes.filter(
      (one) => !own.has(one.id) && (since === undefined || (one.serverAt ?? '') > since),
    );
    const refused = bad.map(({ id: badId }): { id: string; sentence: string } => ({
      id: badId,
      sentence: 'This text is too long.',
    }));
    return {
      ok: true as const,
      value: { accepted: [...own], refused, changes: structuredClone(others), at: serverAt },
    };
  }
  async moveDraft() {
    return this.failing ?? ({ ok: true, value: {} } as const);
  }
  async discardDraft() {
    return this.failing ?? ({ ok: true, value: {} } as const);
  }
  async confirmReceipt() {
    return { ok: true, value: { log: 'log', seq: 1 } } as const;
  }
}

export function refusal(code: string, sentence: string): Failure {
  return { ok: false, why: 'refused', code, sentence, fields: {} };
}
