import type { DraftAnswer, Failure, GarageApi } from './garage-api';
import type { KeptChange, KeptDraft } from './draft-store';
import type { OpenDraft } from './open-draft';

/** How the last talk with the server went. */
export type Signal = 'unknown' | 'ok' | 'no-signal' | 'not-signed-in';

const changesPerRequest = 200;

function draftFrom({ subject, state, sealedLog, sealedSeq }: DraftAnswer['draft']): Partial<KeptDraft> {
  return {
    isOnServer: true,
    subject,
    ...(state ? { state } : {}),
    ...(sealedLog && typeof sealedSeq === 'number' ? { sealed: { log: sealedLog, seq: sealedSeq } } : {}),
  };
}

/** Makes the draft known to the server; safe to repeat. */
export async function announceDraft(api: GarageApi, opened: OpenDraft): Promise<Failure | undefined> {
  const { id, kind, subject, refersToSeq, isOnServer } = opened.view.draft;
  if (isOnServer) return undefined;
  const answer = await api.openDraft({ id, kind, subject, ...(refersToSeq === undefined ? {} : { refersToSeq }) });
  if (!answer.ok) return answer;
  await opened.settle([], { accepted: [], draft: { isOnServer: true } });
  return undefined;
}

/**
 * Sends what a draft has not sent, and takes in what other devices wrote. A change the server will not have is set
 * aside with its sentence, so that it does not hold up the others.
 */
export async function sendDraft(
  api: GarageApi,
  opened: OpenDraft,
  now: () => Date,
  most = changesPerRequest,
): Promise<Failure | undefined> {
  const unannounced = await announceDraft(api, opened);
  if (unannounced) return unannounced;
  while (opened.view.unsentCount > 0) {
    const batch = opened.takeUnsent(most);
    const failure = await sendBatch(api, opened, batch);
    if (failure?.why === 'refused' && failure.code === 'invalid-input' && batch.length > 1) {
      const alone = await sendDraft(api, opened, now, 1);
      if (alone) return alone;
      break;
    }
    if (failure) return failure;
  }
  opened.isAllSent(now().toISOString());
  return undefined;
}

async function sendBatch(api: GarageApi, opened: OpenDraft, batch: KeptChange[]): Promise<Failure | undefined> {
  const { id, since } = opened.view.draft;
  const sent = batch.map(({ id: changeId, field, value, deviceAt }) => ({ id: changeId, field, value, deviceAt }));
  const answer = await api.sendChanges(id, sent, since);
  if (!answer.ok) {
    const isThisOne = answer.why === 'refused' && answer.code === 'invalid-input' && batch.length === 1;
    const refused = isThisOne ? { refused: sentenceFor(batch, answer.sentence) } : {};
    await opened.settle(batch, { accepted: [], ...refused });
    return isThisOne ? undefined : answer;
  }
  const { accepted, refused = [], changes: others, at } = answer.value;
  // An answer that names none of the changes would be asked for ever: what is neither is set aside.
  const isNamed = accepted.length + refused.length > 0;
  const sentences = isNamed
    ? Object.fromEntries(refused.map(({ id: changeId, sentence }) => [changeId, sentence]))
    : sentenceFor(batch, 'The server did not take this change and did not say why.');
  await opened.settle(batch, { accepted, refused: sentences, others, ...(at ? { draft: { since: at } } : {}) });
  return undefined;
}

function sentenceFor(batch: KeptChange[], sentence: string): Record<string, string> {
  return Object.fromEntries(batch.map(({ id }) => [id, sentence]));
}

/** Takes in the server's whole picture of a draft: what other devices wrote, which uploads it has, whether it is sealed. */
export async function fetchDraft(api: GarageApi, opened: OpenDraft): Promise<Failure | undefined> {
  const answer = await api.readDraft(opened.view.draft.id);
  if (!answer.ok) return answer;
  const { draft, changes, uploads, at } = answer.value;
  await opened.settle([], {
    accepted: [],
    others: changes,
    draft: { ...draftFrom(draft), ...(at ? { since: at } : {}) },
  });
  opened.showFiles(opened.view.files, uploads ?? []);
  return undefined;
}
