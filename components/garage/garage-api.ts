import { paths } from '@/lib/paths';
import type { FieldChange } from '@/lib/domain/field-changes';
import type { DraftKind, UploadAnswer } from './draft-store';

/** Why the server did not do it. `no-signal` also stands for a server that is down: try again later. */
export type Failure =
  | { ok: false; why: 'no-signal' }
  | { ok: false; why: 'not-signed-in' }
  | { ok: false; why: 'refused'; code: string; sentence: string; fields: Record<string, string> };
export type Answer<T> = { ok: true; value: T } | Failure;

export interface DraftAnswer {
  draft: {
    id: string;
    kind: DraftKind;
    subject: string;
    state?: 'open' | 'sealed' | 'discarded';
    createdAt?: string;
    changedAt?: string;
    sealedLog?: string | null;
    sealedSeq?: number | null;
    refersToSeq?: number | null;
  };
  changes: FieldChange[];
  uploads: UploadAnswer[];
  /** Server time to ask from next time. */
  at: string;
}

export interface SentAnswer {
  accepted: string[];
  /** Changes the server will not have, each with its sentence. */
  refused: { id: string; sentence: string }[];
  changes: FieldChange[];
  /** Server time to ask from next time. */
  at: string;
}

/** The server as the garage sees it; tests give their own. */
export interface GarageApi {
  readGarage(): Promise<Answer<unknown>>;
  openDraft(draft: { id: string; kind: DraftKind; subject: string; refersToSeq?: number }): Promise<Answer<unknown>>;
  readDraft(id: string): Promise<Answer<DraftAnswer>>;
  sendChanges(
    id: string,
    changes: Pick<FieldChange, 'id' | 'field' | 'value' | 'deviceAt'>[],
    since: string | undefined,
  ): Promise<Answer<SentAnswer>>;
  moveDraft(id: string, subject: string): Promise<Answer<unknown>>;
  discardDraft(id: string): Promise<Answer<unknown>>;
  confirmReceipt(id: string): Promise<Answer<{ log: string; seq: number }>>;
}

interface Problem {
  title?: string;
  detail?: string;
  code?: string;
  fields?: Record<string, string>;
}

/** What a status and its problem details (RFC 9457) mean for what is kept on the device. */
export function failureOf(status: number, problem: Problem): Failure {
  if (status === 401) return { ok: false, why: 'not-signed-in' };
  // A full disk, a busy server or a proxy's error page pass; only a judgement about the content is a refusal.
  if (status === 0 || status === 408 || status === 429 || status >= 500) return { ok: false, why: 'no-signal' };
  return {
    ok: false,
    why: 'refused',
    code: problem.code ?? String(status),
    sentence: problem.title ?? problem.detail ?? `The server answered ${status}.`,
    fields: problem.fields ?? {},
  };
}

const patienceInMilliseconds = 30_000;

async function ask<T>(url: string, body?: unknown, method = body === undefined ? 'GET' : 'POST'): Promise<Answer<T>> {
  try {
    const response = await fetch(url, {
      method,
      credentials: 'same-origin',
      cache: 'no-store',
      redirect: 'error',
      signal: AbortSignal.timeout(patienceInMilliseconds),
      ...(body === undefined
        ? {}
        : { headers: { 'content-type': 'application/json' }, body: JSON.stringify(body), keepalive: isSmall(body) }),
    });
    if (response.status === 204) return { ok: true, value: undefined as T };
    if (response.ok) return { ok: true, value: (await response.json()) as T };
    return failureOf(response.status, ((await response.json().catch(() => ({}))) ?? {}) as Problem);
  } catch {
    return { ok: false, why: 'no-signal' };
  }
}

// Browsers let at most 64 KiB outlive a page (Fetch standard, keepalive).
const keepaliveLimitInBytes = 60_000;
const isSmall = (body: unknown): boolean => JSON.stringify(body).length * 2 < keepaliveLimitInBytes;

export const garageApi: GarageApi = {
  readGarage: () => ask(paths.api.garage),
  openDraft: (draft) => ask(paths.api.drafts, draft),
  readDraft: (id) => ask(paths.api.draft(id)),
  sendChanges: (id, changes, since) =>
    ask(paths.api.draft(id) + (since === undefined ? '' : `?since=${encodeURIComponent(since)}`), { changes }),
  moveDraft: (id, subject) => ask(paths.api.draft(id), { subject }, 'PATCH'),
  discardDraft: (id) => ask(paths.api.draft(id), undefined, 'DELETE'),
  confirmReceipt: (id) => ask(paths.api.confirmReceipt(id), {}),
};
