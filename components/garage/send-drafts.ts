import type { Failure, GarageApi } from './garage-api';
import type { KeptChange, KeptDraft } from './draft-store';
import type { OpenDraft } from './open-draft';

/** How the last talk with the server went. */
export type Signal = 'unknown' | 'ok' | 'no-signal' | 'not-signed-in';

const changesPerRequest = 200;

/** Told of a draft by the server: its state there, and where it was sealed. */
function draftFrom(answer: {
  subjectId?: string;
  subject?: string;
  state?: KeptDraft['state'];
  sealedLog?: string | null;
  sealedSeq?: number | null;
}): Partial<KeptDraft> {
  const subject = answer.subjectId ?? answer.subject;
  return {
    isOnServer: true,
    ...(answer.state ? { state: answer.state } : {}),
    ...(subject ? { subject } : {}),
    ...(answer.sealedLog && typeof answer.sealedSeq === 'number'
      ? { sealed: { log: answer.sealedLog, seq: answer.sealedSeq } }
      : {}),
  };
}

function latestServerTime(changes: readonly { serverAt?: string }[], since: string | undefined): string | undefined {
  return changes.reduce<string | undefined>(
    (latest, { serverAt }) =>
      serverAt !== undefined && (latest === undefined || serverAt > latest) ? serverAt : latest,
    since,
  );
}

/** Makes the draft known to the server; safe to repeat. */
export async function announceDraft(api: GarageApi, opened: OpenDraft): Promise<Failure | undefined> {
  const { id, kind, subject, isOnServer } = opened.view.draft;
  if (isOnServer) return undefined;
  const answer = await api.openDraft({ id, kind, subject });
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
    await opened.settle(batch, { accepted: [], ...(isThisOne ? { refused: answer.sentence } : {}) });
    return isThisOne ? undefined : answer;
  }
  const { accepted, changes: others } = answer.value;
  const newSince = latestServerTime(others, since);
  // An answer that names none of the changes would be asked for ever; what is not accepted is set aside.
  const refused =
    accepted.length === 0 ? { refused: 'The server did not accept this change and did not say why.' } : {};
  await opened.settle(batch, {
    accepted,
    others,
    ...refused,
    draft: newSince === undefined ? {} : { since: newSince },
  });
  return undefined;
}

/** Takes in the server's whole picture of a draft: what other devices wrote, which uploads it has, whether it is sealed. */
export async function fetchDraft(api: GarageApi, opened: OpenDraft): Promise<Failure | undefined> {
  const answer = await api.readDraft(opened.view.draft.id);
  if (!answer.ok) return answer;
  const { draft, changes, uploads } = answer.value;
  const since = latestServerTime(changes, undefined);
  await opened.settle([], {
    accepted: [],
    others: changes,
    draft: { ...draftFrom(draft), ...(since === undefined ? {} : { since }) },
  });
  opened.showFiles(opened.view.files, uploads ?? []);
  return undefined;
}
